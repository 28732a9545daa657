"""Quantities with their unit checked."""

import pytest

from rulecheck.reading.quantities import as_interval, as_number
from rulecheck.values import Dimension, Interval, Problem, Span

HERE = Span("hut.stage.yaml", 3, 14)


@pytest.mark.parametrize(
    ("raw", "dimension", "value"),
    [
        ("58 V", Dimension.VOLTAGE, 58.0),
        ("400 ns", Dimension.TIME, 400e-9),
        ("20 kHz", Dimension.FREQUENCY, 20e3),
        ("4.7u", Dimension.CAPACITANCE, 4.7e-6),
        (-80, Dimension.CURRENT, -80.0),
        ("1e-9", Dimension.TIME, 1e-9),
        (0.5, Dimension.NUMBER, 0.5),
        ("80 %", Dimension.NUMBER, 0.8),
        ("150 degC", Dimension.TEMPERATURE, 150.0),
        ("1.2 Ω", Dimension.RESISTANCE, 1.2),
        ("90 nC", Dimension.CHARGE, 90e-9),
    ],
)
def test_a_quantity_is_read_in_its_base_unit(
    raw: object, dimension: Dimension, value: float
) -> None:
    assert as_number(raw, dimension, HERE) == pytest.approx(value)


@pytest.mark.parametrize(
    ("raw", "dimension", "line"),
    [
        ("58 A", Dimension.VOLTAGE, "58 A is a current; a voltage is wanted here, such as 58 V"),
        ("58 V", Dimension.NUMBER, "58 V is a voltage; a plain number is wanted here, such as 0.8"),
        ("80 %", Dimension.POWER, "80 % is a share, and nothing says of what; a power is wanted"),
        ("5 volts", Dimension.VOLTAGE, "'volts' is no unit known here; a voltage is wanted"),
        ("much", Dimension.TIME, "'much' does not start with a number; a time is wanted"),
        (True, Dimension.VOLTAGE, "true is no quantity; a voltage is wanted"),
        (None, Dimension.VOLTAGE, "nothing is no quantity; a voltage is wanted"),
        ({"x": 1}, Dimension.VOLTAGE, "a mapping is no quantity; a voltage is wanted"),
        (
            "1e999 V",
            Dimension.VOLTAGE,
            "'1e999' is beyond what a number can hold; a voltage is wanted",
        ),
        (float("nan"), Dimension.VOLTAGE, "nan is no finite number; a voltage is wanted"),
    ],
)
def test_a_wrong_quantity_is_told(raw: object, dimension: Dimension, line: str) -> None:
    found = as_number(raw, dimension, HERE)
    assert isinstance(found, Problem)
    assert found.line().startswith(f"{HERE}: error: {line}")


@pytest.mark.parametrize(
    ("raw", "low", "high"),
    [
        (["42 V", "58 V"], 42.0, 58.0),
        ("48 V", 48.0, 48.0),
        ([-80, 80], -80.0, 80.0),
        ([5], None, 0),
    ],
)
def test_a_range_is_a_list_of_two(raw: object, low: float | None, high: float) -> None:
    found = as_interval(raw, Dimension.VOLTAGE, HERE)
    if low is None:
        assert isinstance(found, Problem)
        assert found.what == "a range has two ends, low and high; here are 1"
    else:
        assert found == Interval(low, high)


def test_a_range_that_runs_downwards_is_an_error() -> None:
    found = as_interval(["58 V", "42 V"], Dimension.VOLTAGE, HERE)
    assert isinstance(found, Problem)
    assert found.what == "the range [58 V, 42 V] runs downwards"
    assert found.remedy == "write the lower end first: [42 V, 58 V]"


@pytest.mark.parametrize("raw", [["58 A", "60 V"], ["42 V", "60 A"]])
def test_both_ends_of_a_range_are_checked(raw: list[str]) -> None:
    found = as_interval(raw, Dimension.VOLTAGE, HERE)
    assert isinstance(found, Problem)
    assert "is a current" in found.what
