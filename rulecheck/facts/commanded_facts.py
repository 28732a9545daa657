"""Facts of what the gates' commands do to a group: shorts and interruptions, and for how long."""

from collections.abc import Iterable, Mapping, Sequence

from rulecheck.demand import CommandedGroup, CommandedState, Group
from rulecheck.facts.facts import Bounds, Subject, Value
from rulecheck.facts.inputs import Inputs, group_name
from rulecheck.facts.leg_timing import LegTiming, timing_of
from rulecheck.facts.terms import SubjectTerm, count, link, number, span_of, text, texts, yes_no
from rulecheck.stage import CommonWindow
from rulecheck.values import Dimension, Interval, Unknown, natural_key, write_quantity

_T, _V = Dimension.TIME, Dimension.VOLTAGE

GROUP_FIELDS = (
    count("gated-devices", "How many of its devices have a gate."),
    yes_no("latching", "Some of its devices turn off by themselves only (thyristor, triac)."),
    yes_no("may-not-overlap", "All its gates on would short a voltage."),
    yes_no("may-not-pause", "No gate on would interrupt a current, for want of a free path."),
    number("commanded-period", _T, "The time after which its gates' commands repeat together."),
    number("short-time", _T, "Time in that period in which the commands short a voltage."),
    texts("shorting", "The positions in the loop of the first such short."),
    text("shorted", "The voltage that it shorts."),
    span_of("shorted-voltage", _V, "The range of that voltage."),
    text("short-at", "When in the period it begins."),
    number("gap-time", _T, "Time in that period in which the commands leave a current no way."),
    texts("gap-currents", "Whose current that is."),
    text("gap-at", "When in the period it begins, and what is on then."),
)

COMMANDED_STATE = SubjectTerm(
    "commanded-state",
    "Devices that the netlist's gate sources command on at the same time.",
    (
        texts("on", "The devices that are on."),
        number("at", _T, "When it first begins, from the start of the common period."),
        number("length", _T, "How long it lasts in all, in one common period."),
        number("share", Dimension.NUMBER, "The same as a share of the period."),
        yes_no("shorts", "It shorts a voltage."),
        text("shorted", "The voltage that it shorts; empty where none."),
        texts("interrupts", "Whose current it leaves no way, whichever its direction."),
        texts("interrupts-one-way", "Whose current it leaves a way in one of two directions only."),
    ),
    (
        link("group", "group", "The group that it is commanded in."),
        link("positions", "position", "The positions of those devices."),
    ),
)


def group_values(inputs: Inputs, group: Group) -> dict[str, Value]:
    """The group's fields; unknown where the commands of its gates are not all known."""
    commanded = commanded_group(inputs, group.positions)
    if commanded is None:
        return {**_nothing(), "gated-devices": 0.0}
    shown = tuple(item.carrier for item in inputs.demands.interrupted)
    can = tuple(name for name in commanded.can_interrupt if name not in shown)
    values: dict[str, Value] = {
        **_nothing(),
        "gated-devices": float(len(commanded.devices)),
        "latching": commanded.latching,
        "may-not-overlap": commanded.can_short,
        "may-not-pause": bool(can),
    }
    window = commanded.window
    if isinstance(window, Unknown) or commanded.latching:
        unknown = window if isinstance(window, Unknown) else _latched(commanded)
        kept_apart = _kept_apart(inputs, commanded)
        values["commanded-period"] = unknown
        values["short-time"] = 0.0 if kept_apart or not commanded.can_short else unknown
        values["gap-time"] = unknown if can else 0.0
        return values
    return values | _short_values(inputs, commanded) | _gap_values(commanded, window, shown)


def commanded_group(inputs: Inputs, positions: Iterable[str]) -> CommandedGroup | None:
    wanted = set(positions)
    return next((g for g in inputs.demands.commanded if wanted == set(g.positions)), None)


def _nothing() -> dict[str, Value]:
    return {
        **dict.fromkeys(("latching", "may-not-overlap", "may-not-pause"), False),
        **dict.fromkeys(("shorting", "gap-currents"), ()),
        **dict.fromkeys(("commanded-period", "short-time", "gap-time"), 0.0),
        **dict.fromkeys(("shorted", "short-at", "gap-at"), ""),
        "shorted-voltage": Interval(0.0, 0.0),
    }


def _latched(group: CommandedGroup) -> Unknown:
    names = ", ".join(group.devices)
    return Unknown(f"how long {names} conduct", "devices that their gates turn off")


def _kept_apart(inputs: Inputs, group: CommandedGroup) -> bool:
    """A dead time, or a driver's interlock, is known for all that could short."""
    timings = _timings(inputs, group)
    if not timings:
        return bool(inputs.stage.switching.dead_time)
    return all(timing.overlap == 0.0 for timing in timings)


def _timings(inputs: Inputs, group: CommandedGroup) -> list[LegTiming]:
    return [
        timing_of(inputs, leg)
        for leg in inputs.demands.legs
        if {*leg.high, *leg.low} <= set(group.positions)
    ]


def _short_values(inputs: Inputs, group: CommandedGroup) -> dict[str, Value]:
    window = group.window
    assert isinstance(window, CommonWindow)
    certain = [state for state in group.states if not isinstance(state.loop, Unknown)]
    shorting = sorted((s for s in certain if s.loop is not None), key=lambda state: state.at)
    length = sum((state.length for state in shorting), 0.0)
    open_ = [state for state in group.states if isinstance(state.loop, Unknown)]
    values: dict[str, Value] = {
        "commanded-period": window.length,
        "short-time": _at_least(length, open_, tuple(s.loop for s in open_)),
    }
    first = shorting[0].loop if shorting else None
    if first is None or isinstance(first, Unknown):
        return values
    return values | {
        "shorting": tuple(sorted(first.positions, key=natural_key)),
        "shorted": first.across,
        "shorted-voltage": first.voltage,
        "short-at": write_quantity(shorting[0].at, "s", 4),
    }


def _at_least(length: float, open_: Sequence[CommandedState], missing: Iterable[object]) -> Value:
    if not open_:
        return length
    most = length + sum(state.length for state in open_)
    return Bounds(Interval(length, most), tuple(m for m in missing if isinstance(m, Unknown)))


def _gap_values(
    group: CommandedGroup, window: CommonWindow, shown: Sequence[str]
) -> dict[str, Value]:
    """Currents that all gates off interrupt, as another rule says, are left out."""
    lost = _first_with([(s, s.interrupted) for s in group.states], shown)
    half = _first_with([(s, s.interrupted_one_way) for s in group.states], shown)
    names = tuple(dict.fromkeys(name for _, found in lost for name in found))
    length = sum((state.length for state, _ in lost), 0.0)
    open_ = [state for state, _ in half if state not in [s for s, _ in lost]]
    missing = tuple(
        Unknown(f"direction of the current of {name}", f"set: {{{name}: {{current: ...}}}}")
        for name in dict.fromkeys(name for _, found in half for name in found)
    )
    values: dict[str, Value] = {
        "commanded-period": window.length,
        "gap-time": _at_least(length, open_, missing),
        "gap-currents": names,
    }
    if lost:
        first = lost[0][0]
        on = ", ".join(first.devices) or "nothing"
        values["gap-at"] = f"{write_quantity(first.at, 's', 4)}, with {on} on"
    return values


def _first_with(
    states: Iterable[tuple[CommandedState, tuple[str, ...]]], shown: Sequence[str]
) -> list[tuple[CommandedState, tuple[str, ...]]]:
    kept = [(s, tuple(name for name in found if name not in shown)) for s, found in states]
    return sorted(((s, found) for s, found in kept if found), key=lambda pair: pair[0].at)


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    """One subject for each set of devices that the sources command on together."""
    return tuple(
        _state(inputs, group, state) for group in inputs.demands.commanded for state in group.states
    )


def state_names(inputs: Inputs, group: Group) -> tuple[str, ...] | Unknown:
    """The names of a group's commanded states; unknown where its commands are."""
    commanded = commanded_group(inputs, group.positions)
    if commanded is None:
        return ()
    if isinstance(commanded.window, Unknown):
        return commanded.window
    return tuple(_name(commanded, state) for state in commanded.states)


def _name(group: CommandedGroup, state: CommandedState) -> str:
    return f"{group_name(group.positions)}: {'+'.join(state.devices) or 'none'} commanded"


def _state(inputs: Inputs, group: CommandedGroup, state: CommandedState) -> Subject:
    window = group.window
    length = window.length if isinstance(window, CommonWindow) else state.length
    loop = state.loop
    values: dict[str, Value] = {
        "on": state.devices,
        "at": state.at,
        "length": state.length,
        "share": state.length / length,
        "shorts": loop if isinstance(loop, Unknown) else loop is not None,
        "shorted": loop if isinstance(loop, Unknown) else loop.across if loop else "",
        "interrupts": state.interrupted,
        "interrupts-one-way": state.interrupted_one_way,
    }
    positions = _positions(inputs.positions_of_part, state.devices)
    links = {"group": (group_name(group.positions),), "positions": positions}
    parts = state.devices or inputs.parts_of_positions(group.positions)
    span, related = inputs.span_of_parts(parts), inputs.related_spans(parts)
    name = _name(group, state)
    return Subject("commanded-state", name, values, links, state.devices, (), span, related)


def _positions(table: Mapping[str, tuple[str, ...]], devices: Iterable[str]) -> tuple[str, ...]:
    return tuple(dict.fromkeys(found for name in devices for found in table.get(name, ())))
