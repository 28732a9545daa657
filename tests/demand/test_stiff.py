"""Boxes of variables: symmetrical sets, means with ripple, tightening by inequalities."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rulecheck.demand.stiff import Box, PhaseSet, tightened
from rulecheck.values import AffineForm, Interval, point, variable

MAINS = PhaseSet(("v(a)", "v(b)", "v(c)"), 325.0)
PHASES = Box({n: Interval(-325.0, 325.0) for n in MAINS.names}, phase_sets=(MAINS,))


def test_line_to_line_of_a_symmetrical_set_is_root_three() -> None:
    line = variable("v(a)") - variable("v(b)")
    assert PHASES.range_of(line).high == pytest.approx(math.sqrt(3) * 325.0)


def test_the_sum_of_a_symmetrical_set_vanishes() -> None:
    total = variable("v(a)") + variable("v(b)") + variable("v(c)")
    assert PHASES.is_zero(total)
    assert PHASES.range_of(total) == point(0.0)
    assert not PHASES.is_zero(variable("v(a)") + variable("v(b)"))


@given(st.tuples(*[st.integers(-3, 3)] * 3), st.floats(0, 2 * math.pi))
def test_the_reach_bounds_every_instant(weights: tuple[int, int, int], angle: float) -> None:
    form = AffineForm.of(dict(zip(MAINS.names, map(float, weights), strict=True)))
    value = sum(w * 325.0 * math.cos(angle - 2 * math.pi * k / 3) for k, w in enumerate(weights))
    span = PHASES.range_of(form)
    assert span.low - 1e-6 <= value <= span.high + 1e-6


def test_a_mean_keeps_currents_that_cancel_together() -> None:
    box = Box(
        {"i(L1)": Interval(-86.0, 86.0), "i(bat)": Interval(-80.0, 80.0)},
        means={"i(L1)": variable("i(bat)")},
        ripples={"i(L1)": 6.0},
    )
    assert box.range_of(variable("i(L1)")) == Interval(-86.0, 86.0)
    assert box.range_of(variable("i(L1)") - variable("i(bat)")) == Interval(-6.0, 6.0)


BOX = Box({"x": Interval(-10.0, 10.0), "y": Interval(-10.0, 10.0)})
COEFFICIENTS = st.integers(-3, 3).map(float)
INEQUALITIES = st.lists(
    st.builds(
        lambda a, b, c: AffineForm.of({"x": a, "y": b}, c), COEFFICIENTS, COEFFICIENTS, COEFFICIENTS
    ),
    max_size=4,
)


@given(INEQUALITIES, st.integers(-10, 10), st.integers(-10, 10))
def test_tightening_never_loses_a_point_that_fits(forms: list[AffineForm], x: int, y: int) -> None:
    fits = all(
        f.constant + dict(f.terms).get("x", 0.0) * x + dict(f.terms).get("y", 0.0) * y >= 0
        for f in forms
    )
    narrowed = tightened(BOX, forms)
    if fits:
        assert narrowed is not None
        assert narrowed.ranges["x"].contains(x)
        assert narrowed.ranges["y"].contains(y)


def test_a_contradiction_leaves_nothing() -> None:
    assert tightened(BOX, [AffineForm.of({"x": 1.0}, -20.0)]) is None
    assert tightened(BOX, [variable("x"), -variable("x") - AffineForm((), 1.0)]) is None
