"""Ranges of numbers."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rulecheck.values import Interval, natural_key, point

FINITE = st.floats(-1e6, 1e6)
INTERVALS = st.tuples(FINITE, FINITE).map(lambda ends: Interval(min(ends), max(ends)))


@given(INTERVALS, INTERVALS)
def test_meet_is_the_common_part(first: Interval, second: Interval) -> None:
    common = first.meet(second)
    for value in (first.low, first.high, second.low, second.high):
        inside = first.contains(value) and second.contains(value)
        assert inside == (common is not None and common.contains(value))


@given(INTERVALS, INTERVALS)
def test_hull_holds_both(first: Interval, second: Interval) -> None:
    hull = first.hull(second)
    assert hull.meet(first) == first
    assert hull.meet(second) == second


@given(INTERVALS)
def test_parts_of_sign_make_the_whole(interval: Interval) -> None:
    parts = [interval.part_of_sign(sign) for sign in (True, False)]
    found = [part for part in parts if part is not None]
    assert min(part.low for part in found) == interval.low
    assert max(part.high for part in found) == interval.high


def test_refuses_what_is_no_interval() -> None:
    for low, high in ((2.0, 1.0), (math.nan, 1.0)):
        with pytest.raises(ValueError, match="not an interval"):
            Interval(low, high)


def test_scaling_turns_with_the_sign() -> None:
    assert Interval(-1.0, 3.0).scaled(-2.0) == Interval(-6.0, 2.0)
    assert Interval(-math.inf, 3.0).scaled(0.0) == point(0.0)


def test_natural_order() -> None:
    names = ["Q10", "q2", "D1", "Q2a", "X1.M3", "X1.M12"]
    assert sorted(names, key=natural_key) == ["D1", "q2", "Q2a", "Q10", "X1.M3", "X1.M12"]
