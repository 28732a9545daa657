"""Hand-made results, so that a renderer is tried without an analysis."""

import io

from rulecheck.capability import Capability, Direction
from rulecheck.demand import Bridge, Group, Leg, PositionDemand, State, Undetermined
from rulecheck.report import Look, PositionResult, QuadrantResult
from rulecheck.stage import Position
from rulecheck.values import Interval, QuadrantSet, Span, Unknown
from rulecheck.values.quadrants import Quadrant

MISSING_RATING = Unknown("blocking of Q9", "ratings.blocking of part SW-N100-7 (in hut.parts.yaml)")
BOTH_CURRENTS = QuadrantSet.of([Quadrant.I, Quadrant.IV])
FROM_36_TO_58 = Interval(36.0, 58.0)
UP_TO_86 = Interval(-86.0, 86.0)
ONE = QuadrantSet.of([Quadrant.I])


def direction(
    blocks: float | Unknown = 100.0, current: float | Unknown = 120.0, **changes: object
) -> Direction:
    known = {
        "carries": current != 0.0,
        "freewheels": False,
        "holds_off": blocks != 0.0,
        "blocks": blocks,
        "blocks_at_least": 0.0 if isinstance(blocks, Unknown) else blocks,
        "current": current,
        "current_at_least": 0.0 if isinstance(current, Unknown) else current,
        "missing": tuple(item for item in (blocks, current) if isinstance(item, Unknown)),
        "weakest": ("Q1",),
        "carried_by": ("Q1",),
    }
    return Direction(**{**known, **changes})  # type: ignore[arg-type]


def position(name: str, start: str, end: str) -> Position:
    return Position(name, (name,), start, end, (), True, False, True, Span("hut.cir", 14))


def demand(
    name: str,
    off: Interval | Unknown = FROM_36_TO_58,
    on: Interval | Unknown = UP_TO_86,
    quadrants: QuadrantSet | Unknown = BOTH_CURRENTS,
) -> PositionDemand:
    return PositionDemand(name, off, on, quadrants, None, None, None, None)


def result_row(
    name: str = "Q1",
    asked: PositionDemand | None = None,
    forward: Direction | None = None,
    reverse: Direction | None = None,
    has: QuadrantSet = BOTH_CURRENTS,
) -> PositionResult:
    capability = Capability(name, forward or direction(), reverse or direction(0.0), has)
    return PositionResult(position(name, "BUS", "SW"), asked or demand(name), capability)


def leg_result(*rows: PositionResult) -> QuadrantResult:
    state = State(("Q1",), {}, {}, True)
    return QuadrantResult(
        "hut.cir",
        rows or (result_row(),),
        (Leg("SW", "half-bridge leg", "SW", ("BUS", "PGND"), ("Q1",), ("Q2",), (), 2),),
        (Bridge("A, B", "H-bridge", ("A", "B")),),
        (Group(("Q1", "Q2"), (state, state), True), Group(("Q8",), (), False, "too large")),
        (Undetermined("current of L3", "set: {L3: {current: [LOW, HIGH]}}"),),
        ("C12 read as a snubber of Q1",),
        ("the spike of the leakage inductance of T1",),
    )


def rendered(render: object, result: object, look: Look | None = None) -> str:
    stream = io.StringIO()
    render(result, stream, look or Look())  # type: ignore[operator]
    return stream.getvalue()
