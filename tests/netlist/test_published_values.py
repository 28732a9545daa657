"""Number notation against what is published.

Scale factors and ignored letters: Berkeley SPICE3f3 User's Manual, May 1993, section 2.1.
Letters as the decimal point: IEC 60062:2016 with amendment 1:2019.
"""

import pytest

from rulecheck.values import Gravity
from tests.kit.netlists import circuit


def value_and_remark(letter: str, text: str) -> tuple[object, bool]:
    found = circuit(f"{letter}1 a b {text}\n")
    return found.elements[0].value, bool(found.problems)


@pytest.mark.parametrize(
    "text", ["1000", "1000.0", "1000HZ", "1E3", "1.0E3", "1KHZ", "1K", "1k", "1e3", "+1000"]
)
def test_the_manuals_spellings_of_a_thousand(text: str) -> None:
    assert value_and_remark("L", text) == (1000.0, False)


@pytest.mark.parametrize("text", ["10", "10V", "10VOLTS", "10HZ", "10.", "1e1"])
def test_the_manuals_spellings_of_ten(text: str) -> None:
    assert value_and_remark("L", text) == (10.0, False)


@pytest.mark.parametrize("text", ["1M", "1MA", "1MSEC", "1MMHOS", "1m", ".001"])
def test_the_manuals_spellings_of_a_thousandth(text: str) -> None:
    assert value_and_remark("L", text) == (0.001, False)


# The manual's factors, and equivalences that follow from its rules.
@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("1T", 1e12), ("1G", 1e9), ("1MEG", 1e6), ("1K", 1e3), ("1MIL", 25.4e-6), ("1M", 1e-3),
        ("1U", 1e-6), ("1N", 1e-9), ("1P", 1e-12), ("1F", 1e-15),
        ("1MHZ", 1e-3), ("1MH", 1e-3), ("1.2MV", 1.2e-3), ("1MEGOHM", 1e6), ("10MIL", 2.54e-4),
        ("1FF", 1e-15), ("100NF", 1e-7), ("4.7UF", 4.7e-6), ("23KOHM", 2.3e4), ("1.23GHZ", 1.23e9),
        ("1.0E4K", 1e7), ("-3.3U", -3.3e-6), ("1A", 1.0), ("1X", 1.0),
        ("1meg", 1e6), ("1Meg", 1e6), ("1mil", 25.4e-6),
    ],
)  # fmt: skip
def test_the_manuals_scale_factors(text: str, value: float) -> None:
    assert value_and_remark("L", text) == (pytest.approx(value, rel=1e-15), False)


# Strict SPICE ignores what follows the letter (4K7 is 4000); digits there show the letter code.
@pytest.mark.parametrize(
    ("letter", "text", "value"),
    [
        ("R", "R47", 0.47), ("R", "4R7", 4.7), ("R", "470R", 470.0), ("R", "4K7", 4700.0),
        ("R", "47K3", 47300.0), ("R", "4M7", 4.7e6), ("R", "2R2", 2.2),
        ("C", "4n7", 4.7e-9), ("C", "2p2", 2.2e-12), ("C", "100n", 1e-7), ("C", "4µ7", 4.7e-6),
        ("C", "1m0", 1e-3), ("C", "4N7", 4.7e-9),
    ],
)  # fmt: skip
def test_the_letter_code(letter: str, text: str, value: float) -> None:
    with_note = text not in ("470R", "100n")
    assert value_and_remark(letter, text) == (pytest.approx(value, rel=1e-15), with_note)


# Both signs are seen for micro in text; the manual has only U.
@pytest.mark.parametrize("sign", ["u", "U", "µ", "μ"])
def test_micro_in_every_spelling(sign: str) -> None:
    assert value_and_remark("C", f"4.7{sign}F") == (4.7e-6, False)


# The trap of both notations: mega in the letter code, milli in the manual.
@pytest.mark.parametrize(("card", "value"), [("R1 a b 1M", 1e-3), ("C1 a b 1F", 1e-15)])
def test_the_traps_are_read_by_the_manual_with_a_note(card: str, value: float) -> None:
    found = circuit(card)
    assert found.elements[0].value == value
    assert [problem.gravity for problem in found.problems] == [Gravity.NOTE]


# IEC 60063:2015, E12: each value in two spellings.
@pytest.mark.parametrize("number", [10, 12, 15, 18, 22, 27, 33, 39, 47, 56, 68, 82])
def test_the_e12_series(number: int) -> None:
    digits = str(number)
    plain = value_and_remark("R", f"{digits[0]}.{digits[1]}k")[0]
    coded = value_and_remark("R", f"{digits[0]}k{digits[1]}")[0]
    assert plain == coded == number * 100
