"""Quantities in YAML files: the shapes that carry a dimension, and reading them with a check."""

import math
from typing import Annotated, Any

from msgspec import Meta

from rulecheck.values import (
    Dimension,
    Interval,
    NotAQuantity,
    Problem,
    Span,
    error,
    point,
    read_quantity,
)

# What the dimension is called in a message, and an example that the user can follow.
_NOUNS = {
    Dimension.VOLTAGE: ("a voltage", "58 V"),
    Dimension.CURRENT: ("a current", "80 A"),
    Dimension.RESISTANCE: ("a resistance", "4.7 ohm"),
    Dimension.CAPACITANCE: ("a capacitance", "10 uF"),
    Dimension.INDUCTANCE: ("an inductance", "22 uH"),
    Dimension.TIME: ("a time", "400 ns"),
    Dimension.FREQUENCY: ("a frequency", "20 kHz"),
    Dimension.CHARGE: ("a charge", "90 nC"),
    Dimension.POWER: ("a power", "2 kW"),
    Dimension.ENERGY: ("an energy", "5 mJ"),
    Dimension.TEMPERATURE: ("a temperature", "150 degC"),
    Dimension.NUMBER: ("a plain number", "0.8"),
}


def _single(dimension: Dimension) -> Meta:
    noun, example = _NOUNS[dimension]
    return Meta(description=f"{noun}, such as {example}", extra_json_schema=_unit(dimension))


def _range(dimension: Dimension) -> Meta:
    noun, example = _NOUNS[dimension]
    text = f"{noun}, such as {example}, or a list of two: [LOW, HIGH]"
    return Meta(description=text, extra_json_schema=_unit(dimension))


def _unit(dimension: Dimension) -> dict[str, Any]:
    return {"x-unit": dimension.value}


QuantityText = str | int | float
QuantityRange = QuantityText | list[QuantityText]

Voltage = Annotated[QuantityText, _single(Dimension.VOLTAGE)]
Current = Annotated[QuantityText, _single(Dimension.CURRENT)]
Resistance = Annotated[QuantityText, _single(Dimension.RESISTANCE)]
Capacitance = Annotated[QuantityText, _single(Dimension.CAPACITANCE)]
Inductance = Annotated[QuantityText, _single(Dimension.INDUCTANCE)]
Time = Annotated[QuantityText, _single(Dimension.TIME)]
Frequency = Annotated[QuantityText, _single(Dimension.FREQUENCY)]
Charge = Annotated[QuantityText, _single(Dimension.CHARGE)]
Power = Annotated[QuantityText, _single(Dimension.POWER)]
Energy = Annotated[QuantityText, _single(Dimension.ENERGY)]
Temperature = Annotated[QuantityText, _single(Dimension.TEMPERATURE)]
Plain = Annotated[QuantityText, _single(Dimension.NUMBER)]

VoltageRange = Annotated[QuantityRange, _range(Dimension.VOLTAGE)]
CurrentRange = Annotated[QuantityRange, _range(Dimension.CURRENT)]
ResistanceRange = Annotated[QuantityRange, _range(Dimension.RESISTANCE)]
CapacitanceRange = Annotated[QuantityRange, _range(Dimension.CAPACITANCE)]
InductanceRange = Annotated[QuantityRange, _range(Dimension.INDUCTANCE)]
TimeRange = Annotated[QuantityRange, _range(Dimension.TIME)]
FrequencyRange = Annotated[QuantityRange, _range(Dimension.FREQUENCY)]
ChargeRange = Annotated[QuantityRange, _range(Dimension.CHARGE)]
PowerRange = Annotated[QuantityRange, _range(Dimension.POWER)]
EnergyRange = Annotated[QuantityRange, _range(Dimension.ENERGY)]
TemperatureRange = Annotated[QuantityRange, _range(Dimension.TEMPERATURE)]
PlainRange = Annotated[QuantityRange, _range(Dimension.NUMBER)]


def as_number(raw: object, dimension: Dimension, span: Span) -> float | Problem:
    """The value in the dimension's base unit; a number without a unit is taken to be in it."""
    noun, example = _NOUNS[dimension]
    wanted = f"{noun} is wanted here, such as {example}"
    if isinstance(raw, bool) or not isinstance(raw, str | int | float):
        return error(span, f"{_shown(raw)} is no quantity", wanted)
    if not isinstance(raw, str):
        return _finite(float(raw), raw, wanted, span)
    quantity = read_quantity(raw)
    if isinstance(quantity, NotAQuantity):
        return error(span, quantity.why, wanted)
    if quantity.dimension is not dimension and quantity.dimension is not Dimension.NUMBER:
        return error(span, f"{raw.strip()} is {_NOUNS[quantity.dimension][0]}", wanted)
    if raw.rstrip().endswith("%") and dimension is not Dimension.NUMBER:
        return error(span, f"{raw.strip()} is a share, and nothing says of what", wanted)
    return _finite(quantity.value, raw, wanted, span)


def as_interval(raw: object, dimension: Dimension, span: Span) -> Interval | Problem:
    """A single value as a point, or a list of two, the lower one first."""
    if not isinstance(raw, list | tuple):
        value = as_number(raw, dimension, span)
        return value if isinstance(value, Problem) else point(value)
    if len(raw) != 2:
        example = _NOUNS[dimension][1]
        what = f"a range has two ends, low and high; here are {len(raw)}"
        return error(span, what, f"write one value, such as {example}, or [LOW, HIGH]")
    low, high = (as_number(end, dimension, span) for end in raw)
    if isinstance(low, Problem):
        return low
    if isinstance(high, Problem):
        return high
    if low > high:
        what = f"the range [{raw[0]}, {raw[1]}] runs downwards"
        return error(span, what, f"write the lower end first: [{raw[1]}, {raw[0]}]")
    return Interval(low, high)


def _finite(value: float, raw: object, wanted: str, span: Span) -> float | Problem:
    if math.isfinite(value):
        return value
    return error(span, f"{raw} is no finite number", wanted)


def _shown(raw: object) -> str:
    if raw is None:
        return "nothing"
    if isinstance(raw, bool):
        return str(raw).lower()
    return "a list" if isinstance(raw, list | tuple) else "a mapping"
