"""Quantities of sheets and part data: SI prefixes, units, percent."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rulecheck.values import Dimension, NotAQuantity, Quantity, read_quantity, write_quantity

READ = [
    ("58 V", 58.0, Dimension.VOLTAGE),
    ("400 ns", 4e-7, Dimension.TIME),
    ("20 kHz", 20e3, Dimension.FREQUENCY),
    ("4.7u", 4.7e-6, Dimension.NUMBER),
    ("-80", -80.0, Dimension.NUMBER),
    ("1.2 ohm", 1.2, Dimension.RESISTANCE),
    ("3 kΩ", 3e3, Dimension.RESISTANCE),
    ("2 MHz", 2e6, Dimension.FREQUENCY),
    ("5 mH", 5e-3, Dimension.INDUCTANCE),
    ("90 nC", 9e-8, Dimension.CHARGE),
    ("80 %", 0.8, Dimension.NUMBER),
    ("12e-9", 1.2e-8, Dimension.NUMBER),
    ("150 degC", 150.0, Dimension.TEMPERATURE),
]


@pytest.mark.parametrize(("text", "value", "dimension"), READ)
def test_reads(text: str, value: float, dimension: Dimension) -> None:
    quantity = read_quantity(text)
    assert isinstance(quantity, Quantity)
    assert quantity.value == pytest.approx(value, rel=1e-12)
    assert quantity.dimension is dimension


@pytest.mark.parametrize("text", ["", "V", "58 Volts", "5 xV", "1 kk", "--3"])
def test_says_why_not(text: str) -> None:
    assert isinstance(read_quantity(text), NotAQuantity)


@given(st.floats(1e-11, 1e8), st.sampled_from(["V", "A", "H", "F", "s"]))
def test_what_is_written_can_be_read(value: float, unit: str) -> None:
    back = read_quantity(write_quantity(value, unit, 6))
    assert isinstance(back, Quantity)
    assert back.value == pytest.approx(value, rel=1e-4)


def test_writes_engineering_notation() -> None:
    assert write_quantity(4.7e-6, "F") == "4.7 uF"
    assert write_quantity(1234.0, "V") == "1.23 kV"
    assert write_quantity(0.0, "A") == "0 A"
    assert write_quantity(-86.0, "A") == "-86 A"
