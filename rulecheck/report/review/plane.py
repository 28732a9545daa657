"""The V-I plane of a position as a drawing: what is asked, what is covered, which ratings bound it.

Off-state voltage runs to the right, on-state current upwards. A plane is 200 units wide and high
with the origin in the middle, so that the four quadrants are always there; both axes are scaled to
the largest known number of the position.
"""

import math

from rulecheck.report.quadrant_result import PositionResult
from rulecheck.report.review.derating import Limits
from rulecheck.values import Interval, Quadrant, QuadrantSet, Unknown
from rulecheck.values.record import Record

HALF = 100.0
_FULL = 88.0
"""Where the largest number stands, so that a little room is left around it."""
_THIN = 3.0
"""The least width of a drawn range, so that a single value can be seen."""
_STEPS = (1.0, 2.0, 2.5, 5.0, 10.0)
_SIGNS = {
    Quadrant.I: (1, 1),
    Quadrant.II: (-1, 1),
    Quadrant.III: (-1, -1),
    Quadrant.IV: (1, -1),
}


class Box(Record):
    """A rectangle in drawing units, y downwards."""

    x: float
    y: float
    width: float
    height: float


class Tick(Record):
    """A number on an axis, at its place in drawing units from the origin."""

    at: float
    value: float


class Plane(Record):
    """Boxes to draw; a side whose number nobody knows ends at the edge and is not outlined."""

    covered: tuple[Box, ...]
    lacking: tuple[Box, ...]
    demand: Box | None
    demand_open: bool
    rating: str
    """Outline of the ratings, as an SVG path without the sides that are not known."""
    derated: str
    volt_ticks: tuple[Tick, ...]
    ampere_ticks: tuple[Tick, ...]


class _Sides(Record):
    """How far the plane reaches in each direction, in volts and amperes; None: not known."""

    right: float | None
    left: float | None
    up: float | None
    down: float | None

    @property
    def known(self) -> tuple[float, ...]:
        return tuple(side for side in (self.right, self.left, self.up, self.down) if side)


def draw_plane(row: PositionResult, limits: Limits) -> Plane:
    """The plane of a position, with the limits that the derating factors leave."""
    forward, reverse = row.capability.forward, row.capability.reverse
    rated = _Sides(
        _number(forward.blocks), _number(reverse.blocks),
        _number(forward.current), _number(reverse.current),
    )  # fmt: skip
    derated = _Sides(
        limits.forward_voltage, limits.reverse_voltage,
        limits.forward_current, limits.reverse_current,
    )  # fmt: skip
    volts = _scale(row.demand.off_voltage, (rated.right, rated.left))
    amperes = _scale(row.demand.on_current, (rated.up, rated.down))
    demand = _demand(row, volts, amperes)
    has = row.capability.quadrants
    return Plane(
        _quadrant_boxes(has, rated, volts, amperes),
        _quadrant_boxes(row.missing, _Sides(None, None, None, None), volts, amperes),
        demand,
        demand is not None and not _bounded(row),
        _outline(rated, volts, amperes) if has.members else "",
        _outline(derated, volts, amperes) if has.members and derated.known else "",
        _ticks(volts),
        _ticks(amperes),
    )


def _number(value: float | Unknown) -> float | None:
    return None if isinstance(value, Unknown) or math.isinf(value) else value


def _bounded(row: PositionResult) -> bool:
    ranges = (row.demand.off_voltage, row.demand.on_current)
    return all(isinstance(value, Interval) and value.bounded for value in ranges)


def _scale(demand: Interval | Unknown, ratings: tuple[float | None, ...]) -> float:
    """The largest known number of an axis; 0 where none is known."""
    ends = (demand.low, demand.high) if isinstance(demand, Interval) else ()
    sizes = [abs(end) for end in ends if math.isfinite(end)]
    return max([*sizes, *(rating for rating in ratings if rating is not None)], default=0.0)


def _place(value: float, scale: float) -> float:
    """Drawing units of a number; one that is not known stands at the edge of its side."""
    if math.isinf(value) or not scale:
        return math.copysign(HALF, value) if value else 0.0
    return value / scale * _FULL


def _demand(row: PositionResult, volts: float, amperes: float) -> Box | None:
    """The range of off-state voltage by that of on-state current; by the signs where only those
    are known."""
    if isinstance(row.needs, Unknown) or not row.needs.members:
        return None
    across = _span(row.demand.off_voltage, row.needs, 0)
    through = _span(row.demand.on_current, row.needs, 1)
    left, right = _place(across.low, volts), _place(across.high, volts)
    bottom, top = _place(through.low, amperes), _place(through.high, amperes)
    return _box(left, right, bottom, top)


def _span(known: Interval | Unknown, needs: QuadrantSet, axis: int) -> Interval:
    if isinstance(known, Interval):
        return known
    signs = {_SIGNS[quadrant][axis] for quadrant in needs.members}
    return Interval(-math.inf if -1 in signs else 0.0, math.inf if 1 in signs else 0.0)


def _quadrant_boxes(
    quadrants: QuadrantSet, sides: _Sides, volts: float, amperes: float
) -> tuple[Box, ...]:
    boxes = []
    for quadrant in quadrants.members:
        rightward, upward = _SIGNS[quadrant]
        across = _side(sides.right if rightward > 0 else sides.left, volts) * rightward
        through = _side(sides.up if upward > 0 else sides.down, amperes) * upward
        boxes.append(_box(min(0.0, across), max(0.0, across), min(0.0, through), max(0.0, through)))
    return tuple(boxes)


def _side(value: float | None, scale: float) -> float:
    return HALF if value is None else _place(value, scale)


def _box(left: float, right: float, bottom: float, top: float) -> Box:
    width, height = max(right - left, _THIN), max(top - bottom, _THIN)
    x, y = (left + right - width) / 2, -(bottom + top + height) / 2
    return Box(_rounded(x), _rounded(y), _rounded(width), _rounded(height))


def _outline(sides: _Sides, volts: float, amperes: float) -> str:
    right, left = _side(sides.right, volts), -_side(sides.left, volts)
    top, bottom = -_side(sides.up, amperes), _side(sides.down, amperes)
    lines = (
        (sides.right, (right, top), (right, bottom)),
        (sides.left, (left, top), (left, bottom)),
        (sides.up, (left, top), (right, top)),
        (sides.down, (left, bottom), (right, bottom)),
    )
    drawn = [
        f"M{_rounded(start[0])} {_rounded(start[1])}L{_rounded(end[0])} {_rounded(end[1])}"
        for side, start, end in lines
        if side is not None
    ]
    return "".join(drawn)


def _ticks(scale: float) -> tuple[Tick, ...]:
    """Two or three round numbers on each side of the origin."""
    if not scale:
        return ()
    power = 10.0 ** math.floor(math.log10(scale / 2.0))
    step = max(s * power for s in _STEPS if s * power <= scale / 2.0 * (1.0 + 1e-9))
    count = int(scale / step * (1.0 + 1e-9))
    marks = [k * step for k in range(-count, count + 1) if k]
    return tuple(Tick(_rounded(_place(mark, scale)), mark) for mark in marks)


def _rounded(value: float) -> float:
    return round(value, 2) + 0.0
