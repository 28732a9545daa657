"""Positions between two rigid voltages: battery disconnects, OR-ing switches, crowbars.

Such a position is on only where the two voltages are equal. Its off voltage is the range of
their difference, its on current the mean that the ports behind it leave to it.
"""

import math
from collections.abc import Iterator, Mapping

from rulecheck.demand.analysis import Worked
from rulecheck.demand.demands import Group, PositionDemand
from rulecheck.demand.equations import Solution
from rulecheck.demand.evaluate import Sample, from_samples
from rulecheck.demand.pulses import pulsed
from rulecheck.demand.states import RawState
from rulecheck.demand.stiff import Box
from rulecheck.parts import Kind
from rulecheck.stage import Position
from rulecheck.values import AffineForm, Interval, Unknown

_NOTHING = Solution({}, {}, {}, (), ())


def connecting_demand(
    position: Position, worked: Worked, settle: Mapping[str, str]
) -> tuple[PositionDemand, str]:
    """The demand of a position whose ends stand on one rigid island, and what was assumed."""
    box = worked.box
    form, assumed = _difference(position, worked)
    off_range = box.range_of(form)
    if assumed:
        off_range = off_range.hull(Interval(0.0, 0.0))
    if not position.gated:
        limits = Interval(
            0.0 if position.free_reverse else -math.inf,
            0.0 if position.free_forward else math.inf,
        )
        off_range = off_range.meet(limits) or off_range
    off = _held_up_by_rivals(position, worked) or [
        Sample(RawState((), _NOTHING), form, off_range, box)
    ]
    on = _on_samples(position, worked, box, box.range_of(form), bool(assumed))
    demand = from_samples(position, off, on, settle)
    if not position.gated and _alternates(form, box):
        return pulsed(demand), assumed
    if not on and (assumed or box.range_of(form).contains(0.0)):
        demand = _current_unknown(demand, position)
    return demand, assumed


def shorting_groups(worked: Worked) -> Iterator[Group]:
    """Gated positions across a stiff voltage that is never zero: turned on, they short it.

    A thyristor there is a crowbar and means to (common practice).
    """
    rigid, parts = worked.voltages.potentials, worked.stage.parts.by_name
    for position in worked.topology.tie_positions:
        form = rigid.offset(position.start) - rigid.offset(position.end)
        span = worked.box.range_of(form)
        kinds = {parts[name].kind for name in position.parts}
        crowbar = kinds <= {Kind.THYRISTOR, Kind.TRIAC}
        connects = position.name in worked.voltages.charged_through or span.contains(0.0)
        if position.gated and not crowbar and not connects:
            why = f"turned on, {position.name} shorts {form.text()}"
            yield Group((position.name,), (), False, why, cannot_work=True)


def _alternates(form: AffineForm, box: Box) -> bool:
    """A source of alternating voltage before a diode charges what is behind it in pulses."""
    return any(
        box.ranges[n].low < 0.0 < box.ranges[n].high for n in form.names if box.ranges[n].bounded
    )


def _held_up_by_rivals(position: Position, worked: Worked) -> list[Sample]:
    """Of diodes that feed one capacitor, an off one stands against the source that feeds it."""
    rigid, box = worked.voltages.potentials, worked.box
    samples = []
    for rival in worked.voltages.rivals.get(position.name, ()):
        reference = next(b for b in worked.stage.branches if b.start == position.end and b.part)
        own = rigid.offset(position.start) - rigid.offset(reference.end)
        form = own - rival
        span = box.range_of(form)
        limited = Interval(min(span.low, 0.0), min(span.high, 0.0))
        samples.append(Sample(RawState((), _NOTHING), form, limited, box))
    return samples


def _difference(position: Position, worked: Worked) -> tuple[AffineForm, str]:
    rigid = worked.voltages.potentials
    form = rigid.offset(position.start) - rigid.offset(position.end)
    charged = worked.voltages.charged_through.get(position.name)
    if charged is None:
        return form, ""
    before, over = charged
    sentence = (
        f"{position.name} connects a capacitor, taken as anything from discharged to "
        f"{over.text()} while {position.name} is off"
    )
    return (over if before == position.start else -over), sentence


def _on_samples(
    position: Position, worked: Worked, box: Box, difference: Interval, charges: bool
) -> list[Sample]:
    mean = worked.means.branches.get(position.name)
    if mean is None or not (charges or difference.contains(0.0)):
        return []
    span = box.range_of(mean)
    if not position.gated:
        limits = Interval(
            -math.inf if position.free_reverse else 0.0, math.inf if position.free_forward else 0.0
        )
        kept = span.meet(limits)
        # a diode drawn against the current does not make the current go away
        span = kept if kept is not None and kept.magnitude > 0.0 else span
    return [Sample(RawState((position.name,), _NOTHING), mean, span, box)]


def _current_unknown(demand: PositionDemand, position: Position) -> PositionDemand:
    settle = f"the currents of the ports behind {position.name} (`supplies:` or `draws:`)"
    return PositionDemand(
        demand.position,
        demand.off_voltage,
        Unknown(f"on-state current of {position.name}", settle),
        Unknown(f"quadrants of {position.name}", settle),
        demand.off_low,
        demand.off_high,
        None,
        None,
        demand.not_covered,
    )
