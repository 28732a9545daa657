"""How a position is put together: devices in series and side by side, diodes that shield.

Q1 | Q2 between BUS and SW, both SW-N100-7       parallel-devices 2, parallel-alike yes
Q1 then D1 from BUS to SW, D2 across both        series-diode yes
"""

from collections.abc import Mapping, Sequence

from rulecheck.facts.facts import Bounds, Value
from rulecheck.facts.inputs import Inputs
from rulecheck.parts import Conduction, Kind, Part
from rulecheck.stage import Position, Role
from rulecheck.values import Interval, Unknown

_CATCHING = frozenset(
    {Role.SNUBBER, Role.CLAMP, Role.SWITCH, Role.BULK_CAPACITOR, Role.SOURCE, Role.LOAD}
)
"""Roles of what gives the current of a leakage inductance somewhere to go."""


def main_ends(inputs: Inputs, part: Part) -> frozenset[str]:
    """The merged nets between which a device conducts."""
    return frozenset(inputs.merged(net) for edge in part.edges for net in (edge.tail, edge.head))


def shared_voltage(inputs: Inputs, chain: Sequence[str]) -> bool:
    """True where every device of the chain has a part of role sharing or snubber across it."""
    ends = (main_ends(inputs, inputs.part_by_name[name]) for name in chain)
    return all(len(pair) == 2 and pair in inputs.shared for pair in ends)


def parallel_devices(inputs: Inputs, devices: Sequence[Part]) -> int:
    """The most gated devices between the same two nets."""
    return max((len(side) for side in _side_by_side(inputs, devices)), default=0)


def parallel_alike(inputs: Inputs, devices: Sequence[Part]) -> bool:
    """True where devices side by side are of one model, and no rating stated tells them apart."""
    return all(_alike(side) for side in _side_by_side(inputs, devices))


def _alike(side: Sequence[Part]) -> bool:
    models = {(part.kind, part.text.casefold()) for part in side}
    blocking = {_magnitude(part, "ratings.blocking") for part in side} - {None}
    each = {_magnitude(part, "ratings.current", part.multiplicity) for part in side} - {None}
    return max(len(models), len(blocking), len(each)) == 1


def _magnitude(part: Part, path: str, devices: float = 1.0) -> float | None:
    """What is stated, for one of so many devices; None where nobody states it."""
    datum = part.datum(path)
    if isinstance(datum, Unknown):
        return None
    value = datum.value.magnitude if isinstance(datum.value, Interval) else abs(datum.value)
    return round(value / devices, 9)


def _side_by_side(inputs: Inputs, devices: Sequence[Part]) -> list[list[Part]]:
    groups: dict[tuple[frozenset[str], bool], list[Part]] = {}
    for part in devices:
        key = (main_ends(inputs, part), part.gated)
        groups.setdefault(key, []).append(part)
    return list(groups.values())


def peak_current(devices: Sequence[Part]) -> Value:
    """The sum of the peak ratings of its gated devices, else of its diodes, if they share.

    Devices in series make the sum too large, so a position with them has no peak rating here
    unless all state one; then the smallest counts once.
    """
    gated = [device for device in devices if device.gated] or list(devices)
    ends = {frozenset((edge.tail, edge.head)) for part in gated for edge in part.edges}
    stated = [device.datum("ratings.peak-current") for device in gated]
    known = [item.value for item in stated if not isinstance(item, Unknown)]
    numbers = [value.magnitude if isinstance(value, Interval) else value for value in known]
    total = float(sum(numbers)) if len(ends) <= 1 else min(numbers, default=0.0)
    missing = tuple(item for item in stated if isinstance(item, Unknown))
    if not missing:
        return total
    return Bounds(Interval(total if len(ends) <= 1 else 0.0, float("inf")), missing)


def leakage_unguarded(inputs: Inputs, position: Position) -> bool:
    """A gated position at a net with a winding and nothing else that could take its leakage."""
    return position.gated and any(
        _winding_alone(inputs, position, net) for net in (position.start, position.end)
    )


def _winding_alone(inputs: Inputs, position: Position, net: str) -> bool:
    wound = {name for t in inputs.stage.transformers for name in t.parts}
    here = set(inputs.parts_at_net.get(net, ())) - set(position.parts)
    if not here & wound or net in inputs.ports_at_net:
        return False
    roles = {inputs.stage.roles.get(name) for name in here - wound}
    return not roles & _CATCHING


def series_diode(path: Sequence[str], parts: Mapping[str, Part]) -> bool:
    """True where current through a gate's device also has to pass a diode."""
    on_path = [parts[name] for name in path]
    return any(part.gated for part in on_path) and any(part.kind is Kind.DIODE for part in on_path)


def free_path_doubled(inputs: Inputs, devices: Sequence[Part]) -> bool:
    """True where a diode lies across a transistor whose own free path runs the same way."""
    diodes = {_free_ends(inputs, part) for part in devices if part.kind is Kind.DIODE}
    return any(part.gated and bool(_free_ends(inputs, part) & _all(diodes)) for part in devices)


def _free_ends(inputs: Inputs, part: Part) -> frozenset[tuple[str, str]]:
    return frozenset(
        (inputs.merged(edge.tail), inputs.merged(edge.head))
        for edge in part.edges
        if edge.conduction is Conduction.FREE
    )


def _all(sets: set[frozenset[tuple[str, str]]]) -> frozenset[tuple[str, str]]:
    return frozenset().union(*sets) if sets else frozenset()
