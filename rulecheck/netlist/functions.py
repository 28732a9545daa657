"""The functions and operators of parameter expressions."""

import math
from collections.abc import Callable
from itertools import pairwise

from rulecheck.values.record import Record

CONSTANTS = {"pi": math.pi, "e": math.e, "true": 1.0, "false": 0.0}
RUNNING = frozenset({"time", "temp", "temper", "freq", "hertz", "omega"})
"""Names whose value only a simulation has."""


class Function(Record):
    least: int
    most: int
    compute: Callable[..., float]


def _sign(x: float) -> float:
    return float((x > 0) - (x < 0))


def _limit(x: float, low: float, high: float) -> float:
    return min(max(x, min(low, high)), max(low, high))


def _power_of_size(x: float, y: float) -> float:
    return float(abs(x) ** y)


def _power(x: float, y: float) -> float:
    return math.pow(x, y)


def _table(x: float, *points: float) -> float:
    """Straight lines between the points, flat outside."""
    pairs = sorted(zip(points[0::2], points[1::2], strict=False))
    if x <= pairs[0][0]:
        return pairs[0][1]
    for (x0, y0), (x1, y1) in pairwise(pairs):
        if x <= x1:
            return y0 + (y1 - y0) * (x - x0) / (x1 - x0)
    return pairs[-1][1]


def _one(compute: Callable[[float], float]) -> Function:
    return Function(1, 1, compute)


# In the Berkeley manual `log` and `ln` are both natural.
FUNCTIONS = {
    "sin": _one(math.sin),
    "cos": _one(math.cos),
    "tan": _one(math.tan),
    "asin": _one(math.asin),
    "acos": _one(math.acos),
    "atan": _one(math.atan),
    "arctan": _one(math.atan),
    "atan2": Function(2, 2, math.atan2),
    "sinh": _one(math.sinh),
    "cosh": _one(math.cosh),
    "tanh": _one(math.tanh),
    "asinh": _one(math.asinh),
    "acosh": _one(math.acosh),
    "atanh": _one(math.atanh),
    "hypot": Function(2, 2, math.hypot),
    "sqrt": _one(math.sqrt),
    "square": _one(lambda x: x * x),
    "exp": _one(math.exp),
    "ln": _one(math.log),
    "log": _one(math.log),
    "log10": _one(math.log10),
    "abs": _one(abs),
    "sgn": _one(_sign),
    "sign": _one(_sign),
    "int": _one(lambda x: float(math.trunc(x))),
    "floor": _one(lambda x: float(math.floor(x))),
    "ceil": _one(lambda x: float(math.ceil(x))),
    "round": _one(lambda x: float(math.floor(x + 0.5))),
    "nint": _one(lambda x: float(round(x))),
    "min": Function(1, 99, min),
    "max": Function(1, 99, max),
    "pow": Function(2, 2, _power),
    "pwr": Function(2, 2, _power_of_size),
    "pwrs": Function(2, 2, lambda x, y: _sign(x) * _power_of_size(x, y)),
    "limit": Function(3, 3, _limit),
    "table": Function(3, 9999, _table),
    "u": _one(lambda x: float(x > 0)),
    "stp": _one(lambda x: float(x > 0)),
    "uramp": _one(lambda x: max(x, 0.0)),
    "buf": _one(lambda x: float(x > 0.5)),
    "inv": _one(lambda x: float(x <= 0.5)),
}
CHOOSERS = frozenset({"if", "ternary_fcn", "?:"})
"""Of these only the branch that is taken must have a value."""

OPERATORS: dict[str, Callable[..., float]] = {
    "+": lambda x, y: x + y,
    "-": lambda x, y: x - y,
    "*": lambda x, y: x * y,
    "/": lambda x, y: x / y,
    "%": math.fmod,
    "**": _power,
    "^": _power,
    "==": lambda x, y: float(x == y),
    "!=": lambda x, y: float(x != y),
    "<": lambda x, y: float(x < y),
    ">": lambda x, y: float(x > y),
    "<=": lambda x, y: float(x <= y),
    ">=": lambda x, y: float(x >= y),
    "&&": lambda x, y: float(bool(x) and bool(y)),
    "&": lambda x, y: float(bool(x) and bool(y)),
    "||": lambda x, y: float(bool(x) or bool(y)),
    "|": lambda x, y: float(bool(x) or bool(y)),
    "unary +": lambda x: x,
    "unary -": lambda x: -x,
    "unary !": lambda x: float(not x),
    "unary ~": lambda x: float(not x),
}
