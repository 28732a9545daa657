"""What one core's current leads to in a rectifier that takes a share of it.

    1 A in the mean, flowing for (1 - D) = 0.6 of the period: 1.67 A while it flows, and the
    ripple's share on top

In discontinuous conduction the current x falls from its peak to zero at v2 / L, so its mean after
the turns ratio is L f peak^2 / (2 v2). Erickson and Maksimovic, Fundamentals of Power
Electronics, chapters on steady state and on discontinuous conduction (from memory).
"""

import math
from collections.abc import Sequence

from rulecheck.demand.analysis import Worked
from rulecheck.demand.readings import across
from rulecheck.demand.states import RawState
from rulecheck.demand.stiff import Box
from rulecheck.values import Interval
from rulecheck.values.record import Record

States = Sequence[tuple[RawState, Box]]


class CoreCurrent(Record):
    """Its magnitude, half its ripple, and what tells how long it flows."""

    span: Interval
    ripple: float
    stretch: float | None
    """The largest 1 / (1 - D), where volt-second balance of two levels fixes it."""
    steepness: float | None
    """The largest sqrt(2 v2 / (L f)), by which the peak follows in discontinuous conduction."""


def core_current(
    name: str, rectifiers: frozenset[str], worked: Worked, index: int, states: States
) -> CoreCurrent | None:
    """The core's current `name`, which falls in the states in which some rectifier is on.

    None where its sign or its magnitude is not known.
    """
    span, current = worked.box.ranges[name], worked.currents.get(name)
    if not span.bounded or span.low < 0.0 < span.high:
        return None
    magnitude = span if span.low >= 0.0 else -span
    ripple = current.ripple if current and name in worked.means.forms else 0.0
    levels = _levels(name, rectifiers, worked, index, states)
    if levels is None or not math.isfinite(ripple):
        return CoreCurrent(magnitude, 0.0, None, None)
    rising, falling, inductance = levels
    # losses, by the stated efficiency, lengthen D
    stretch = 1.0 + falling / (rising * worked.stage.efficiency)
    switching = (worked.stage.switching, *worked.stage.leg_switching.values())
    frequency = min((s.frequency for s in switching if s.frequency), default=0.0)
    steepness = None
    if inductance and frequency:
        steepness = math.sqrt(2.0 * falling / (inductance * frequency))
    return CoreCurrent(magnitude, ripple, stretch, steepness)


def _levels(
    name: str, rectifiers: frozenset[str], worked: Worked, index: int, states: States
) -> tuple[float, float, float | None] | None:
    """The least voltage while the current rises, the most while it falls, and the inductance.

    It falls while the rectifiers conduct and rises in all other states; None where it does not.
    """
    routes = [(c, r) for c, r in worked.routes if c.name == name]
    if len(routes) != 1 or [step.cluster for step in routes[0][1].steps] != [index]:
        return None
    carrier, route = routes[0]
    volts: dict[bool, list[Interval]] = {True: [], False: []}
    for state, box in states:
        wide = worked.box.with_ranges(box.ranges)
        span = wide.range_of(route.fixed + across(route.steps[0], state))
        volts[bool(rectifiers & set(state.on))].append(span)
    falling, rising = volts[True], volts[False]
    if not falling or not rising or not all(s.bounded for s in falling + rising):
        return None
    for sign in (1.0, -1.0):
        least = min(span.scaled(sign).low for span in rising)
        falls = [span.scaled(-sign) for span in falling]
        if least > 0.0 and min(span.low for span in falls) >= 0.0:
            return least, max(span.high for span in falls), carrier.inductance
    return None


def largest_share(share: float, mean: float, core: CoreCurrent) -> float:
    """A share of the core's peak; or, if less, what the own mean leads to.

    In continuous conduction that is the mean while it flows and the share of the ripple, which is
    no larger; in discontinuous conduction the share of the whole swing.
    """
    peak = share * core.span.high
    if core.stretch is None or not core.ripple:
        return peak
    flowing = mean * core.stretch
    continuous = flowing + min(share * core.ripple, flowing)
    if core.span.low > 0.0:
        return min(peak, continuous)
    whole = 2.0 * share * core.ripple
    if core.steepness is not None:
        whole = min(whole, core.steepness * math.sqrt(mean * share))
    return min(peak, max(continuous, whole))
