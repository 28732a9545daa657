"""How far apart two nets can be: along switch positions and stiff voltages, at the most.

driver ground on BUS-, return on the midpoint: the lower position's largest off voltage
"""

import heapq
from collections.abc import Mapping
from itertools import product

from rulecheck.facts.facts import Bounds, Value
from rulecheck.facts.inputs import Inputs
from rulecheck.stage import Position
from rulecheck.values import Interval, Unknown

Steps = Mapping[str, tuple[tuple[str, float], ...]]


def known_steps(inputs: Inputs) -> Steps:
    """By net: nets joined to it by a position, a stiff voltage or a barrier of the sheet, and the
    largest volts between."""
    steps: dict[str, list[tuple[str, float]]] = {}
    for position in inputs.stage.positions:
        span = inputs.demands.positions[position.name].off_voltage
        _add(steps, position.start, position.end, span)
        for inner in _inner_nets(inputs, position):
            _add(steps, position.start, inner, span)
            _add(steps, inner, position.end, span)
    for (one, other), span in inputs.voltage_between.items():
        _add(steps, one, other, span)
    for barrier in inputs.stage.barriers:
        if barrier.voltage is not None:
            first, second = (inputs.stage.domains[name] for name in barrier.domains)
            for one, other in product(first, second):
                _add(steps, one, other, Interval(-barrier.voltage, barrier.voltage))
    return {net: tuple(found) for net, found in steps.items()}


def _inner_nets(inputs: Inputs, position: Position) -> tuple[str, ...]:
    """Nets between the position's devices, such as the common source of a pair: they stay within
    its voltage."""
    devices = (inputs.part_by_name[name] for name in position.parts)
    nets = (inputs.merged(net) for d in devices for e in d.edges for net in (e.tail, e.head))
    ends = (position.start, position.end)
    return tuple(dict.fromkeys(net for net in nets if net not in ends))


def _add(
    steps: dict[str, list[tuple[str, float]]], one: str, other: str, span: Interval | Unknown
) -> None:
    if isinstance(span, Interval) and span.bounded:
        steps.setdefault(one, []).append((other, span.magnitude))
        steps.setdefault(other, []).append((one, span.magnitude))


def largest_difference(steps: Steps, one: str, other: str) -> Value:
    """Volts between the nets: exact over one step, at most over several."""
    if one == other:
        return 0.0
    direct = [volts for net, volts in steps.get(one, ()) if net == other]
    if direct:
        return max(direct)
    settle = f"domains and barriers of the sheet: the voltage between those of {one} and {other}"
    unknown = Unknown(f"voltage between {one} and {other}", settle)
    most = _shortest(steps, one, other)
    return unknown if most is None else Bounds(Interval(0.0, most), (unknown,))


def _shortest(steps: Steps, start: str, end: str) -> float | None:
    done: set[str] = set()
    waiting = [(0.0, start)]
    while waiting:
        volts, net = heapq.heappop(waiting)
        if net == end:
            return volts
        if net in done:
            continue
        done.add(net)
        for other, step in steps.get(net, ()):
            heapq.heappush(waiting, (volts + step, other))
    return None
