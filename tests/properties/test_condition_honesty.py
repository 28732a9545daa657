"""Taking a datum away never turns an answer into another decided one."""

from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck.facts import VOCABULARY, Bounds, Form
from rulecheck.rulebook.binding import bind
from rulecheck.rulebook.parsing import parse_condition
from rulecheck.rulebook.scope import OWN, Bound, Scene
from rulecheck.values import Dimension, Interval, Unknown
from rulecheck.values.record import replace
from tests.rulebook.making import facts, subject

TERM = VOCABULARY["position"]
VOLTS = [f.name for f in TERM.fields if f.form is Form.NUMBER and f.dimension is Dimension.VOLTAGE]
YES_NO = [f.name for f in TERM.fields if f.form is Form.YES_NO]
FIGURES = st.integers(0, 5).map(float)


def atoms() -> st.SearchStrategy[str]:
    number = st.one_of(
        st.sampled_from(VOLTS),
        FIGURES.map(lambda v: f"{v} V"),
        st.tuples(st.sampled_from(VOLTS), st.sampled_from(VOLTS)).map(
            lambda p: f"({p[0]} + {p[1]})"
        ),
        st.tuples(FIGURES, st.sampled_from(VOLTS)).map(lambda p: f"{p[0]} * {p[1]}"),
    )
    compared = st.tuples(number, st.sampled_from(["<", "<=", ">", ">=", "=", "!="]), number)
    return st.one_of(
        st.sampled_from(YES_NO),
        compared.map(lambda p: " ".join(p)),
        st.sampled_from(["every d among devices has d.gated", "some d among devices has d.gated",
                         "count(d among devices where d.gated) >= 1",
                         "max(d.blocking for d among devices) >= 3 V",
                         "sum(d.blocking for d among devices where d.gated) > 4 V"]),
    )  # fmt: skip


CONDITIONS = st.recursive(
    atoms(),
    lambda inner: st.one_of(
        inner.map(lambda c: f"not ({c})"),
        st.tuples(inner, st.sampled_from(["and", "or", "implies"]), inner).map(
            lambda p: f"({p[0]}) {p[1]} ({p[2]})"
        ),
    ),
    max_leaves=6,
)
VALUES = st.fixed_dictionaries(
    {name.replace("-", "_"): FIGURES for name in VOLTS}
    | {name.replace("-", "_"): st.booleans() for name in YES_NO}
)
DEVICES = st.lists(st.tuples(FIGURES, st.booleans()), max_size=3)


@settings(max_examples=200, deadline=None)
@given(CONDITIONS, VALUES, DEVICES, st.data())
def test_less_data_never_give_another_decided_answer(condition, values, devices, data):
    parts = [subject("part", f"D{n}", blocking=b, gated=g) for n, (b, g) in enumerate(devices)]
    names = tuple(part.name for part in parts)
    own = subject("position", "Q1", {"devices": names}, **values)
    bound = bind(parse_condition(condition), "position", {})
    assert isinstance(bound, Bound)
    full = bound.run(Scene(facts(own, *parts), {OWN: own}))
    assert full.truth is not None
    gone = data.draw(st.sets(st.sampled_from(sorted(own.values))))
    less_own = replace(own, values={k: _less(k, v, k in gone) for k, v in own.values.items()})
    lost = data.draw(st.sets(st.sampled_from(names))) if names else set()
    less = [replace(p, values={k: _less(k, v, p.name in lost) for k, v in p.values.items()})
            for p in parts]  # fmt: skip
    reduced = bound.run(Scene(facts(less_own, *less), {OWN: less_own}))
    assert reduced.truth in (None, full.truth)
    assert bool(reduced.missing) is (reduced.truth is None)


def _less(name, value, gone):
    """The same field with less known of it: nothing, or a bound that contains the value."""
    if not gone:
        return value
    missing = Unknown(name, f"write {name}")
    if isinstance(value, float) and len(name) % 2:
        return Bounds(Interval(value - 1.0, value + 2.0), (missing,))
    return missing
