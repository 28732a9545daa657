"""What the quadrant reports show: each position's demand beside its capability."""

from rulecheck.capability import Capabilities, Capability
from rulecheck.demand import (
    Bridge,
    Demands,
    Group,
    Leg,
    PositionDemand,
    Undetermined,
    polarities_of,
)
from rulecheck.stage import Position, Stage
from rulecheck.values import QuadrantSet, Unknown, natural_key
from rulecheck.values.record import Record

_NO_POSITION = (
    "no switch position was found, so nothing was compared: are the power devices understood?"
)


class PositionResult(Record):
    position: Position
    demand: PositionDemand
    capability: Capability

    @property
    def needs(self) -> QuadrantSet | Unknown:
        return self.demand.quadrants

    @property
    def missing(self) -> QuadrantSet:
        """The demanded quadrants that the devices lack; none where demand is not known."""
        if isinstance(self.needs, Unknown):
            return QuadrantSet()
        return self.needs.without(self.capability.quadrants)

    @property
    def covered(self) -> bool | None:
        """By quadrants, and by polarity where no current is asked; ratings are compared beside it.

        None where demand is not known.
        """
        if isinstance(self.needs, Unknown):
            return None
        return not self.missing.members and self._holds_off()

    def _holds_off(self) -> bool:
        off = self.demand.off_voltage
        if isinstance(off, Unknown):
            return True
        ways = {True: self.capability.forward, False: self.capability.reverse}
        return all(ways[positive].holds_off for positive in polarities_of(off))


class QuadrantResult(Record):
    netlist: str
    positions: tuple[PositionResult, ...]
    legs: tuple[Leg, ...]
    bridges: tuple[Bridge, ...]
    groups: tuple[Group, ...]
    undetermined: tuple[Undetermined, ...]
    assumed: tuple[str, ...]
    not_covered: tuple[str, ...]


def quadrant_result(stage: Stage, capabilities: Capabilities, demands: Demands) -> QuadrantResult:
    """Join what the steps found, in natural order of names; nothing is judged here."""
    return QuadrantResult(
        stage.netlist,
        tuple(
            _position_result(position, capabilities, demands)
            for position in sorted(stage.positions, key=lambda p: natural_key(p.name))
        ),
        tuple(sorted(demands.legs, key=lambda leg: natural_key(leg.name))),
        tuple(sorted(demands.bridges, key=lambda bridge: natural_key(bridge.name))),
        tuple(sorted(demands.groups, key=lambda group: natural_key(group.positions[0]))),
        open_questions(stage, demands),
        assumptions(stage, demands),
        what_is_not_covered(stage, demands),
    )


def open_questions(stage: Stage, demands: Demands) -> tuple[Undetermined, ...]:
    """Every quantity and every part that stayed open, each with what settles it."""
    return (*demands.undetermined, *(_not_understood(name, stage) for name in _unread(stage)))


def assumptions(stage: Stage, demands: Demands) -> tuple[str, ...]:
    """Every reading that the user may overrule, each once."""
    return _without_repeats((*stage.parts.assumed, *stage.assumed, *demands.assumed))


def what_is_not_covered(stage: Stage, demands: Demands) -> tuple[str, ...]:
    groups = tuple(
        f"{', '.join(group.positions)}: not analysed, {group.why_not}"
        for group in demands.groups
        if not group.analysed
    )
    nothing = () if stage.positions else (_NO_POSITION,)
    positions = tuple(line for d in demands.positions.values() for line in d.not_covered)
    return _without_repeats(
        (*nothing, *stage.not_covered, *demands.not_covered, *positions, *groups)
    )


def _position_result(
    position: Position, capabilities: Capabilities, demands: Demands
) -> PositionResult:
    demand = demands.positions.get(position.name) or _no_demand(position.name)
    return PositionResult(position, demand, capabilities.positions[position.name])


def _no_demand(name: str) -> PositionDemand:
    """A position outside every group was not analysed, which is not the same as unstressed."""
    unknown = Unknown(f"demand of {name}", "a stage sheet with the ports of this circuit")
    return PositionDemand(name, unknown, unknown, unknown, None, None, None, None)


def _unread(stage: Stage) -> tuple[str, ...]:
    return tuple(sorted(set(stage.parts.not_understood), key=natural_key))


def _not_understood(name: str, stage: Stage) -> Undetermined:
    part = stage.parts.by_name.get(name)
    if part is None:
        return Undetermined(
            f"{name} is missing from the analysis: its card could not be read",
            "a card that can be read",
        )
    where = part.settle_in or f"part {part.text or name}"
    return Undetermined(f"{name} is not understood: its kind is not known", f"kind of {where}")


def _without_repeats(lines: tuple[str, ...]) -> tuple[str, ...]:
    return tuple(dict.fromkeys(lines))
