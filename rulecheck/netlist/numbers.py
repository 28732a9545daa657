"""Numbers as netlists write them: scale letters without regard to case, unit letters ignored."""

import math
import re

from rulecheck.values.record import Record

_NUMBER = re.compile(
    r"([+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+))(?:[eE]([+-]?[0-9]{1,4}))?(.*)\Z", re.DOTALL
)
_LETTER_FIRST = re.compile(r"[rR]([0-9]{1,3})\Z")
_TAIL = re.compile(r"([A-Za-zµμΩΩ°]*)([0-9]{0,3})(?:[/_@].*)?\Z", re.DOTALL)
_COMMA = re.compile(r"([+-]?[0-9]+),([0-9]+[A-Za-zµμΩΩ]*)\Z")

# Powers of ten. Longest first: the Berkeley manual's MEG and MIL come before its M.
_SCALES = (
    ("meg", 6), ("mil", -6), ("t", 12), ("g", 9), ("k", 3), ("m", -3),
    ("u", -6), ("µ", -6), ("μ", -6), ("n", -9), ("p", -12), ("f", -15),
)  # fmt: skip
_MICROMETRES_OF_A_MIL = 25.4


class Number(Record):
    """A value in SI units; `remark` says what was not plain about it, `scale` which letter."""

    value: float
    scale: str = ""
    remark: str = ""


def read_number(text: str) -> Number | None:
    """Read `4.7k`, `10uF`, `1MEG`, `2R2`, `4,7k`; None where the text is no number.

    Scale factors: Berkeley SPICE3f3 User's Manual, May 1993, section 2.1.
    Letters as the decimal point: IEC 60062.

    >>> read_number("100NF").value
    1e-07
    """
    if len(text) > _LONGEST:
        return None
    comma = _COMMA.match(text)
    if comma:
        return _with_comma(text, f"{comma[1]}.{comma[2]}")
    match = _NUMBER.match(text)
    if match is None:
        return _letter_first(text)
    tail = _TAIL.match(match[3])
    if tail is None:
        return None
    letters, decimals = tail[1], tail[2]
    if decimals:
        return None if match[2] else _letter_as_point(match[1], letters, decimals, text)
    return _plain(match, letters)


_LONGEST = 400
"""Characters: the time to read digits grows with the square of their number."""
_FAR = re.compile(
    r"[+-]?(?:(?:[0-9]+(?:\.[0-9]*)?|\.[0-9]+)[eE][+-]?[0-9]{3,}|[0-9]{300,}(?:\.[0-9]*)?)"
    r"[A-Za-zµμΩΩ]*\Z"
)
_ENDLESS = frozenset({"nan", "inf", "infinity"})


def beyond_numbers(text: str) -> bool:
    """Whether a text is written as a number and no finite one has that value: `1e999`, `-inf`."""
    if text.lower().lstrip("+-") in _ENDLESS:
        return True
    return _FAR.match(text) is not None and read_number(text) is None


def _plain(match: re.Match[str], letters: str) -> Number | None:
    scale, power = _scale(letters)
    value = float(f"{match[1]}e{int(match[2] or 0) + power}")
    if scale == "mil":
        value *= _MICROMETRES_OF_A_MIL
    if not math.isfinite(value) or (value == 0.0 and any(sign in "123456789" for sign in match[1])):
        return None
    rest = match[3][len(letters) :]
    return Number(value, letters[: len(scale)], f"'{rest}' is ignored" if rest else "")


def _scale(letters: str) -> tuple[str, int]:
    lower = letters.lower()
    for scale, power in _SCALES:
        if lower.startswith(scale):
            return scale, power
    return "", 0


def _with_comma(text: str, pointed: str) -> Number | None:
    number = read_number(pointed)
    if number is None:
        return None
    return Number(number.value, number.scale, f"'{text}' is read with a decimal comma")


def _letter_first(text: str) -> Number | None:
    match = _LETTER_FIRST.match(text)
    if match is None:
        return None
    return Number(float(f"0.{match[1]}"), "", f"'{text}' is read as 0.{match[1]}")


# Between digits a letter is the decimal point of IEC 60062, where M is mega and m is milli.
_POINTS = {"r": 0, "v": 0, "k": 3, "meg": 6, "g": 9, "u": -6, "µ": -6, "μ": -6, "n": -9, "p": -12}
_POINTS_CASED = {"M": 6, "m": -3}


def _letter_as_point(whole: str, letters: str, decimals: str, text: str) -> Number | None:
    power = _POINTS_CASED.get(letters, _POINTS.get(letters.lower()))
    if power is None or not whole.lstrip("+-").isdigit():
        return None
    scale = "" if power == 0 else letters
    pointed = f"{whole}.{decimals}"
    return Number(float(f"{pointed}e{power}"), scale, f"'{text}' is read as {pointed}{scale}")
