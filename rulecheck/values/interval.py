"""Closed ranges of real numbers; an infinite end means "no bound known, the sign is"."""

import math

from rulecheck.values.record import Record


class Interval(Record, order=True):
    low: float
    high: float

    def __post_init__(self) -> None:
        if math.isnan(self.low) or math.isnan(self.high) or self.low > self.high:
            raise ValueError(f"not an interval: [{self.low}, {self.high}]")

    def __add__(self, other: "Interval") -> "Interval":
        return Interval(self.low + other.low, self.high + other.high)

    def __neg__(self) -> "Interval":
        return Interval(-self.high, -self.low)

    def __sub__(self, other: "Interval") -> "Interval":
        return self + -other

    def scaled(self, factor: float) -> "Interval":
        if factor == 0.0:
            return Interval(0.0, 0.0)
        ends = (self.low * factor, self.high * factor)
        return Interval(min(ends), max(ends))

    def hull(self, other: "Interval") -> "Interval":
        return Interval(min(self.low, other.low), max(self.high, other.high))

    def meet(self, other: "Interval") -> "Interval | None":
        """The common part, or None where there is none."""
        low, high = max(self.low, other.low), min(self.high, other.high)
        return Interval(low, high) if low <= high else None

    def part_of_sign(self, positive: bool, beyond: float = 0.0) -> "Interval | None":
        """The values of that sign with a magnitude of at least `beyond`, or None."""
        half = Interval(beyond, math.inf) if positive else Interval(-math.inf, -beyond)
        return self.meet(half)

    def contains(self, value: float) -> bool:
        return self.low <= value <= self.high

    @property
    def magnitude(self) -> float:
        return max(abs(self.low), abs(self.high))

    @property
    def bounded(self) -> bool:
        return math.isfinite(self.low) and math.isfinite(self.high)

    @property
    def middle(self) -> float:
        return (self.low + self.high) / 2


def point(value: float) -> Interval:
    return Interval(value, value)
