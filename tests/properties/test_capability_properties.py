"""What must be true of every position, whatever its devices."""

from collections.abc import Mapping
from itertools import product

from hypothesis import assume, given, settings
from hypothesis import strategies as st

from rulecheck.capability import Capability, Direction
from rulecheck.parts import Part
from rulecheck.values import QuadrantSet, Unknown
from rulecheck.values.record import replace
from tests.kit.parts import capability, device

KINDS = [
    *("diode", "bjt", "mosfet", "p-mosfet", "igbt", "igbt-with-diode", "thyristor"),
    *("triac", "reverse-blocking-igbt", "ideal-switch", "gan-hemt"),
]
RATINGS = ("blocking", "reverse_blocking", "current")
PLENTY = 1e6
Row = tuple[str, str, str, dict[str, float]]


@st.composite
def rows(draw: st.DrawFn) -> list[Row]:
    """A chain from P to N, so that the two are joined, and more devices anywhere."""
    nets = ["P", "A", "B", "N"]
    links = [("P", "A"), ("A", "B"), ("B", "N")]
    pairs = st.sampled_from([(a, b) for a in nets for b in nets if a != b])
    links += draw(st.lists(pairs, max_size=4))
    made = []
    for tail, head in links:
        if draw(st.booleans()):
            tail, head = head, tail
        known = draw(st.dictionaries(st.sampled_from(RATINGS), st.integers(1, 9), max_size=3))
        figures = {name: float(value) for name, value in known.items()}
        made.append((draw(st.sampled_from(KINDS)), tail, head, figures))
    return made


def build(drawn: list[Row]) -> list[Part]:
    return [device(f"Q{n}", kind, a, b, **figures) for n, (kind, a, b, figures) in enumerate(drawn)]


def capable(drawn: list[Row], start: str = "P", end: str = "N") -> Capability:
    return capability(start, end, *build(drawn))


def bounds(way: Direction) -> tuple[float, float]:
    return way.blocks_at_least, way.current_at_least


def without(drawn: list[Row], index: int, rating: str) -> list[Row]:
    kind, tail, head, figures = drawn[index]
    kept = {name: value for name, value in figures.items() if name != rating}
    return [*drawn[:index], (kind, tail, head, kept), *drawn[index + 1 :]]


@given(rows())
@settings(max_examples=60, deadline=None)
def test_splitting_a_device_into_two_equal_parallel_ones_keeps_its_quadrants(
    drawn: list[Row],
) -> None:
    once, twice = capable(drawn), capable([*drawn, drawn[0]])
    assert twice.quadrants == once.quadrants
    assert twice.forward.blocks_at_least == once.forward.blocks_at_least


@given(rows())
@settings(max_examples=60, deadline=None)
def test_a_position_read_from_its_other_end_is_the_mirror_image(drawn: list[Row]) -> None:
    found, mirrored = capable(drawn), capable(drawn, "N", "P")
    assert bounds(mirrored.forward) == bounds(found.reverse)
    assert set(mirrored.forward.missing) == set(found.reverse.missing)
    turned = QuadrantSet.of(type(q)((q + 1) % 4 + 1) for q in found.quadrants.members)
    assert mirrored.quadrants == turned


@given(rows(), st.data())
@settings(max_examples=60, deadline=None)
def test_raising_a_rating_lowers_no_number(drawn: list[Row], data: st.DataObject) -> None:
    index = data.draw(st.integers(0, len(drawn) - 1))
    kind, tail, head, figures = drawn[index]
    raised = {name: value + 5.0 for name, value in figures.items()}
    before = capable(drawn)
    after = capable([*drawn[:index], (kind, tail, head, raised), *drawn[index + 1 :]])
    for old, new in ((before.forward, after.forward), (before.reverse, after.reverse)):
        assert all(a <= b for a, b in zip(bounds(old), bounds(new), strict=True))
    assert before.quadrants.within(after.quadrants)


@given(rows(), st.data())
@settings(max_examples=60, deadline=None)
def test_taking_a_rating_away_raises_no_bound_and_settles_nothing(
    drawn: list[Row], data: st.DataObject
) -> None:
    index = data.draw(st.integers(0, len(drawn) - 1))
    rating = data.draw(st.sampled_from(RATINGS))
    before, after = capable(drawn), capable(without(drawn, index, rating))
    for old, new in ((before.forward, after.forward), (before.reverse, after.reverse)):
        assert all(a >= b for a, b in zip(bounds(old), bounds(new), strict=True))
        if isinstance(old.blocks, Unknown):
            assert isinstance(new.blocks, Unknown) or new.blocks <= old.blocks_at_least


@given(rows(), st.sampled_from(["blocks", "current"]))
@settings(max_examples=80, deadline=None)
def test_missing_ratings_are_exactly_those_that_can_change_the_number(
    drawn: list[Row], number: str
) -> None:
    """Tried out: every missing rating in turn at nothing and at plenty, beside all others so."""
    parts = build(drawn)
    open_ratings = sorted({u for part in parts for u in _unrated(part, number)})
    assume(len(open_ratings) <= 5)
    found = capability("P", "N", *parts).forward
    named = {rating for rating in found.missing if rating in open_ratings}
    assert isinstance(getattr(found, number), Unknown) == bool(named)
    assert named == {rating for rating in open_ratings if _decides(parts, number, rating)}


def _unrated(part: Part, number: str) -> list[Unknown]:
    ratings = (getattr(edge, number) for edge in part.edges)
    return [rating for rating in ratings if isinstance(rating, Unknown)]


def _decides(parts: list[Part], number: str, rating: Unknown) -> bool:
    others = sorted({u for part in parts for u in _unrated(part, number)} - {rating})
    for values in product((0.0, PLENTY), repeat=len(others)):
        beside = dict(zip(others, values, strict=True))
        ends = [_settled(parts, number, beside | {rating: end}) for end in (0.0, PLENTY)]
        if ends[0] != ends[1]:
            return True
    return False


def _settled(parts: list[Part], number: str, values: Mapping[Unknown, float]) -> float:
    settled = []
    for part in parts:
        known = [values.get(getattr(edge, number), getattr(edge, number)) for edge in part.edges]
        pairs = zip(part.edges, known, strict=True)
        edges = tuple(replace(edge, **{number: value}) for edge, value in pairs)
        settled.append(replace(part, edges=edges))
    answer = getattr(capability("P", "N", *settled).forward, number)
    assert isinstance(answer, float)
    return answer
