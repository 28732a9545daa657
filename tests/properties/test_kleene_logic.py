"""Strong Kleene logic and comparisons of estimates, for every case and for any numbers."""

import itertools

from hypothesis import given
from hypothesis import strategies as st

from rulecheck.rulebook import estimate as e
from rulecheck.rulebook.estimate import COMPARISONS, Estimate
from rulecheck.rulebook.kleene import (
    NO,
    YES,
    Answer,
    conjunction,
    disjunction,
    implication,
    negation,
    undecided,
)
from rulecheck.values import Unknown

MISSING = (Unknown("a", "b"),)
MAYBE = undecided(MISSING)
ANSWERS = (YES, NO, MAYBE)
POSSIBLE = {True: (YES,), False: (NO,), None: (YES, NO)}
OPERATIONS = (
    (lambda a, b: conjunction((a, b)), lambda a, b: a and b),
    (lambda a, b: disjunction((a, b)), lambda a, b: a or b),
    (implication, lambda a, b: not a or b),
)


def test_an_answer_is_unknown_exactly_where_the_unknown_operands_could_change_it():
    for ours, plain in OPERATIONS:
        for first, second in itertools.product(ANSWERS, repeat=2):
            outcomes = {
                plain(bool(a.truth), bool(b.truth))
                for a in POSSIBLE[first.truth]
                for b in POSSIBLE[second.truth]
            }
            expected = outcomes.pop() if len(outcomes) == 1 else None
            answer = ours(first, second)
            assert answer.truth is expected
            assert bool(answer.missing) is (expected is None)


@given(st.lists(st.sampled_from(ANSWERS)))
def test_de_morgan(operands: list[Answer]):
    left = negation(conjunction(operands))
    right = disjunction([negation(operand) for operand in operands])
    assert left.truth is right.truth
    assert left.missing == right.missing


NUMBERS = st.floats(-1e6, 1e6).map(lambda x: round(x, 3))


@st.composite
def estimates(draw: st.DrawFn) -> tuple[Estimate, float]:
    """An estimate and the true value that it stands for."""
    true = draw(NUMBERS)
    if draw(st.booleans()):
        return e.exactly(true), true
    low = draw(st.one_of(st.just(float("-inf")), NUMBERS.map(lambda x: true - abs(x))))
    high = draw(st.one_of(st.just(float("inf")), NUMBERS.map(lambda x: true + abs(x))))
    return Estimate(low, high, MISSING), true


PLAIN = {
    "<": lambda a, b: a < b,
    "<=": lambda a, b: a <= b,
    ">": lambda a, b: a > b,
    ">=": lambda a, b: a >= b,
    "=": lambda a, b: a == b,
}


@given(estimates(), estimates())
def test_a_decided_comparison_is_true_of_the_true_values(first, second):
    for sign, compare in COMPARISONS.items():
        answer = compare(first[0], second[0])
        near = abs(first[1] - second[1]) <= 1e-8 * max(abs(first[1]), abs(second[1]))
        if answer.truth is not None and not near:
            assert answer.truth is PLAIN[sign](first[1], second[1])


@given(estimates(), estimates())
def test_a_comparison_of_estimates_that_lie_apart_is_decided(first, second):
    left, right = first[0], second[0]
    apart = left.high + 1.0 < right.low or right.high + 1.0 < left.low
    exact = left.exact and right.exact
    for compare in COMPARISONS.values():
        if apart or exact:
            assert compare(left, right).truth is not None


@given(estimates(), estimates())
def test_arithmetic_encloses_the_true_result(first, second):
    (a, x), (b, y) = first, second
    results = {
        "+": x + y, "-": x - y, "*": x * y, "/": x / y if y else None,
    }  # fmt: skip
    for sign, operation in e.ARITHMETIC.items():
        true, found = results[sign], operation(a, b)
        if true is not None:
            slack = 1e-9 * max(1.0, abs(true), abs(x), abs(y))
            assert found.low - slack <= true <= found.high + slack


@given(estimates(), estimates())
def test_functions_enclose_the_true_result(first, second):
    (a, x), (b, y) = first, second
    for found, true in (
        (e.magnitude(a), abs(x)),
        (e.smaller(a, b), min(x, y)),
        (e.larger(a, b), max(x, y)),
        (e.opposite(a), -x),
    ):
        assert found.low <= true <= found.high


@given(estimates(), estimates())
def test_what_is_open_says_what_is_missing(first, second):
    for operation in e.ARITHMETIC.values():
        found = operation(first[0], second[0])
        assert found.exact or found.missing
