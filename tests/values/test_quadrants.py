"""The V-I plane: signs to quadrants, classes and blocks (common practice for the numbering)."""

import pytest

from rulecheck.values import Quadrant, QuadrantSet

CASES = [
    ([True], [True], ("I",), "single-quadrant", "▝"),
    ([False], [True], ("II",), "single-quadrant", "▘"),
    ([True], [True, False], ("I", "IV"), "current-bidirectional", "▐"),
    ([False], [True, False], ("II", "III"), "current-bidirectional", "▌"),
    ([True, False], [True], ("I", "II"), "voltage-bidirectional", "▀"),
    ([True, False], [True, False], ("I", "II", "III", "IV"), "four-quadrant", "█"),
    ([], [True], (), "none", "·"),
]


@pytest.mark.parametrize(("volts", "amperes", "numerals", "name", "block"), CASES)
def test_product_of_signs(
    volts: list[bool], amperes: list[bool], numerals: tuple[str, ...], name: str, block: str
) -> None:
    quadrants = QuadrantSet.product(volts, amperes)
    assert quadrants.numerals == numerals
    assert quadrants.class_name == name
    assert quadrants.block == block


def test_sets() -> None:
    offered = QuadrantSet.of([Quadrant.I, Quadrant.IV])
    needed = QuadrantSet.of([Quadrant.I, Quadrant.II])
    assert not needed.within(offered)
    assert needed.without(offered).label == "II"
    assert (needed | offered).label == "I+II+IV"
    assert QuadrantSet().within(needed)
