"""Units of expressions: exponents of volt, ampere, second and degree, so that V/A is an ohm."""

from fractions import Fraction

from rulecheck.values import Dimension
from rulecheck.values.record import Record


class Unit(Record):
    volt: Fraction = Fraction(0)
    ampere: Fraction = Fraction(0)
    second: Fraction = Fraction(0)
    degree: Fraction = Fraction(0)

    def times(self, other: "Unit", sign: int = 1) -> "Unit":
        return Unit(
            self.volt + sign * other.volt,
            self.ampere + sign * other.ampere,
            self.second + sign * other.second,
            self.degree + sign * other.degree,
        )

    def over(self, other: "Unit") -> "Unit":
        return self.times(other, -1)

    def root(self) -> "Unit":
        return Unit(self.volt / 2, self.ampere / 2, self.second / 2, self.degree / 2)


def _unit(volt: int = 0, ampere: int = 0, second: int = 0, degree: int = 0) -> Unit:
    return Unit(Fraction(volt), Fraction(ampere), Fraction(second), Fraction(degree))


PLAIN = Unit()
OF_DIMENSION = {
    Dimension.VOLTAGE: _unit(1),
    Dimension.CURRENT: _unit(0, 1),
    Dimension.RESISTANCE: _unit(1, -1),
    Dimension.CAPACITANCE: _unit(-1, 1, 1),
    Dimension.INDUCTANCE: _unit(1, -1, 1),
    Dimension.TIME: _unit(0, 0, 1),
    Dimension.FREQUENCY: _unit(0, 0, -1),
    Dimension.CHARGE: _unit(0, 1, 1),
    Dimension.POWER: _unit(1, 1),
    Dimension.ENERGY: _unit(1, 1, 1),
    Dimension.TEMPERATURE: _unit(degree=1),
    Dimension.NUMBER: PLAIN,
}
_NAMED = {unit: dimension for dimension, unit in OF_DIMENSION.items()}


def dimension_of(unit: Unit) -> Dimension | None:
    """The dimension with that unit; None where it has no name here."""
    return _NAMED.get(unit)


def unit_text(unit: Unit) -> str:
    """`V`, `ohm`, `a plain number`, or the product of powers where there is no name."""
    named = dimension_of(unit)
    if named is not None:
        return named.value or "a plain number"
    powers = (
        ("V", unit.volt),
        ("A", unit.ampere),
        ("s", unit.second),
        ("degC", unit.degree),
    )
    return " ".join(
        name if power == 1 else f"{name}^{power}" for name, power in powers if power != 0
    )
