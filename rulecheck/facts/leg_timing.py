"""When the two sides of a leg are on: from the gates' commands, else from what is stated.

Q1 on 0 ... 4.8 us, Q3 on 5 ... 9.7 us of 10 us     complementary, dead time 200 ns and 300 ns
"""

import math
from collections.abc import Iterable, Sequence

from rulecheck.demand import CommandedGroup, Leg, Takeover
from rulecheck.facts.facts import Bounds, Value
from rulecheck.facts.inputs import Inputs
from rulecheck.facts.leg_drivers import LegDrivers, drivers_of, gated_devices
from rulecheck.stage import CommonWindow, OnTimes, common_window
from rulecheck.stage.gate_command import both, opposite, total
from rulecheck.values import Interval, Unknown
from rulecheck.values.record import Record

_PAUSE = 0.2
"""Share of the period that both sides are off beyond which they merely alternate."""
_SAME = 1e-6


class LegTiming(Record):
    """One leg's timing; seconds, hertz and shares."""

    drivers: LegDrivers
    may_not_overlap: bool
    """All gates on would short a voltage."""
    relation: str | Unknown
    """`complementary`, `overlapping`, `alternating`, `together`, `held`, `unrelated`,
    `partly`, `stated`."""
    overlap: Value
    pause: Value
    """Time in a period with neither side on."""
    to_low: Value
    """Least dead time from the side above to the side below."""
    to_high: Value
    dead_time: Value
    """The least of both, or what sheet and driver state."""
    stated_dead_time: float | Unknown
    from_sources: bool
    frequency: float | Unknown
    """Of the commands."""
    high_duty: float | Unknown
    low_duty: float | Unknown


def timing_of(inputs: Inputs, leg: Leg) -> LegTiming:
    """The timing of one leg; unknown where neither sources, sheet nor drivers tell."""
    drivers = drivers_of(inputs, leg)
    group = _group(inputs, leg)
    stated = stated_dead_time(inputs, leg)
    window = group.window if group is not None else _unknown_commands(leg)
    may_not = group is None or group.can_short
    if group is None or isinstance(window, Unknown):
        assert isinstance(window, Unknown)
        known = _stated(stated, drivers)
        relation: str | Unknown | None = _own_relation(inputs, leg, drivers)
        kept_apart = _is_positive(known) or drivers.interlock is True
        apart = relation in (None, "held") and kept_apart
        if relation is None:
            relation = "stated" if kept_apart else window
        overlap = 0.0 if apart else window
        return LegTiming(
            drivers=drivers,
            may_not_overlap=may_not,
            relation=relation,
            overlap=overlap,
            pause=window,
            to_low=known,
            to_high=known,
            dead_time=known,
            stated_dead_time=stated,
            from_sources=False,
            frequency=window,
            high_duty=window,
            low_duty=window,
        )
    return _from_commands(inputs, leg, group, window, drivers, stated)


def _group(inputs: Inputs, leg: Leg) -> CommandedGroup | None:
    wanted = {*leg.high, *leg.low}
    return next((g for g in inputs.demands.commanded if wanted <= set(g.positions)), None)


def _unknown_commands(leg: Leg) -> Unknown:
    settle = f"PULSE or PWL sources that drive the gates of leg {leg.name}"
    return Unknown(f"when the switches of leg {leg.name} turn on", settle)


def stated_dead_time(inputs: Inputs, leg: Leg) -> float | Unknown:
    """The leg's own in the sheet, else that of all legs."""
    own = inputs.stage.leg_switching.get(leg.midpoint)
    found = own.dead_time if own and own.dead_time is not None else None
    if found is None:
        found = inputs.stage.switching.dead_time
    if found is not None:
        return found
    return Unknown(f"dead time of leg {leg.midpoint}", "switching: {dead-time: ...}")


def _stated(stated: float | Unknown, drivers: LegDrivers) -> Value:
    """The larger of what the sheet states and what the driver keeps by itself."""
    built_in = drivers.built_in_dead_time
    if built_in is None:
        return stated
    if isinstance(built_in, Unknown):
        if isinstance(stated, Unknown):
            return built_in
        return Bounds(Interval(stated, math.inf), (built_in,))
    return built_in if isinstance(stated, Unknown) else max(stated, built_in)


def _is_positive(value: Value) -> bool:
    least = value.range.low if isinstance(value, Bounds) else value
    return isinstance(least, float) and least > 0.0


def _own_relation(inputs: Inputs, leg: Leg, drivers: LegDrivers) -> str | None:
    """From this leg's commands alone, where those of its group are not all known."""
    commands = inputs.stage.gate_commands
    mine = {name: commands[name] for name in drivers.devices if name in commands}
    if len(mine) < len(drivers.devices) or len(mine) < 2:
        return None
    window = common_window(mine)
    if isinstance(window, Unknown):
        steady = all(command.steady for command in mine.values())
        return "held" if steady else "unrelated"
    high, low = gated_devices(inputs, leg.high), gated_devices(inputs, leg.low)
    if not high or not low or leg.others:
        return None
    above, below = _on_together(window, high), _on_together(window, low)
    return _relation(inputs, window, (*high, *low), above, below)


def _from_commands(
    inputs: Inputs,
    leg: Leg,
    group: CommandedGroup,
    window: CommonWindow,
    drivers: LegDrivers,
    stated: float | Unknown,
) -> LegTiming:
    high, low = gated_devices(inputs, leg.high), gated_devices(inputs, leg.low)
    others = gated_devices(inputs, leg.others)
    late = _late(inputs, drivers)
    mine = [t for t in group.takeovers if {t.off, t.on} <= set(drivers.devices)]
    to_low = _least(leg, (t for t in mine if t.off in high or t.on in low), late)
    to_high = _least(leg, (t for t in mine if t.off in low or t.on in high), late)
    above, below = _on_together(window, high), _on_together(window, low)
    paired = bool(high) and bool(low) and not others
    relation = _relation(inputs, window, (*high, *low), above, below)
    overlap = total(both(above, below)) if paired else 0.0
    off = total(both(opposite(above, window.length), opposite(below, window.length)))
    return LegTiming(
        drivers,
        group.can_short,
        relation if paired else "partly",
        overlap,
        off if not late else Bounds(Interval(off, window.length), (late,)),
        to_low,
        to_high,
        _smaller(to_low, to_high),
        stated,
        True,
        _frequency(window, above or below),
        total(above) / window.length,
        total(below) / window.length,
    )


def _late(inputs: Inputs, drivers: LegDrivers) -> Unknown | None:
    """The driver's own dead time, where it has one that nobody states."""
    commands = inputs.stage.gate_commands
    names = {commands[name].may_begin_later for name in drivers.devices if name in commands}
    part = next((inputs.part_by_name[name] for name in sorted(names) if name), None)
    return None if part is None else part.missing("driver.dead-time")


def _least(leg: Leg, takeovers: Iterable[Takeover], late: Unknown | None) -> Value:
    gaps = [takeover.dead_time for takeover in takeovers]
    if not gaps:
        settle = f"sources that turn on both sides of leg {leg.name}"
        return late or Unknown(f"dead time of leg {leg.name}", settle)
    least = round(min(gaps), 15)
    return least if late is None else Bounds(Interval(least, math.inf), (late,))


def _smaller(one: Value, other: Value) -> Value:
    """The least of two dead times; of an unknown one and a known one, the known one."""
    if isinstance(one, Unknown):
        return other
    if isinstance(other, Unknown):
        return one
    if isinstance(one, Bounds) and isinstance(other, Bounds):
        return one if one.range.low <= other.range.low else other
    return min(value for value in (one, other) if isinstance(value, float))


def _on_together(window: CommonWindow, devices: Sequence[str]) -> OnTimes:
    """When all of the devices are on."""
    times: OnTimes = (Interval(0.0, window.length),) if devices else ()
    for name in devices:
        times = both(times, window.on[name])
    return times


def _relation(
    inputs: Inputs,
    window: CommonWindow,
    devices: Sequence[str],
    above: OnTimes,
    below: OnTimes,
) -> str:
    commands = [inputs.stage.gate_commands[name] for name in devices]
    periods = {round(c.period / window.length, 6) for c in commands if c.repeats}
    if any(_never_changes(times, window.length) for times in (above, below)):
        return "held"
    if len(periods) > 1:
        return "unrelated"
    shared = total(both(above, below))
    small = _SAME * window.length
    if shared > small and abs(shared - total(above)) + abs(shared - total(below)) <= small:
        return "together"
    if shared > small:
        return "overlapping"
    pause = window.length - total(above) - total(below)
    return "complementary" if pause <= _PAUSE * window.length else "alternating"


def _never_changes(times: OnTimes, length: float) -> bool:
    on = total(times)
    return on <= _SAME * length or on >= (1.0 - _SAME) * length


def _frequency(window: CommonWindow, times: OnTimes) -> float | Unknown:
    """Turnings on a second; of a window that is described once nobody knows how it goes on."""
    if not window.cyclic:
        settle = "a source that repeats (PULSE, or PWL with r=0)"
        return Unknown("the frequency of the gates", settle)
    wraps = len(times) > 1 and times[0].low == 0.0 and times[-1].high >= window.length
    return (len(times) - wraps) / window.length
