"""Facts of a leg's timing: what its two sides are commanded to do, and what is left of it."""

from collections.abc import Iterable

from rulecheck.demand import Leg
from rulecheck.facts.facts import Bounds, Value
from rulecheck.facts.inputs import Inputs
from rulecheck.facts.leg_timing import LegTiming, timing_of
from rulecheck.facts.terms import number, text, yes_no
from rulecheck.values import Dimension, Interval, Unknown

_T, _F, _1 = Dimension.TIME, Dimension.FREQUENCY, Dimension.NUMBER

TIMING_FIELDS = (
    number("dead-time", _T, "Its least dead time, from gate sources, else from sheet and driver."),
    number("dead-time-to-low", _T, "Least from turning off above to turning on below."),
    number("dead-time-to-high", _T, "Least from turning off below to turning on above."),
    number("stated-dead-time", _T, "The dead time that the sheet states for it."),
    number("driver-dead-time", _T, "What one driver of both sides keeps by itself; 0 where none."),
    number("effective-dead-time", _T, "What delays and switching times leave of its dead time."),
    number("switching-spread", _T, "Longest turn-off minus shortest turn-on of its devices."),
    number("delay-spread", _T, "Longest minus shortest delay of its drivers."),
    yes_no("gated-both-sides", "A position above and one below follow gates."),
    yes_no("may-not-overlap", "All its gates on would short a voltage."),
    yes_no("dead-time-known", "Sources, sheet or driver tell its dead time, were it in part."),
    yes_no("dead-time-stated", "The sheet states one for it."),
    yes_no("timed-by-sources", "Sources of the netlist command all gates of its group."),
    yes_no("interlock", "One driver serves both sides and never turns both on."),
    text(
        "relation",
        "Of its two sides: `complementary`, `alternating` (with pauses), `overlapping`, "
        "`together`, `held` (one never changes), `unrelated`; `partly` where it has more sides, "
        "`stated` where no source but sheet or driver says that they take turns.",
    ),
    number("overlap", _T, "Time in a period with both sides commanded on."),
    number("pause", _T, "Time in a period with neither side commanded on."),
    number("commanded-frequency", _F, "Turnings on a second of the side above."),
    number("high-duty", _1, "Share of the period that the side above is commanded on."),
    number("low-duty", _1, "Share of the period that the side below is commanded on."),
    number("rail-voltage", Dimension.VOLTAGE, "The largest voltage between its rails."),
)


def timing_values(inputs: Inputs, leg: Leg) -> dict[str, Value]:
    """The values of those fields for one leg."""
    timing = timing_of(inputs, leg)
    drivers = timing.drivers
    built_in = drivers.built_in_dead_time
    return {
        "dead-time": timing.dead_time,
        "dead-time-to-low": timing.to_low,
        "dead-time-to-high": timing.to_high,
        "dead-time-known": not isinstance(timing.dead_time, Unknown),
        "dead-time-stated": not isinstance(timing.stated_dead_time, Unknown),
        "stated-dead-time": timing.stated_dead_time,
        "driver-dead-time": 0.0 if built_in is None else built_in,
        "effective-dead-time": effective_dead_time(timing),
        "switching-spread": drivers.switching_spread,
        "delay-spread": drivers.delay_spread,
        "gated-both-sides": _gated(inputs, leg.high) and _gated(inputs, leg.low),
        "may-not-overlap": timing.may_not_overlap,
        "timed-by-sources": timing.from_sources,
        "interlock": drivers.interlock,
        "relation": timing.relation,
        "overlap": timing.overlap,
        "pause": timing.pause,
        "commanded-frequency": timing.frequency,
        "high-duty": timing.high_duty,
        "low-duty": timing.low_duty,
        "rail-voltage": _rail_voltage(inputs, leg),
    }


def effective_dead_time(timing: LegTiming) -> Value:
    """T_D' = T_D - (t3 + t4) + (t1 + t2), seconds, at the worst of the stated ranges.

    t1 and t2 are the on delays of driver and device, t3 and t4 their off delays (application
    manual for IGBT modules, equation 28).
    """
    dead, drivers = timing.dead_time, timing.drivers
    spreads = (drivers.switching_spread, drivers.delay_spread)
    missing = [item for item in (dead, *spreads) if isinstance(item, Unknown)]
    if missing:
        return missing[0]
    lost = sum((item for item in spreads if isinstance(item, float)), 0.0)
    if isinstance(dead, Bounds):
        return Bounds(Interval(dead.range.low - lost, dead.range.high - lost), dead.missing)
    assert isinstance(dead, float)
    return dead - lost


def _gated(inputs: Inputs, positions: Iterable[str]) -> bool:
    return any(inputs.position_by_name[name].gated for name in positions)


def _rail_voltage(inputs: Inputs, leg: Leg) -> Value:
    stiff = inputs.voltage_between.get((leg.rails[0], leg.rails[-1]))
    if isinstance(stiff, Interval) and stiff.bounded:
        return stiff.magnitude
    if isinstance(stiff, Unknown):
        return stiff
    settle = f"a voltage between {leg.rails[0]} and {leg.rails[-1]}"
    return Unknown(f"voltage between the rails of leg {leg.name}", settle)
