"""V-I planes: boxes at the places that the numbers say, and open where a number is not known."""

import math

import pytest

from rulecheck.report.review.derating import Limits
from rulecheck.report.review.plane import HALF, draw_plane
from rulecheck.values import Interval, QuadrantSet, Unknown
from rulecheck.values.quadrants import Quadrant
from tests.report.examples import MISSING_RATING, ONE, demand, direction, result_row

FULL = 88.0
"""Where the largest number of an axis stands."""
NO_LIMITS = Limits(None, None, None, None)


def corners(box):
    """Left, right, bottom, top, with current upwards."""
    return (box.x, box.x + box.width, -(box.y + box.height), -box.y)


def test_the_demand_is_the_range_of_voltage_by_the_range_of_current():
    plane = draw_plane(result_row(reverse=direction(0.0, 120.0)), NO_LIMITS)
    left, right, bottom, top = corners(plane.demand)
    assert left == pytest.approx(36.0 / 100.0 * FULL, abs=0.01)
    assert right == pytest.approx(58.0 / 100.0 * FULL, abs=0.01)
    assert (bottom, top) == pytest.approx((-86.0 / 120.0 * FULL, 86.0 / 120.0 * FULL), abs=0.01)
    assert not plane.demand_open


def test_ratings_bound_the_quadrants_that_are_covered():
    plane = draw_plane(result_row(reverse=direction(0.0, 120.0)), NO_LIMITS)
    assert [corners(box) for box in plane.covered] == [
        (0.0, FULL, 0.0, FULL), (0.0, FULL, -FULL, 0.0),
    ]  # fmt: skip
    assert f"M{FULL} -{FULL}L{FULL} {FULL}" in plane.rating
    assert plane.lacking == ()
    assert plane.derated == ""


def test_the_derated_limits_are_a_box_inside():
    limits = Limits(80.0, 0.0, 96.0, 96.0)
    plane = draw_plane(result_row(reverse=direction(0.0, 120.0)), limits)
    assert f"M{0.8 * FULL:.1f} -{0.8 * FULL:.1f}L{0.8 * FULL:.1f} {0.8 * FULL:.1f}" in plane.derated


def test_a_quadrant_that_is_lacking_is_marked_to_the_edge():
    plane = draw_plane(result_row(reverse=direction(0.0, 0.0), has=ONE), NO_LIMITS)
    assert [corners(box) for box in plane.lacking] == [(0.0, HALF, -HALF, 0.0)]


def test_a_rating_that_nobody_states_has_no_line():
    plane = draw_plane(result_row(forward=direction(MISSING_RATING)), NO_LIMITS)
    assert f"M{HALF}" not in plane.rating
    assert corners(plane.covered[0])[1] == HALF


def test_a_demand_known_by_its_signs_alone_reaches_the_edge():
    unknown = Unknown("current of L1", "set: {L1: {current: [LOW, HIGH]}}")
    asked = demand("Q1", Interval(0.0, math.inf), unknown, QuadrantSet.of([Quadrant.I]))
    plane = draw_plane(result_row(asked=asked), NO_LIMITS)
    assert plane.demand_open
    assert corners(plane.demand) == (0.0, HALF, 0.0, HALF)


def test_a_demand_that_is_not_known_is_not_drawn():
    unknown = Unknown("demand of Q1", "a stage sheet")
    plane = draw_plane(result_row(asked=demand("Q1", unknown, unknown, unknown)), NO_LIMITS)
    assert plane.demand is None
