"""Demands of diodes that charge a capacitor in pulses, which no stiff quantity shows."""

from rulecheck.demand.demands import PositionDemand
from rulecheck.values import Interval, QuadrantSet
from rulecheck.values.record import replace


def pulsed(demand: PositionDemand) -> PositionDemand:
    """Charging pulses are not found by stiff quantities; their sign and the blocking are."""
    why = "the charging pulses of a capacitor behind diodes are not covered"
    current = Interval(0.0, float("inf"))
    quadrants = demand.quadrants
    if isinstance(demand.off_voltage, Interval):
        volts = demand.off_voltage
        signs = [s for s, ok in ((True, volts.high > 1.0), (False, volts.low < -1.0)) if ok]
        quadrants = QuadrantSet.product(signs, [True])
    return replace(demand, on_current=current, quadrants=quadrants, not_covered=(why,))
