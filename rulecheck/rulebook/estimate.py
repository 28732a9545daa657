"""Numbers known exactly or within bounds: interval arithmetic that remembers what is missing.

The rating of Q1 is at least 100 V (a second one in series states none): [100 V, no limit].
80 V <= that is true; 120 V <= that is unknown, and waits for the second rating.
"""

import math
from collections.abc import Callable, Mapping

from rulecheck.rulebook.kleene import NO, YES, Answer, undecided
from rulecheck.values import Unknown
from rulecheck.values.record import Record

SAME = 1e-9
"""Numbers that differ by less than this share of the larger count as equal."""
NO_QUOTIENT = Unknown("a quotient", "a divisor other than 0")


class Estimate(Record):
    """One number somewhere between `low` and `high`; exact where they are equal."""

    low: float
    high: float
    missing: tuple[Unknown, ...] = ()

    @property
    def exact(self) -> bool:
        return self.low == self.high


class Spread(Record):
    """A quantity that takes all values of a range, whose ends are estimates."""

    low: Estimate
    high: Estimate


def exactly(value: float) -> Estimate:
    return Estimate(value, value)


def anything(missing: tuple[Unknown, ...]) -> Estimate:
    return Estimate(-math.inf, math.inf, missing)


def _made(low: float, high: float, missing: tuple[Unknown, ...]) -> Estimate:
    """An end that infinite operands leave without a value is open."""
    low = -math.inf if math.isnan(low) else low
    high = math.inf if math.isnan(high) else high
    return Estimate(low, high, missing if low != high else ())


def together(first: Estimate, second: Estimate) -> tuple[Unknown, ...]:
    if not first.missing or not second.missing:
        return first.missing or second.missing
    return tuple(dict.fromkeys(first.missing + second.missing))


def plus(first: Estimate, second: Estimate) -> Estimate:
    missing = together(first, second)
    return _made(first.low + second.low, first.high + second.high, missing)


def opposite(value: Estimate) -> Estimate:
    return Estimate(-value.high, -value.low, value.missing)


def minus(first: Estimate, second: Estimate) -> Estimate:
    return plus(first, opposite(second))


def times(first: Estimate, second: Estimate) -> Estimate:
    ends = [_product(a, b) for a in (first.low, first.high) for b in (second.low, second.high)]
    return _made(min(ends), max(ends), together(first, second))


def _product(first: float, second: float) -> float:
    """An unknown bound times zero is zero: the true value is finite."""
    return 0.0 if first == 0.0 or second == 0.0 else first * second


def over(first: Estimate, second: Estimate) -> Estimate:
    """Where the divisor may be zero the quotient is open, and says so."""
    if second.low <= 0.0 <= second.high:
        return anything(together(first, second) or (NO_QUOTIENT,))
    return times(first, _made(1.0 / second.high, 1.0 / second.low, second.missing))


def magnitude(value: Estimate) -> Estimate:
    if value.low >= 0.0:
        return value
    if value.high <= 0.0:
        return opposite(value)
    return Estimate(0.0, max(-value.low, value.high), value.missing)


def smaller(first: Estimate, second: Estimate) -> Estimate:
    missing = together(first, second)
    return _made(min(first.low, second.low), min(first.high, second.high), missing)


def larger(first: Estimate, second: Estimate) -> Estimate:
    missing = together(first, second)
    return _made(max(first.low, second.low), max(first.high, second.high), missing)


def root(value: Estimate) -> Estimate:
    """The square root; of a number that may be negative the lower end is open."""
    if value.high < 0.0:
        return anything(value.missing or (NO_QUOTIENT,))
    return _made(math.sqrt(max(value.low, 0.0)), math.sqrt(value.high), value.missing)


def hull(first: Estimate, second: Estimate) -> Estimate:
    missing = together(first, second)
    return Estimate(min(first.low, second.low), max(first.high, second.high), missing)


def _slack(first: float, second: float) -> float:
    if math.isinf(first) or math.isinf(second):
        return 0.0
    return SAME * max(abs(first), abs(second))


def _at_most(first: float, second: float) -> bool:
    return first <= second + _slack(first, second)


def at_most(first: Estimate, second: Estimate) -> Answer:
    """`first <= second`, decided where the estimates lie wholly on one side."""
    if _at_most(first.high, second.low):
        return YES
    if not _at_most(first.low, second.high):
        return NO
    return undecided(together(first, second))


def below(first: Estimate, second: Estimate) -> Answer:
    """`first < second`, decided where the estimates lie wholly on one side."""
    if not _at_most(second.low, first.high):
        return YES
    if _at_most(second.high, first.low):
        return NO
    return undecided(together(first, second))


def equal(first: Estimate, second: Estimate) -> Answer:
    if not _at_most(first.low, second.high) or not _at_most(second.low, first.high):
        return NO
    if first.exact and second.exact:
        return YES
    return undecided(together(first, second))


COMPARISONS: Mapping[str, Callable[[Estimate, Estimate], Answer]] = {
    "<": below,
    "<=": at_most,
    ">": lambda first, second: below(second, first),
    ">=": lambda first, second: at_most(second, first),
    "=": equal,
}
ARITHMETIC: Mapping[str, Callable[[Estimate, Estimate], Estimate]] = {
    "+": plus,
    "-": minus,
    "*": times,
    "/": over,
}
