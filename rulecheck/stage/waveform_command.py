"""The on-times that a source's waveform commands.

PULSE(0 12 0 10n 10n 4u 10u)           on from 5 ns to 4.015 us of every 10 us
PWL(0 0 1u 0 1.01u 12 5u 12) r=0       on from 1.005 us to 5 us of every 5 us

An edge counts where half of its swing is done, as pulse widths are measured (common practice).
"""

from collections.abc import Sequence
from itertools import pairwise

from rulecheck.netlist import Waveform
from rulecheck.stage.gate_command import GateCommand, OnTimes, joined, opposite
from rulecheck.values import Interval

_PULSE_VALUES = 7
"""Initial and pulsed value, delay, rise, fall, width, period."""
Points = Sequence[tuple[float, float]]


def command_of(waveform: Waveform, source: str, inverted: bool) -> GateCommand | None:
    """The command of a waveform that turns on while high, or while low where `inverted`.

    None for a waveform that is no such command: a sine, an expression, a single step.
    """
    readers = {"pulse": _of_pulse, "pwl": _of_pwl}
    read = readers.get(waveform.kind)
    command = read(waveform, source) if read is not None else None
    if command is None or not inverted:
        return command
    low = opposite(command.on, command.period)
    return GateCommand(low, command.period, source, command.repeats)


def _of_pulse(waveform: Waveform, source: str) -> GateCommand | None:
    if len(waveform.values) < _PULSE_VALUES:
        return None
    before, pulsed, delay, rise, fall, width, period = waveform.values[:_PULSE_VALUES]
    if period <= 0.0 or before == pulsed:
        return None
    start = (delay + rise / 2) % period
    on = min(width + (rise + fall) / 2, period)
    times = joined(_wrapped(start, start + on, period))
    high = times if pulsed > before else opposite(times, period)
    return GateCommand(high, period, source)


def _wrapped(start: float, end: float, period: float) -> OnTimes:
    """An on-time that begins within the period, cut in two at the period's end."""
    if end <= period:
        return (Interval(start, end),)
    return (Interval(0.0, end - period), Interval(start, period))


def _of_pwl(waveform: Waveform, source: str) -> GateCommand | None:
    pairs = list(zip(waveform.values[::2], waveform.values[1::2], strict=False))
    if len(pairs) < 2 or any(b[0] < a[0] for a, b in pairwise(pairs)):
        return None
    values = [value for _, value in pairs]
    level = (min(values) + max(values)) / 2
    end = pairs[-1][0]
    if min(values) == max(values) or end <= 0.0:
        return None
    if pairs[0][0] > 0.0:
        pairs.insert(0, (0.0, pairs[0][1]))
    whole = joined(tuple(_above(pairs, level)))
    start = waveform.repeats_from
    if start is None:
        return GateCommand(whole, end, source, repeats=False)
    if start >= end:
        return None
    repeated = (span.meet(Interval(start, end)) for span in whole)
    kept = (Interval(span.low - start, span.high - start) for span in repeated if span)
    return GateCommand(joined(tuple(kept)), end - start, source)


def _above(points: Points, level: float) -> list[Interval]:
    """The times during which the piecewise line is above the level."""
    found = []
    for (start, first), (end, last) in pairwise(points):
        if first <= level >= last:
            continue
        crossing = start
        if (first > level) != (last > level):
            crossing = start + (end - start) * (level - first) / (last - first)
        low = start if first > level else crossing
        high = end if last > level else crossing
        found.append(Interval(low, high))
    return found
