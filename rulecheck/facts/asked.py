"""How much is asked of a position: the end of a demanded range, or what would settle it."""

import math
from collections.abc import Iterable, Mapping

from rulecheck.demand import Demands, Variable, Witness
from rulecheck.facts.facts import Bounds, Value
from rulecheck.values import Interval, Unknown
from rulecheck.values.record import Record


class Asked(Record):
    """A demanded range and the states that gave its ends."""

    range: Interval | Unknown
    low: Witness | None
    high: Witness | None


def largest(demands: Demands, asked: Asked, positive: bool) -> Value:
    """The largest magnitude of that sign, at least 0; open ends name what is missing."""
    if isinstance(asked.range, Unknown):
        return Bounds(Interval(0.0, math.inf), (asked.range,))
    end = max(asked.range.high if positive else -asked.range.low, 0.0)
    if math.isfinite(end):
        return end
    witness = asked.high if positive else asked.low
    return Bounds(Interval(0.0, math.inf), missing_in(demands, witness))


def whole(demands: Demands, asked: Asked) -> Value:
    """The range itself; where an end is open, with what would settle it."""
    if isinstance(asked.range, Unknown) or asked.range.bounded:
        return asked.range
    ends = ((asked.range.low, asked.low), (asked.range.high, asked.high))
    open_ones = [witness for end, witness in ends if math.isinf(end)]
    missing = [item for witness in open_ones for item in missing_in(demands, witness)]
    return Bounds(asked.range, tuple(dict.fromkeys(missing)))


def missing_in(demands: Demands, witness: Witness | None) -> tuple[Unknown, ...]:
    """The variables without a known range that the witness's form rests on."""
    variables = {variable.name: variable for variable in demands.variables}
    names = _with_means(witness.form.names if witness else (), variables)
    found = [variables[name].range for name in sorted(names) if name in variables]
    missing = tuple(dict.fromkeys(item for item in found if isinstance(item, Unknown)))
    return missing or _open_points(demands)


def _with_means(names: Iterable[str], variables: Mapping[str, Variable]) -> set[str]:
    """The names and those that their means are forms of."""
    reached: set[str] = set()
    waiting = list(names)
    while waiting:
        name = waiting.pop()
        if name in reached:
            continue
        reached.add(name)
        mean = variables[name].form if name in variables else None
        waiting += list(mean.names) if mean else []
    return reached


def _open_points(demands: Demands) -> tuple[Unknown, ...]:
    points = tuple(Unknown(item.what, item.settle_with) for item in demands.undetermined)
    return points or (Unknown("the magnitude", "currents and voltages of the ports"),)
