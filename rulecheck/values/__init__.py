"""Small frozen types that every step shares; knows nothing of netlists or electronics."""

from rulecheck.values.affine import AffineForm, total_of, variable
from rulecheck.values.harmless import harmless, shown
from rulecheck.values.interval import Interval, point
from rulecheck.values.limits import BOUNDS, USUAL, Limits, raise_limit
from rulecheck.values.natural import natural_key
from rulecheck.values.problem import Gravity, Problem, error, errors_of, note
from rulecheck.values.quadrants import Quadrant, QuadrantSet
from rulecheck.values.quantity import (
    Dimension,
    NotAQuantity,
    Quantity,
    read_quantity,
    write_quantity,
)
from rulecheck.values.span import Span
from rulecheck.values.unknown import Unknown

__all__ = [
    "BOUNDS",
    "USUAL",
    "AffineForm",
    "Dimension",
    "Gravity",
    "Interval",
    "Limits",
    "NotAQuantity",
    "Problem",
    "Quadrant",
    "QuadrantSet",
    "Quantity",
    "Span",
    "Unknown",
    "error",
    "errors_of",
    "harmless",
    "natural_key",
    "note",
    "point",
    "raise_limit",
    "read_quantity",
    "shown",
    "total_of",
    "variable",
    "write_quantity",
]
