"""Several gates' commands over the time after which all of them repeat together."""

from collections.abc import Iterable, Mapping
from fractions import Fraction
from itertools import pairwise

from rulecheck.stage.gate_command import GateCommand, OnTimes, joined
from rulecheck.values import Interval, Unknown
from rulecheck.values.record import Record

_MOST_PERIODS = 1000
"""A common multiple of more periods than this is not looked for."""
_DRIFT = 1e-5
"""Periods that slip against each other by less than this share are taken as they are meant."""
_SLIVER = 1e-9
"""Share of the window below which a set of commands is rounding."""


class Segment(Record):
    """A time in which the same gates are on, seconds from the window's start."""

    start: float
    end: float
    on: frozenset[str]

    @property
    def length(self) -> float:
        return self.end - self.start


class CommonWindow(Record):
    """On-times by gate over one window."""

    length: float
    cyclic: bool
    """After the window it begins again; else it was described once."""
    on: Mapping[str, OnTimes]

    def segments(self) -> tuple[Segment, ...]:
        """The window cut where any gate changes, in order."""
        edges = {edge for times in self.on.values() for span in times for edge in _ends(span)}
        inside = (edge for edge in edges if 0.0 < edge < self.length)
        found = []
        for start, end in pairwise(sorted({0.0, *inside, self.length})):
            if end - start > _SLIVER * self.length:
                middle = (start + end) / 2
                on = (name for name, times in self.on.items() if _on_at(times, middle))
                found.append(Segment(start, end, frozenset(on)))
        return tuple(found)


def _ends(span: Interval) -> tuple[float, float]:
    return span.low, span.high


def _on_at(times: OnTimes, moment: float) -> bool:
    return any(span.low < moment < span.high for span in times)


def common_window(commands: Mapping[str, GateCommand]) -> CommonWindow | Unknown:
    """The least common multiple of the periods; Unknown where that is out of reach.

    Commands that are described once are added in front: the window then holds their whole length
    and one common period of the others beside what they stay at.
    """
    repeating = {c.source: c.period for c in commands.values() if c.repeats}
    single = [c.period for c in commands.values() if not c.repeats and not c.steady]
    multiple = _common_multiple(repeating.values())
    if multiple is None:
        sources = ", ".join(sorted(repeating))
        return Unknown(
            f"the common period of {sources}",
            f"periods of {sources} that are small multiples of one time",
        )
    length = max(single, default=0.0) + multiple
    if length == 0.0:
        return Unknown("the period of the gates", "a PULSE or PWL source at one of the gates")
    on = {name: _unrolled(command, length, multiple) for name, command in commands.items()}
    return CommonWindow(length, not single, on)


def _common_multiple(periods: Iterable[float]) -> float | None:
    multiple = 0.0
    for period in sorted(set(periods), reverse=True):
        if multiple == 0.0:
            multiple = period
            continue
        ratio = multiple / period
        near = Fraction(ratio).limit_denominator(_MOST_PERIODS)
        product = near.numerator * near.denominator
        if product == 0 or abs(float(near) - ratio) > _DRIFT * ratio / product:
            return None
        if near.numerator > _MOST_PERIODS:
            return None
        multiple *= near.denominator
    return multiple


def _unrolled(command: GateCommand, length: float, multiple: float) -> OnTimes:
    """The on-times over the whole window, a repeating one's period fitted to the multiple."""
    if not command.repeats:
        stays = bool(command.on) and command.on[-1].high >= command.period
        rest = (Interval(command.period, length),) if stays and command.period < length else ()
        window = Interval(0.0, length)
        spans = (span.meet(window) for span in (*command.on, *rest))
        return joined(tuple(span for span in spans if span is not None))
    period = multiple / max(1, round(multiple / command.period))
    scale = period / command.period
    count = round(length / period + 0.5)
    window = Interval(0.0, length)
    spans = (
        Interval(k * period + on.low * scale, k * period + on.high * scale).meet(window)
        for k in range(count)
        for on in command.on
    )
    return joined(tuple(span for span in spans if span is not None))
