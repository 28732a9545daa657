"""When a gate is commanded on: on-times over a period, and what they rest on."""

import math

from rulecheck.values import Interval
from rulecheck.values.record import Record

OnTimes = tuple[Interval, ...]
"""Seconds, sorted and apart from each other."""


class GateCommand(Record):
    """The on-times of one gate, between 0 and `period`.

    One that runs past the end of the period goes on at its beginning. Of a source that describes
    one window only, `period` is its length, and the gate stays as it is at the end. A gate on a
    steady voltage has an infinite period.
    """

    on: OnTimes
    period: float
    source: str
    """The element that gives it."""
    repeats: bool = True
    driver: str = ""
    """The driver that it passes, empty where the source is at the gate."""
    may_begin_later: str = ""
    """A driver that delays every turning on by a dead time which nobody states."""

    @property
    def steady(self) -> bool:
        return math.isinf(self.period)

    def is_on(self, time: float) -> bool:
        if not self.repeats and time >= self.period:
            return bool(self.on) and self.on[-1].high >= self.period
        moment = time % self.period if self.repeats else time
        return any(on.low <= moment < on.high for on in self.on)


def steady_command(on: bool, source: str) -> GateCommand:
    whole = (Interval(0.0, math.inf),) if on else ()
    return GateCommand(whole, math.inf, source, repeats=False)


def joined(times: OnTimes) -> OnTimes:
    """The same on-times, those that touch or overlap as one."""
    found: list[Interval] = []
    for span in sorted(times, key=lambda span: span.low):
        if found and span.low <= found[-1].high:
            found[-1] = found[-1].hull(span)
        elif span.high > span.low:
            found.append(span)
    return tuple(found)


def both(first: OnTimes, second: OnTimes) -> OnTimes:
    """When both are on."""
    meets = (a.meet(b) for a in first for b in second)
    return joined(tuple(span for span in meets if span is not None and span.high > span.low))


def opposite(times: OnTimes, length: float) -> OnTimes:
    """When it is off, between 0 and `length`."""
    edges = [0.0, *(edge for span in times for edge in (span.low, span.high)), length]
    gaps = zip(edges[::2], edges[1::2], strict=True)
    return tuple(Interval(low, high) for low, high in gaps if high > low)


def total(times: OnTimes) -> float:
    return sum((span.high - span.low for span in times), 0.0)
