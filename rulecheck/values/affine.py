"""Affine forms: a constant plus multiples of named variables, so that a number keeps its reason."""

from collections.abc import Iterable, Mapping

from rulecheck.values.interval import Interval, point
from rulecheck.values.record import Record
from rulecheck.values.unknown import Unknown

NEGLIGIBLE = 1e-9


class AffineForm(Record):
    """`constant + sum(coefficient * variable)`, terms sorted by name, none negligible."""

    terms: tuple[tuple[str, float], ...] = ()
    constant: float = 0.0

    @staticmethod
    def of(terms: Mapping[str, float], constant: float = 0.0) -> "AffineForm":
        kept = tuple(sorted((n, c) for n, c in terms.items() if abs(c) > NEGLIGIBLE))
        return AffineForm(kept, constant if abs(constant) > NEGLIGIBLE else 0.0)

    def __add__(self, other: "AffineForm") -> "AffineForm":
        total = dict(self.terms)
        for name, coefficient in other.terms:
            total[name] = total.get(name, 0.0) + coefficient
        return AffineForm.of(total, self.constant + other.constant)

    def __neg__(self) -> "AffineForm":
        return self.scaled(-1.0)

    def __sub__(self, other: "AffineForm") -> "AffineForm":
        return self + -other

    def scaled(self, factor: float) -> "AffineForm":
        return AffineForm.of({n: c * factor for n, c in self.terms}, self.constant * factor)

    @property
    def is_zero(self) -> bool:
        return not self.terms and self.constant == 0.0

    @property
    def names(self) -> tuple[str, ...]:
        return tuple(name for name, _ in self.terms)

    def substitute(self, forms: Mapping[str, "AffineForm"]) -> "AffineForm":
        result = AffineForm((), self.constant)
        for name, coefficient in self.terms:
            result += forms.get(name, variable(name)).scaled(coefficient)
        return result

    def range_over(self, ranges: Mapping[str, Interval | Unknown]) -> Interval | Unknown:
        """Interval arithmetic over independent variables; the first unknown one decides."""
        total = point(self.constant)
        for name, coefficient in self.terms:
            part = ranges[name]
            if isinstance(part, Unknown):
                return part
            total += part.scaled(coefficient)
        return total

    def text(self) -> str:
        """One canonical line, such as `v(battery) + v(bus)` or `-0.5 i(L1)`."""
        if self.is_zero:
            return "0"
        pieces = [(coefficient, name) for name, coefficient in self.terms]
        if self.constant:
            pieces.append((self.constant, ""))
        words: list[str] = []
        for coefficient, name in pieces:
            size = f"{abs(coefficient):.6g}"
            body = size if not name else name if size == "1" else f"{size} {name}"
            sign = "-" if coefficient < 0 else "+"
            if words:
                words.append(f" {sign} {body}")
            else:
                words.append(f"-{body}" if coefficient < 0 else body)
        return "".join(words)


def variable(name: str) -> AffineForm:
    return AffineForm(((name, 1.0),))


def total_of(forms: Iterable[AffineForm]) -> AffineForm:
    """The sum, in time linear in all terms together."""
    terms: dict[str, float] = {}
    constant = 0.0
    for form in forms:
        constant += form.constant
        for name, coefficient in form.terms:
            terms[name] = terms.get(name, 0.0) + coefficient
    return AffineForm.of(terms, constant)
