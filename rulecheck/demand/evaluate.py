"""From states and boxes to the demand of each position, with the state that gave each extreme."""

import math
from collections.abc import Mapping, Sequence

from rulecheck.demand.demands import PositionDemand, Witness
from rulecheck.demand.readings import Amendment, Reading, feasible, free_ways, inequalities
from rulecheck.demand.states import RawState
from rulecheck.demand.stiff import Box, bounded_by
from rulecheck.stage import Position
from rulecheck.values import AffineForm, Interval, QuadrantSet, Unknown, point
from rulecheck.values.record import Record, replace

SMALL = 0.02
"""Share of the largest below which a value counts as none; method: 2 %, at least 1 V."""
SMALL_VOLTAGE = 1.0


class Sample(Record):
    """One form in one state, with the range that the state leaves it."""

    state: RawState
    form: AffineForm
    range: Interval
    box: Box


def demand_of(
    position: Position, reading: Reading, index: int, box: Box, settle: Mapping[str, str]
) -> PositionDemand:
    """Over all possible states: the range of voltage while off and of current while on."""
    off = off_samples(position, reading, index, box)
    on: list[Sample] = []
    limits = _carried(position, reading.amended)
    for state, narrowed in feasible(reading, index, box):
        if position.name in state.on:
            forms = inequalities(reading.clusters[index], state, reading.amended)
            form = state.solution.on_currents[position.name]
            span = clipped(bounded_by(narrowed, form, forms), limits)
            on.append(Sample(state, form, span, narrowed))
    return from_samples(position, off, on, settle)


def off_samples(position: Position, reading: Reading, index: int, box: Box) -> list[Sample]:
    """The off voltage in every possible state that leaves the position off."""
    limits = withstood(position, reading.amended)
    samples = []
    for state, narrowed in feasible(reading, index, box):
        if position.name not in state.on:
            form = state.solution.off_voltages[position.name]
            forms = inequalities(reading.clusters[index], state, reading.amended)
            span = clipped(bounded_by(narrowed, form, forms), limits)
            samples.append(Sample(state, form, span, narrowed))
    return samples


def _carried(position: Position, amended: Mapping[str, Amendment]) -> Interval:
    """What an ungated position can carry at all: a diode's current has one sign."""
    forward, reverse = free_ways(position, amended)
    both = position.gated or forward == reverse
    return Interval(-math.inf if both or reverse else 0.0, math.inf if both or forward else 0.0)


def withstood(position: Position, amended: Mapping[str, Amendment]) -> Interval:
    """What can stand across an off position: nothing that its free path would conduct."""
    forward, reverse = free_ways(position, amended)
    return Interval(0.0 if reverse else -math.inf, 0.0 if forward else math.inf)


def clipped(span: Interval, limits: Interval) -> Interval:
    """The part of a range within limits; the nearer limit where nothing is left."""
    return span.meet(limits) or point(limits.low if span.high < limits.low else limits.high)


def from_samples(
    position: Position, off: Sequence[Sample], on: Sequence[Sample], settle: Mapping[str, str]
) -> PositionDemand:
    """The demand from all ranges while off and while on; `settle` says how to state a variable."""
    off_range, off_low, off_high = _extremes(off)
    on_range, on_low, on_high = _extremes(on)
    unknown = _open_by((*off, *on), f"quadrants of {position.name}", settle)
    quadrants = unknown or quadrants_of(off_range, on_range)
    return PositionDemand(
        position.name,
        _numbers(off_range, f"off-state voltage of {position.name}", off, settle),
        _numbers(on_range, f"on-state current of {position.name}", on, settle),
        quadrants,
        off_low,
        off_high,
        on_low,
        on_high,
    )


def widened_off(demand: PositionDemand, sample: Sample) -> PositionDemand:
    """The demand with one more state that leaves the position off."""
    before = demand.off_voltage
    if demand.off_low is None or not isinstance(before, Interval):
        return demand
    span, low, high = _extremes([sample])
    both = before.hull(span)
    on, quadrants = demand.on_current, demand.quadrants
    if isinstance(quadrants, QuadrantSet) and isinstance(on, Interval):
        quadrants = quadrants_of(both, on)
    return replace(
        demand,
        off_voltage=both,
        off_low=low if span.low < before.low else demand.off_low,
        off_high=high if span.high > before.high else demand.off_high,
        quadrants=quadrants,
    )


def _extremes(samples: Sequence[Sample]) -> tuple[Interval, Witness | None, Witness | None]:
    if not samples:
        return point(0.0), None, None
    low = min(samples, key=lambda s: s.range.low)
    high = max(samples, key=lambda s: s.range.high)
    span = Interval(_settled(low.range.low), _settled(high.range.high))
    return span, _witness(low, span.low, False), _witness(high, span.high, True)


def _settled(value: float) -> float:
    """What rounding leaves of a zero is zero; other values keep twelve digits."""
    return 0.0 if abs(value) < 1e-9 else float(f"{value:.12g}")


def _witness(sample: Sample, value: float, high: bool) -> Witness:
    return Witness(value, sample.state.on, sample.form, sample.box.corner_of(sample.form, high))


def _numbers(
    span: Interval, what: str, samples: Sequence[Sample], settle: Mapping[str, str]
) -> Interval | Unknown:
    """The range itself; an end without a known magnitude stays infinite in it."""
    return _open_by(samples, what, settle) or span


def _open_by(samples: Sequence[Sample], what: str, settle: Mapping[str, str]) -> Unknown | None:
    """Unknown where an end is open only because a variable's sign is not known."""
    names = sorted(
        {
            name
            for sample in samples
            if not sample.range.bounded
            for name in sample.box.says_nothing(sample.form)
        }
    )
    if not names:
        return None
    return Unknown(what, " and ".join(settle.get(name, name) for name in names))


def polarities_of(off: Interval) -> list[bool]:
    """The signs of voltage that a position must hold off, True for start over end."""
    return _signs(off, max(SMALL_VOLTAGE, SMALL * _finite(off)))


def quadrants_of(off: Interval, on: Interval) -> QuadrantSet:
    """The product of the signs; small values count as none."""
    volts = polarities_of(off)
    amperes = _signs(on, SMALL * _finite(on))
    return QuadrantSet.product(volts, amperes)


def _finite(span: Interval) -> float:
    return span.magnitude if math.isfinite(span.magnitude) else 0.0


def _signs(span: Interval, small: float) -> list[bool]:
    signs = []
    if span.high > small:
        signs.append(True)
    if span.low < -small:
        signs.append(False)
    return signs
