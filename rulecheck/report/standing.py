"""In a few words, how a position stands: covered or lacking a quadrant, and its ratings."""

import math

from rulecheck.report.look import PLAIN, Look
from rulecheck.report.quadrant_result import PositionResult
from rulecheck.values import Interval, Quadrant, QuadrantSet, Unknown

_POSITIVE_VOLTAGE = (Quadrant.I, Quadrant.IV)
_POSITIVE_CURRENT = (Quadrant.I, Quadrant.II)


def standing(row: PositionResult) -> tuple[str, ...]:
    """`("covered",)`, `("lacks IV",)`, `("covered", "rating short")`, `("demand unknown",)`."""
    if isinstance(row.needs, Unknown):
        return ("demand unknown",)
    words = "covered" if row.covered else f"lacks {row.missing.label}"
    enough = _ratings_suffice(row, row.needs)
    if False in enough:
        return (words, "rating short")
    return (words, "rating unknown") if None in enough else (words,)


def rated_voltage(row: PositionResult, look: Look = PLAIN) -> str:
    """The blocking rating in the demanded polarity, or both: `100 V`, `±600 V`, `100 / ? V`."""
    capability = row.capability
    ratings = (capability.forward.blocks, capability.reverse.blocks)
    return _rated(row.demand.off_voltage, ratings, "V", look)


def rated_current(row: PositionResult, look: Look = PLAIN) -> str:
    """The current rating in the demanded direction, or both: `120 A`, `±120 A`."""
    capability = row.capability
    ratings = (capability.forward.current, capability.reverse.current)
    return _rated(row.demand.on_current, ratings, "A", look)


def _rated(
    demand: Interval | Unknown,
    ratings: tuple[float | Unknown, float | Unknown],
    unit: str,
    look: Look,
) -> str:
    texts = ["?" if isinstance(value, Unknown) else f"{value:.4g}" for value in ratings]
    if not isinstance(demand, Unknown) and demand.low >= 0.0:
        return f"{texts[0]} {unit}"
    if not isinstance(demand, Unknown) and demand.high <= 0.0:
        return f"{texts[1]} {unit}"
    if texts[0] != texts[1]:
        return f"{texts[0]} / {texts[1]} {unit}"
    sign = "" if texts[0] in ("?", "0") else look.plus_minus
    return f"{sign}{texts[0]} {unit}"


def _ratings_suffice(row: PositionResult, needs: QuadrantSet) -> tuple[bool | None, ...]:
    """Demand against plain ratings, in the demanded directions that the devices have at all."""
    both = [quadrant for quadrant in needs.members if quadrant in row.capability.quadrants]
    answers: list[bool | None] = []
    for positive, direction in ((True, row.capability.forward), (False, row.capability.reverse)):
        if any((quadrant in _POSITIVE_VOLTAGE) is positive for quadrant in both):
            asked = _asked(row.demand.off_voltage, positive)
            answers.append(_enough(asked, direction.blocks_at_least, direction.blocks))
        if any((quadrant in _POSITIVE_CURRENT) is positive for quadrant in both):
            asked = _asked(row.demand.on_current, positive)
            answers.append(_enough(asked, direction.current_at_least, direction.current))
    return tuple(answers)


def _asked(demand: Interval | Unknown, positive: bool) -> float | None:
    if isinstance(demand, Unknown):
        return None
    end = max(demand.high if positive else -demand.low, 0.0)
    return None if math.isinf(end) else end


def _enough(asked: float | None, at_least: float, rating: float | Unknown) -> bool | None:
    if asked is None:
        return None
    if at_least >= asked:
        return True
    return None if isinstance(rating, Unknown) else rating >= asked
