"""Why a position must block and carry what it must, and how its devices stand to that."""

from rulecheck.capability import Capabilities, Direction
from rulecheck.demand import Demands, PositionDemand, Witness
from rulecheck.report.explain_gate import explain_gates
from rulecheck.report.explain_timing import timing_entries
from rulecheck.report.explain_variable import variable_entries
from rulecheck.report.explanation import Entry, Explanation
from rulecheck.report.figures import figure, range_figure, share
from rulecheck.report.look import PLAIN, Look
from rulecheck.report.quadrant_result import PositionResult, quadrant_result
from rulecheck.report.standing import standing
from rulecheck.stage import Position, Stage
from rulecheck.values import Interval, QuadrantSet, Unknown

_NO_RATING = "no: nothing in it is stated to withstand that polarity"


def explain_position(
    position: Position,
    stage: Stage,
    capabilities: Capabilities,
    demands: Demands,
    look: Look = PLAIN,
) -> Explanation:
    """What `explain_row` tells of the position of that name."""
    rows = quadrant_result(stage, capabilities, demands).positions
    row = next(row for row in rows if row.position.name == position.name)
    return explain_row(row, stage, demands, look)


def explain_row(
    row: PositionResult, stage: Stage, demands: Demands, look: Look = PLAIN
) -> Explanation:
    """Demand with its witnesses, capability with its weakest chain, and the comparison."""
    position = row.position
    title = f"{position.name}  switch position from {position.start} to {position.end}"
    return Explanation(
        f"{title}  ({position.span})",
        (
            Entry("drawn as", _parts(position, stage)),
            *_demand_entries(row.demand, stage, demands, look),
            Entry("needs", _quadrants(row.needs, look)),
            Entry("has", _quadrants(row.capability.quadrants, look)),
            *_capability_entries(row),
            Entry("result", ", ".join(standing(row))),
            *explain_gates(position, stage),
            *_surroundings(position.name, demands),
            *(
                entry
                for leg in demands.legs
                if position.name in (*leg.high, *leg.low)
                for entry in timing_entries(leg, stage, look)
            ),
            *(Entry("not covered", line) for line in row.demand.not_covered),
        ),
    )


def _parts(position: Position, stage: Stage) -> str:
    named = (stage.parts.by_name.get(name) for name in position.parts)
    return ", ".join(f"{part.name} ({part.kind} {part.text})" for part in named if part)


def _demand_entries(
    demand: PositionDemand, stage: Stage, demands: Demands, look: Look
) -> tuple[Entry, ...]:
    witnesses = (demand.off_low, demand.off_high, demand.on_low, demand.on_high)
    names = [name for witness in witnesses if witness for name in witness.form.names]
    return (
        Entry("must block", _range(demand.off_voltage, "V", look)),
        *_witness_entries(demand.off_low, demand.off_high, "V", demands),
        Entry("must carry", _range(demand.on_current, "A", look)),
        *_witness_entries(demand.on_low, demand.on_high, "A", demands),
        *variable_entries(names, stage, demands, 1, look),
    )


def _range(value: Interval | Unknown, unit: str, look: Look) -> str:
    if isinstance(value, Unknown):
        return f"unknown: {value.what}; settle with {value.settle}"
    return range_figure(value, unit, look)


def _witness_entries(
    low: Witness | None, high: Witness | None, unit: str, demands: Demands
) -> tuple[Entry, ...]:
    found = [witness for witness in (low, high) if witness is not None]
    if len(found) == 2 and found[0] == found[1]:
        found.pop()
    return tuple(
        Entry(figure(witness.value, unit), _witness_text(witness, demands), 1) for witness in found
    )


def _witness_text(witness: Witness, demands: Demands) -> str:
    units = {variable.name: variable.unit for variable in demands.variables}
    state = f"while {_and(witness.on)} on" if witness.on else "while no position is on"
    text = f"{state}: {witness.form.text()}"
    corner = ", ".join(
        f"{name} = {figure(value, units.get(name, ''))}" for name, value in witness.corner
    )
    return f"{text}, at {corner}" if corner else text


def _and(names: tuple[str, ...]) -> str:
    if len(names) == 1:
        return f"{names[0]} is"
    return f"{', '.join(names[:-1])} and {names[-1]} are"


def _quadrants(quadrants: QuadrantSet | Unknown, look: Look) -> str:
    if isinstance(quadrants, Unknown):
        return f"unknown: {quadrants.what}; settle with {quadrants.settle}"
    block = "" if look.ascii else f"{quadrants.block} "
    return f"{block}{quadrants.label}, {quadrants.class_name}"


def _capability_entries(row: PositionResult) -> tuple[Entry, ...]:
    voltage, current = row.demand.off_voltage, row.demand.on_current
    sides = (("forward", row.capability.forward, 1.0), ("reverse", row.capability.reverse, -1.0))
    entries = [
        Entry(f"blocks {name}", _blocking(direction, _asked(voltage, sign)), 1)
        for name, direction, sign in sides
    ]
    entries += [
        Entry(f"carries {name}", _carrying(direction, _asked(current, sign)), 1)
        for name, direction, sign in sides
    ]
    missing = dict.fromkeys(
        unknown.settle for _, direction, _ in sides for unknown in direction.missing
    )
    return (*entries, *(Entry("not stated", settle, 1) for settle in missing))


def _asked(demand: Interval | Unknown, sign: float) -> float | None:
    if isinstance(demand, Unknown):
        return None
    return max(sign * (demand.high if sign > 0 else demand.low), 0.0)


def _blocking(direction: Direction, asked: float | None) -> str:
    if not direction.holds_off:
        return "no: current flows freely that way" if direction.freewheels else _NO_RATING
    weakest = f", {_chain(direction.weakest)} decides" if direction.weakest else ""
    return _use(direction.blocks, direction.blocks_at_least, asked, "V") + weakest


def _carrying(direction: Direction, asked: float | None) -> str:
    if not direction.carries:
        return f"no, {figure(asked, 'A')} asked" if asked else "no"
    way = "without any gate" if direction.freewheels else "with the gates on"
    path = f"by a path through {_chain(direction.carried_by)} " if direction.carried_by else ""
    return f"{_use(direction.current, direction.current_at_least, asked, 'A')}, {path}{way}"


def _chain(names: tuple[str, ...]) -> str:
    return ", ".join(dict.fromkeys(names))


def _use(rating: float | Unknown, at_least: float, asked: float | None, unit: str) -> str:
    if isinstance(rating, Unknown):
        known = f", at least {figure(at_least, unit)}" if at_least else ""
        return f"rating unknown{known}" + (f", {figure(asked, unit)} asked" if asked else "")
    if not asked:
        return figure(rating, unit) + (", nothing asked" if asked == 0.0 else "")
    used = f", {share(asked, rating)} of the rating" if rating else ""
    return f"{figure(rating, unit)}, {figure(asked, unit)} asked{used}"


def _surroundings(name: str, demands: Demands) -> tuple[Entry, ...]:
    """The leg that the position belongs to, and what happens to it beyond the states."""
    legs = [leg for leg in demands.legs if name in (*leg.high, *leg.low, *leg.others)]
    groups = [group for group in demands.groups if name in group.positions]
    return (
        *(Entry("leg", f"{leg.name}, {leg.kind} on {', '.join(leg.rails)}") for leg in legs),
        *(
            Entry("group", f"{', '.join(group.positions)}: {_states(len(group.states))}")
            for group in groups
            if group.analysed
        ),
        *(Entry("not analysed", group.why_not) for group in groups if not group.analysed),
        *(
            Entry(
                "recovers",
                f"its free path carries {figure(event.current, 'A')} and is turned off against"
                f" {figure(event.voltage, 'V')} when {event.by} turns on",
            )
            for event in demands.hard_commutations
            if event.position == name
        ),
        *(
            Entry("free short", f"with all gates off it shorts {short.across}")
            for short in demands.free_shorts
            if name in short.positions
        ),
    )


def _states(count: int) -> str:
    return "1 legal state" if count == 1 else f"{count} legal states"
