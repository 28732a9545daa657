"""Why positions form a leg: its states, and what happens with all gates off."""

from rulecheck.demand import Bridge, Demands, Leg
from rulecheck.report.explain_timing import timing_entries
from rulecheck.report.explain_variable import variable_entries
from rulecheck.report.explanation import Entry, Explanation
from rulecheck.report.figures import figure, range_figure
from rulecheck.report.look import PLAIN, Look
from rulecheck.stage import Stage

_MOST_STATES = 16


def explain_bridge(bridge: Bridge, demands: Demands) -> Explanation:
    """The legs of a bridge, each with its rails and positions."""
    legs = [leg for leg in demands.legs if leg.name in bridge.legs]
    entries = [
        Entry(
            leg.name,
            f"{leg.kind} on {_listed(leg.rails)}: {_listed((*leg.high, *leg.low, *leg.others))}",
        )
        for leg in legs
    ]
    return Explanation(f"{bridge.name}  {bridge.kind}", tuple(entries))


def _listed(names: tuple[str, ...]) -> str:
    return ", ".join(names)


def explain_leg(leg: Leg, stage: Stage, demands: Demands, look: Look = PLAIN) -> Explanation:
    """The leg's rails, members, legal states, free paths and switching figures."""
    members = (*leg.high, *leg.low, *leg.others)
    places = (("high", leg.high), ("low", leg.low), ("also", leg.others))
    return Explanation(
        f"{leg.name}  {leg.kind}, midpoint {leg.midpoint}",
        (
            Entry("rails", ", ".join(leg.rails)),
            *(Entry(place, ", ".join(names)) for place, names in places if names),
            Entry("levels", str(leg.levels)),
            *_state_entries(members, demands),
            *_range_entries(members, demands, look),
            *variable_entries(_variables(members, demands), stage, demands, 1, look),
            *_switching_entries(leg, stage),
            *timing_entries(leg, stage, look),
            *_event_entries(members, demands, look),
        ),
    )


def _state_entries(members: tuple[str, ...], demands: Demands) -> tuple[Entry, ...]:
    """The legal states seen by this leg alone, each once."""
    groups = [group for group in demands.groups if set(group.positions) & set(members)]
    seen: dict[str, bool] = {}
    for state in (state for group in groups for state in group.states):
        on = ", ".join(name for name in state.on if name in members) or "none on"
        seen[on] = seen.get(on, False) or state.available
    entries = [
        Entry("state" if available else "forbidden", on, 1)
        for on, available in list(seen.items())[:_MOST_STATES]
    ]
    if len(seen) > _MOST_STATES:
        entries.append(Entry("states", f"{len(seen) - _MOST_STATES} more", 1))
    return (Entry("legal states", str(len(seen))), *entries)


def _range_entries(members: tuple[str, ...], demands: Demands, look: Look) -> tuple[Entry, ...]:
    found = [demands.positions[name] for name in members if name in demands.positions]
    return tuple(
        Entry(
            demand.position,
            f"must block {range_figure(demand.off_voltage, 'V', look)},"
            f" carry {range_figure(demand.on_current, 'A', look)}",
        )
        for demand in found
    )


def _variables(members: tuple[str, ...], demands: Demands) -> tuple[str, ...]:
    names: list[str] = []
    for member in members:
        demand = demands.positions.get(member)
        if demand is None:
            continue
        for witness in (demand.off_low, demand.off_high, demand.on_low, demand.on_high):
            names += witness.form.names if witness is not None else ()
    return tuple(dict.fromkeys(names))


def _switching_entries(leg: Leg, stage: Stage) -> tuple[Entry, ...]:
    switching = stage.leg_switching.get(leg.midpoint, stage.switching)
    figures = (
        ("frequency", switching.frequency, "Hz"),
        ("dead time", switching.dead_time, "s"),
        ("edge", switching.edge, "s"),
    )
    return tuple(Entry(label, figure(value, unit)) for label, value, unit in figures)


def _event_entries(members: tuple[str, ...], demands: Demands, look: Look) -> tuple[Entry, ...]:
    return (
        *(
            Entry(
                "recovers",
                f"{event.position}, from {figure(event.current, 'A')} against"
                f" {figure(event.voltage, 'V')}, when {event.by} turns on",
            )
            for event in demands.hard_commutations
            if event.position in members
        ),
        *(
            Entry(
                "interrupted",
                f"with all gates off {current.carrier}, {current.direction},"
                f" {range_figure(current.within, 'A', look)}, finds no free path",
            )
            for current in demands.interrupted
            if set(current.positions) & set(members)
        ),
        *(
            Entry("free short", f"{', '.join(short.positions)} short {short.across}")
            for short in demands.free_shorts
            if set(short.positions) & set(members)
        ),
    )
