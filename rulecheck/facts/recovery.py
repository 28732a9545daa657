"""The diode that recovers: which it is, its charge and time, and the current that it draws.

M1                            its body diode
IG1 (igbt-with-diode)         the diode packed with it
M1 and D5 side by side        both, as nothing keeps the body diode out
M1 - D4 in series, D5 across  D5: the series diode keeps the body diode out
"""

import math
from collections.abc import Callable, Iterable, Mapping, Sequence

from rulecheck.facts.facts import Bounds, Value
from rulecheck.facts.inputs import Inputs, stated_number, stated_range
from rulecheck.parts import Conduction, Edge, Kind, Part
from rulecheck.stage import Position
from rulecheck.values import Interval, Unknown
from rulecheck.values.record import Record

_DIODES = frozenset({Kind.DIODE, Kind.ZENER})
_SORTS: Mapping[Kind, str] = {
    Kind.IGBT_WITH_DIODE: "co-packed",
    Kind.GAN_HEMT: "channel",
    **dict.fromkeys(_DIODES, "discrete"),
}


class RecoveringDiodes(Record):
    """The devices whose free paths carry a position's current backwards."""

    devices: tuple[str, ...]
    sort: str
    """`body`, `co-packed`, `discrete`, `channel` (no diode), or `beside`: several of them."""
    shielded: tuple[str, ...]
    """Transistors whose own free path series diodes keep out of conduction."""
    series: tuple[str, ...]
    """Those series diodes."""


def recovering_diodes(inputs: Inputs, position: Position, forward: bool) -> RecoveringDiodes:
    """Of the free path from start to end, or from end to start."""
    start, end = (position.start, position.end) if forward else (position.end, position.start)
    free = [edge for edge in position.edges if edge.conduction is Conduction.FREE]
    used = _on_some_path(free, start, end)
    devices = tuple(dict.fromkeys(edge.part for edge in used))
    parts = [inputs.part_by_name[name] for name in devices]
    idle = [edge for edge in free if edge.part not in devices]
    shielded = tuple(dict.fromkeys(e.part for e in idle if inputs.part_by_name[e.part].gated))
    series = tuple(
        dict.fromkeys(e.part for e in idle if inputs.part_by_name[e.part].kind in _DIODES)
    )
    return RecoveringDiodes(
        devices, _sort(parts), shielded if series else (), series if shielded else ()
    )


def _on_some_path(edges: Sequence[Edge], start: str, end: str) -> list[Edge]:
    """The edges that lie on a way from start to end."""
    from_start = _reached(_onward(edges, False), start)
    from_end = _reached(_onward(edges, True), end)
    return [edge for edge in edges if edge.tail in from_start and edge.head in from_end]


def _onward(edges: Iterable[Edge], backwards: bool) -> dict[str, list[str]]:
    found: dict[str, list[str]] = {}
    for edge in edges:
        tail, head = (edge.head, edge.tail) if backwards else (edge.tail, edge.head)
        found.setdefault(tail, []).append(head)
    return found


def _reached(onward: Mapping[str, Sequence[str]], start: str) -> set[str]:
    seen, waiting = {start}, [start]
    while waiting:
        fresh = [net for net in onward.get(waiting.pop(), ()) if net not in seen]
        seen |= set(fresh)
        waiting += fresh
    return seen


def _sort(parts: Sequence[Part]) -> str:
    sorts = {_SORTS.get(part.kind, "body") for part in parts}
    if len(sorts) == 1:
        return sorts.pop()
    return "beside" if sorts else ""


def recovery_time(inputs: Inputs, devices: Iterable[str]) -> Value:
    """The longest of the diodes' times; those that state none leave it open upwards."""
    stated = [_stated(inputs.part_by_name[name], "diode.recovery-time") for name in devices]
    return _open_upwards(stated, lambda known: max(known, default=0.0))


def recovery_charge(inputs: Inputs, position: Position, devices: Iterable[str]) -> Value:
    """Side by side they add, in series the largest counts; those without leave it open upwards."""
    groups: dict[frozenset[str], list[Value]] = {}
    for name in devices:
        ends = frozenset(
            net for edge in position.edges if edge.part == name for net in (edge.tail, edge.head)
        )
        value = _stated(inputs.part_by_name[name], "diode.recovery-charge")
        groups.setdefault(ends, []).append(value)
    sums = [_open_upwards(values, sum) for values in groups.values()]
    return _open_upwards(sums, lambda known: max(known, default=0.0))


def _stated(part: Part, path: str) -> Value:
    """A channel that conducts backwards stores no charge (common practice)."""
    return 0.0 if part.kind is Kind.GAN_HEMT else stated_number(part, path)


def _open_upwards(values: Sequence[Value], gather: Callable[[list[float]], float]) -> Value:
    known = [value for value in values if isinstance(value, float)]
    known += [value.range.low for value in values if isinstance(value, Bounds)]
    missing = [value for value in values if isinstance(value, Unknown)]
    missing += [item for value in values if isinstance(value, Bounds) for item in value.missing]
    least = float(gather(known))
    if not missing:
        return least
    return Bounds(Interval(least, math.inf), tuple(dict.fromkeys(missing)))


def current_slope(inputs: Inputs, current: Value, turning_on: Iterable[str]) -> Value:
    """Amperes a second with which the other position takes the current over: all of it within
    the shortest turn-on time of its devices."""
    times = [stated_range(inputs.part_by_name[name], "gate.turn-on") for name in turning_on]
    missing = [item for item in (current, *times) if isinstance(item, Unknown)]
    if missing or not times:
        return missing[0] if missing else Unknown("turn-on time", "gate.turn-on of its devices")
    shortest = min(time.low for time in times if isinstance(time, Interval))
    if not isinstance(current, float) or shortest <= 0.0:
        return Unknown("slope of the current", "gate.turn-on of its devices above zero")
    return current / shortest


def peak_recovery_current(charge: float, slope: float, softness: float = 0.0) -> float:
    """I_rrm = sqrt(2 Q_rr (di/dt) / (1 + S)) of a triangular recovery, amperes.

    `softness` is the fall of the recovery current over its rise, 0 for an abrupt diode, which
    gives the largest peak (textbook formula, from memory).
    """
    return math.sqrt(2.0 * charge * slope / (1.0 + softness))


def recovery_loss(charge: float, voltage: float, frequency: float) -> float:
    """P <= Q_rr V f, watts, in the whole leg (textbook formula, from memory)."""
    return charge * voltage * frequency
