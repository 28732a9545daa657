"""Facts of switch positions: what each must do beside what it can do."""

from collections.abc import Iterable, Sequence

from rulecheck.capability import Capability, Direction
from rulecheck.demand import PositionDemand, Witness
from rulecheck.demand.evaluate import SMALL, SMALL_VOLTAGE
from rulecheck.facts.asked import Asked, largest, whole
from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.free_path_facts import names_by_position
from rulecheck.facts.gate_pair import command_count, takes_turns
from rulecheck.facts.inputs import Inputs, at_least, group_name
from rulecheck.facts.position_build import (
    free_path_doubled,
    leakage_unguarded,
    parallel_alike,
    parallel_devices,
    peak_current,
    series_diode,
    shared_voltage,
)
from rulecheck.facts.waveform_facts import position_values
from rulecheck.parts import Part
from rulecheck.stage import Position
from rulecheck.values import Interval, Quadrant, QuadrantSet, Unknown

_FEW = 3
_MIRRORED = {
    Quadrant.I: Quadrant.III,
    Quadrant.II: Quadrant.IV,
    Quadrant.III: Quadrant.I,
    Quadrant.IV: Quadrant.II,
}


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    """One subject a position; a position without a demand record has an unknown demand."""
    free_paths = names_by_position(inputs.demands)
    return tuple(_subject(inputs, p, free_paths) for p in inputs.stage.positions)


def _subject(
    inputs: Inputs, position: Position, free_paths: dict[tuple[str, str], tuple[str, ...]]
) -> Subject:
    demand = inputs.demands.positions[position.name]
    capability = inputs.capabilities.positions[position.name]
    devices = [inputs.part_by_name[name] for name in position.parts]
    return Subject(
        "position",
        position.name,
        {
            "from": position.start,
            "to": position.end,
            "gated": position.gated,
            **_demand_values(inputs, demand),
            **_capability_values(inputs, capability),
            **_build_values(inputs, position, capability, devices),
            "forbids": _forbids(inputs, position.name),
            "across-voltage": (position.start, position.end) in inputs.voltage_between,
            "turned": _turned(demand.quadrants, capability.quadrants),
            **position_values(inputs, position.name),
            "leakage-unguarded": leakage_unguarded(inputs, position),
            "tied": position.name not in inputs.group_of_position,
            "commands": command_count(inputs, position),
            "takes-turns": takes_turns(inputs, position),
        },
        _links(inputs, position, devices, free_paths),
        position.parts,
        (position.start, position.end),
        position.span,
        inputs.related_spans(position.parts),
    )


def _demand_values(inputs: Inputs, demand: PositionDemand) -> dict[str, Value]:
    voltage = Asked(demand.off_voltage, demand.off_low, demand.off_high)
    current = Asked(demand.on_current, demand.on_low, demand.on_high)
    return {
        "off-voltage": whole(inputs.demands, voltage),
        "on-current": whole(inputs.demands, current),
        "needs": _numerals(demand.quadrants),
        "needs-forward-blocking": _needs(demand.off_voltage, True, SMALL_VOLTAGE),
        "needs-reverse-blocking": _needs(demand.off_voltage, False, SMALL_VOLTAGE),
        "needs-forward-current": _needs(demand.on_current, True, 0.0),
        "needs-reverse-current": _needs(demand.on_current, False, 0.0),
        "asked-forward-voltage": largest(inputs.demands, voltage, True),
        "asked-reverse-voltage": largest(inputs.demands, voltage, False),
        "asked-forward-current": largest(inputs.demands, current, True),
        "asked-reverse-current": largest(inputs.demands, current, False),
        "forward-voltage-state": _state(demand.off_high),
        "reverse-voltage-state": _state(demand.off_low),
        "forward-current-state": _state(demand.on_high),
        "reverse-current-state": _state(demand.on_low),
    }


def _needs(span: Interval | Unknown, positive: bool, least: float) -> bool | Unknown:
    """Whether the range has that sign beyond what counts as none."""
    if isinstance(span, Unknown):
        return span
    small = max(least, SMALL * span.magnitude) if span.bounded else least
    return span.high > small if positive else span.low < -small


def _numerals(quadrants: QuadrantSet | Unknown) -> Value:
    return quadrants if isinstance(quadrants, Unknown) else quadrants.numerals


def _state(witness: Witness | None) -> str:
    if witness is None:
        return "no state"
    return f"the state with {' and '.join(witness.on) or 'nothing'} on"


def _capability_values(inputs: Inputs, capability: Capability) -> dict[str, Value]:
    values: dict[str, Value] = {"has": capability.quadrants.numerals}
    for way, direction in (("forward", capability.forward), ("reverse", capability.reverse)):
        values |= {
            f"holds-off-{way}": direction.holds_off,
            f"carries-{way}": direction.carries,
            f"freewheels-{way}": direction.freewheels,
            f"blocks-{way}": _blocks(direction),
            f"rated-{way}-current": _rated_current(direction),
            f"{way}-blocking-kinds": _kinds(inputs, direction.weakest),
            f"{way}-carrying-kinds": _kinds(inputs, direction.carried_by),
        }
    return values


def _blocks(direction: Direction) -> Value:
    return at_least(direction.blocks_at_least, direction.blocks, _of(direction.missing, "blocking"))


def _rated_current(direction: Direction) -> Value:
    return at_least(
        direction.current_at_least, direction.current, _of(direction.missing, "current")
    )


def _of(missing: Sequence[Unknown], word: str) -> tuple[Unknown, ...]:
    """The missing ratings of one sort; all of them where none says which it is."""
    return tuple(item for item in missing if word in item.what) or tuple(missing)


def _kinds(inputs: Inputs, names: Iterable[str]) -> tuple[str, ...]:
    return tuple(sorted({inputs.part_by_name[name].kind.value for name in names}))


def _build_values(
    inputs: Inputs, position: Position, capability: Capability, devices: Sequence[Part]
) -> dict[str, Value]:
    gates = {p.net for d in devices if d.gated for p in d.pins if p.role in ("gate", "base")}
    chain = max((capability.forward.weakest, capability.reverse.weakest), key=len)
    return {
        "kinds": _kinds(inputs, position.parts),
        "gated-devices": float(sum(device.gated for device in devices)),
        "gate-nets": float(len({inputs.merged(net) for net in gates})),
        "series-devices": float(len(chain)),
        "shared-voltage": shared_voltage(inputs, chain),
        "parallel-devices": float(parallel_devices(inputs, devices)),
        "parallel-alike": parallel_alike(inputs, devices),
        "peak-current": peak_current(devices),
        "series-diode": series_diode(capability.forward.carried_by, inputs.part_by_name),
        "free-path-doubled": free_path_doubled(inputs, devices),
    }


def _forbids(inputs: Inputs, name: str) -> str:
    """In words: the states of its group that its free path takes away from a stage in need."""
    group = inputs.group_of_position.get(name)
    if group is None or name not in group.forbidding or not group.forbidden_states:
        return "no needed state"
    states = [" and ".join(on) or "nothing" for on in group.forbidden_states]
    shown = ", or ".join(states[:_FEW]) + (", ..." if len(states) > _FEW else "")
    return f"the needed state{'s' if len(states) > 1 else ''} with {shown} on"


def _turned(needs: QuadrantSet | Unknown, has: QuadrantSet) -> bool | Unknown:
    if isinstance(needs, Unknown):
        return needs
    mirrored = QuadrantSet.of(_MIRRORED[quadrant] for quadrant in needs.members)
    return not needs.within(has) and mirrored.within(has)


def _links(
    inputs: Inputs,
    position: Position,
    devices: Sequence[Part],
    free_paths: dict[tuple[str, str], tuple[str, ...]],
) -> dict[str, tuple[str, ...] | Unknown]:
    name = position.name
    gates = {p.net for d in devices if d.gated for p in d.pins if p.role in ("gate", "base")}
    group = inputs.group_of_position.get(name)
    return {
        "devices": position.parts,
        "legs": _legs(inputs, name),
        "group": () if group is None else (group_name(group.positions),),
        "gate-drives": tuple(sorted({inputs.merged(net) for net in gates})),
        "interruptions": free_paths.get(("interrupted", name), ()),
        "shorts": free_paths.get(("short", name), ()),
        "recoveries": free_paths.get(("recovery", name), ()),
    }


def _legs(inputs: Inputs, name: str) -> tuple[str, ...] | Unknown:
    """Legs are named from the states, so without states nobody knows them."""
    legs = inputs.legs_of_position.get(name, ())
    group = inputs.group_of_position.get(name)
    if not legs and group is not None and not group.analysed:
        return Unknown(f"legs of {name}", f"a stage that works: {group.why_not}")
    return legs
