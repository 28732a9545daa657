"""Relations that the network imposes on the variables, such as i(L1) + i(L2) + i(L3) = 0.

Kept as a reduced row echelon of affine forms, so that a form vanishes on all values that the
relations allow exactly when its reduction is zero.
"""

from collections.abc import Iterable, Mapping

from rulecheck.values import AffineForm
from rulecheck.values.record import Record


class Ties(Record):
    pivots: Mapping[str, AffineForm]
    """Pivot variable -> the form, in other variables, that it equals."""

    def reduced(self, form: AffineForm) -> AffineForm:
        return form.substitute(self.pivots) if self.pivots else form


def build_ties(relations: Iterable[AffineForm]) -> Ties:
    """From forms that are zero in every state of the network."""
    pivots: dict[str, AffineForm] = {}
    for relation in relations:
        rest = relation.substitute(pivots)
        if not rest.terms:
            continue
        name, coefficient = max(rest.terms, key=lambda term: abs(term[1]))
        equals = (AffineForm.of({name: coefficient}) - rest).scaled(1.0 / coefficient)
        pivots = {n: f.substitute({name: equals}) for n, f in pivots.items()}
        pivots[name] = equals
    return Ties(pivots)
