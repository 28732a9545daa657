"""Affine forms: arithmetic that keeps its reasons."""

from hypothesis import given
from hypothesis import strategies as st

from rulecheck.values import AffineForm, Interval, Unknown, total_of, variable

NAMES = st.sampled_from(["v(bus)", "v(battery)", "i(L1)", "i(L2)"])
FORMS = st.builds(
    AffineForm.of,
    st.dictionaries(NAMES, st.integers(-5, 5).map(float), max_size=4),
    st.integers(-5, 5).map(float),
)
RANGES = st.fixed_dictionaries(
    {
        name: st.tuples(st.integers(-9, 9), st.integers(0, 9)).map(
            lambda ends: Interval(float(ends[0]), float(ends[0] + ends[1]))
        )
        for name in ("v(bus)", "v(battery)", "i(L1)", "i(L2)")
    }
)


def at(form: AffineForm, point: dict[str, float]) -> float:
    return form.constant + sum(c * point[n] for n, c in form.terms)


@given(FORMS, FORMS, RANGES, st.data())
def test_arithmetic_agrees_with_arithmetic_of_values(
    first: AffineForm, second: AffineForm, ranges: dict[str, Interval], data: st.DataObject
) -> None:
    point = {n: data.draw(st.sampled_from([r.low, r.high, r.middle])) for n, r in ranges.items()}
    assert at(first + second, point) == at(first, point) + at(second, point)
    assert at(first - second, point) == at(first, point) - at(second, point)
    assert at(first.scaled(3.0), point) == 3.0 * at(first, point)
    bounds = first.range_over(ranges)
    assert isinstance(bounds, Interval)
    assert bounds.contains(at(first, point))


@given(st.lists(FORMS, max_size=6))
def test_total_is_repeated_addition(forms: list[AffineForm]) -> None:
    by_hand = AffineForm()
    for form in forms:
        by_hand += form
    assert total_of(forms) == by_hand


@given(FORMS)
def test_substituting_a_variable_by_itself_changes_nothing(form: AffineForm) -> None:
    assert form.substitute({"i(L1)": variable("i(L1)")}) == form


def test_text_is_canonical() -> None:
    form = AffineForm.of({"v(out)": 1.0, "v(in)": -0.5}, 2.0)
    assert form.text() == "-0.5 v(in) + v(out) + 2"
    assert AffineForm().text() == "0"


def test_an_unknown_range_makes_the_range_unknown() -> None:
    unknown = Unknown("current of L3", "set: {L3: {current: [LOW, HIGH]}}")
    ranges = {"i(L1)": Interval(1.0, 2.0), "i(L3)": unknown}
    assert AffineForm.of({"i(L1)": 1.0, "i(L3)": 1.0}).range_over(ranges) == unknown
    assert AffineForm.of({"i(L1)": 2.0}).range_over(ranges) == Interval(2.0, 4.0)
