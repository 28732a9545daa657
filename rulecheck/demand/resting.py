"""Positions that no state leaves off, because their current has no other way: AC switches, relays.

mains - S1 - L1 - heater        S1 is off only while i(L1) rests at zero; then inductor and
                                load have no voltage and S1 stands across the mains
"""

from rulecheck.demand.analysis import Worked
from rulecheck.demand.demands import PositionDemand, Witness
from rulecheck.demand.evaluate import quadrants_of
from rulecheck.demand.offsets import Offsets
from rulecheck.demand.voltages import name_of
from rulecheck.stage import BranchKind, Position
from rulecheck.values import AffineForm, Interval
from rulecheck.values.record import replace


def with_rest(demand: PositionDemand, position: Position, worked: Worked) -> PositionDemand:
    """The demand with the off voltage at rest, where no state gave one and the current can rest."""
    current = demand.on_current
    if demand.off_high is not None or not isinstance(current, Interval):
        return demand
    form = _voltage_at_rest(position, worked)
    if form is None or not current.contains(0.0):
        return demand
    span = worked.box.range_of(form)
    low = Witness(span.low, (), form, worked.box.corner_of(form, False))
    high = Witness(span.high, (), form, worked.box.corner_of(form, True))
    return replace(
        demand,
        off_voltage=span,
        off_low=low,
        off_high=high,
        quadrants=quadrants_of(span, current),
    )


def _voltage_at_rest(position: Position, worked: Worked) -> AffineForm | None:
    """With every stiff current at zero, its branch has no voltage."""
    offsets = Offsets()
    for branch in worked.stage.branches:
        if branch.kind is BranchKind.VOLTAGE:
            offsets.tie(branch.start, branch.end, worked.voltages.forms[branch.name])
    for branch in worked.stage.branches:
        stopped = worked.box.ranges.get(name_of(branch))
        if branch.kind is BranchKind.CURRENT and stopped is not None and stopped.contains(0.0):
            offsets.tie(branch.start, branch.end, AffineForm())
    return offsets.difference(position.start, position.end)
