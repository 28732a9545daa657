"""Quantities of the sheet and of part data: a number, an SI prefix and a unit.

Here a prefix is case-sensitive, as SI has it (`m` milli, `M` mega), unlike in a netlist.
"""

import math
import re
from enum import StrEnum

from rulecheck.values.record import Record


class Dimension(StrEnum):
    """What a quantity measures; the value is the unit that it is stored in."""

    VOLTAGE = "V"
    CURRENT = "A"
    RESISTANCE = "ohm"
    CAPACITANCE = "F"
    INDUCTANCE = "H"
    TIME = "s"
    FREQUENCY = "Hz"
    CHARGE = "C"
    POWER = "W"
    ENERGY = "J"
    TEMPERATURE = "degC"
    NUMBER = ""


_UNITS = {
    "V": Dimension.VOLTAGE,
    "A": Dimension.CURRENT,
    "ohm": Dimension.RESISTANCE,
    "Ohm": Dimension.RESISTANCE,
    "\u03a9": Dimension.RESISTANCE,
    "\u2126": Dimension.RESISTANCE,
    "F": Dimension.CAPACITANCE,
    "H": Dimension.INDUCTANCE,
    "s": Dimension.TIME,
    "Hz": Dimension.FREQUENCY,
    "C": Dimension.CHARGE,
    "W": Dimension.POWER,
    "VA": Dimension.POWER,
    "J": Dimension.ENERGY,
    "degC": Dimension.TEMPERATURE,
    "°C": Dimension.TEMPERATURE,
}
_PREFIXES = {
    "": 1.0, "f": 1e-15, "p": 1e-12, "n": 1e-9, "u": 1e-6, "µ": 1e-6, "μ": 1e-6,
    "m": 1e-3, "k": 1e3, "K": 1e3, "M": 1e6, "Meg": 1e6, "MEG": 1e6, "meg": 1e6,
    "G": 1e9, "T": 1e12,
}  # fmt: skip
_NUMBER = re.compile(r"\s*([+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)\s*(.*?)\s*\Z")
_PERCENT = 0.01
_LONGEST = 100
"""Characters; the patterns' time grows with the square of the length."""


class Quantity(Record):
    """A value in SI base units; `dimension` is NUMBER where no unit was written."""

    value: float
    dimension: Dimension


class NotAQuantity(Record):
    """Why a text is no quantity, in words for the user."""

    why: str


def read_quantity(text: str) -> Quantity | NotAQuantity:
    """Read `58 V`, `400 ns`, `4.7u`, `80 %`, `-80`.

    >>> read_quantity("400 ns")
    Quantity(value=4e-07, dimension=<Dimension.TIME: 's'>)
    """
    if len(text) > _LONGEST:
        return NotAQuantity(f"'{text[:_LONGEST]}...' is too long for a quantity")
    match = _NUMBER.match(text)
    if not match:
        return NotAQuantity(f"'{text}' does not start with a number")
    number, tail = float(match[1]), match[2]
    if not math.isfinite(number):
        return NotAQuantity(f"'{match[1]}' is beyond what a number can hold")
    if tail == "%":
        return Quantity(number * _PERCENT, Dimension.NUMBER)
    scaled = _scale_and_unit(tail)
    if scaled is None:
        return NotAQuantity(f"'{tail}' is no unit known here")
    factor, dimension = scaled
    return Quantity(_scaled(number, factor), dimension)


def _scaled(number: float, factor: float) -> float:
    """Divide by the exact inverse of a small prefix, so that 400 ns is 4e-07 to the last bit."""
    inverse = round(1.0 / factor) if factor < 1.0 else 1
    return number / inverse if inverse > 1 else number * factor


def _scale_and_unit(tail: str) -> tuple[float, Dimension] | None:
    if tail in _UNITS:
        return 1.0, _UNITS[tail]
    if tail in _PREFIXES:
        return _PREFIXES[tail], Dimension.NUMBER
    for unit, dimension in _UNITS.items():
        prefix = tail[: -len(unit)].rstrip()
        if tail.endswith(unit) and prefix in _PREFIXES:
            return _PREFIXES[prefix], dimension
    return None


_ENGINEERING = (
    (1e9, "G"),
    (1e6, "M"),
    (1e3, "k"),
    (1.0, ""),
    (1e-3, "m"),
    (1e-6, "u"),
    (1e-9, "n"),
)


def write_quantity(value: float, unit: str, digits: int = 3) -> str:
    """`write_quantity(4.7e-6, "F")` is `4.7 uF`; degrees and plain numbers keep no prefix."""
    if value == 0.0 or unit in ("", "degC"):
        return f"{value:.{max(digits, 4)}g} {unit}".rstrip()
    for factor, prefix in _ENGINEERING:
        if abs(value) >= factor * 0.9995:
            return f"{value / factor:.{_digits(value / factor, digits)}g} {prefix}{unit}"
    return f"{value * 1e12:.{digits}g} p{unit}"


def _digits(mantissa: float, digits: int) -> int:
    """Never round away whole units: 1234 stays 1234, not 1.23e+03."""
    return max(digits, len(f"{abs(mantissa):.0f}"))
