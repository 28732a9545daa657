"""Facts of what happens with all gates off, and of free paths that another switch turns off."""

from collections.abc import Iterable, Mapping

from rulecheck.demand import Demands, FreeShort, HardCommutation, InterruptedCurrent
from rulecheck.facts.facts import Bounds, Subject, Value
from rulecheck.facts.inputs import Inputs, stated_number
from rulecheck.facts.recovery import (
    current_slope,
    peak_recovery_current,
    recovering_diodes,
    recovery_charge,
    recovery_time,
)
from rulecheck.facts.terms import SubjectTerm, link, number, span_of, text, texts, yes_no
from rulecheck.parts import Kind
from rulecheck.stage import Position
from rulecheck.values import Dimension, Interval, Unknown

V, A = Dimension.VOLTAGE, Dimension.CURRENT

FREE_PATH = SubjectTerm(
    "free-path",
    "A path that needs no gate: one that is missing, one that shorts, or one that recovers.",
    (
        text("sort", "`interrupted`, `short` or `recovery`."),
        text("carrier", "Of `interrupted`: the inductor, winding or port whose current it is."),
        text("direction", "Of `interrupted`: the way the current flows through the carrier."),
        span_of("current", Dimension.CURRENT, "Of `interrupted`: the current in that direction."),
        text("across", "Of `short`: the voltage that is shorted."),
        span_of("voltage", Dimension.VOLTAGE, "Of `short`: the range of that voltage."),
        text("by", "Of `recovery`: the position whose turning on ends the free conduction."),
        number("recovery-current", A, "Of `recovery`: the current turned off."),
        number("recovery-voltage", V, "Of `recovery`: the voltage that follows."),
        number("recovery-time", Dimension.TIME, "Of `recovery`: longest of the diodes' times."),
        number("recovery-charge", Dimension.CHARGE, "Of `recovery`: charge of its diodes."),
        number("recovery-peak", A, "Of `recovery`: peak of the abrupt recovery current itself."),
        number("period", Dimension.TIME, "Of `recovery`: the switching period of its leg."),
        text(
            "diode-sort",
            "Of `recovery`: `body`, `co-packed`, `discrete`, `channel`, or `beside` where an "
            "external diode lies beside one that nothing keeps out of conduction.",
        ),
        texts("diodes", "Of `recovery`: the devices whose free paths carry the current."),
        texts("shielded", "Of `recovery`: transistors whose own diode a series diode keeps out."),
        yes_no("has-shield", "Of `recovery`: there are such transistors."),
        number("series-blocking", V, "Of `recovery`: least blocking voltage of those diodes."),
    ),
    (
        link("positions", "position", "The positions that it runs, or should run, through."),
        link("inductors", "inductor", "Of `interrupted`: the inductor, where it is one."),
        link("turned-off-by", "position", "Of `recovery`: the position of `by`."),
    ),
)

_NOT_OF_THIS_SORT: dict[str, Value] = {
    **dict.fromkeys(("carrier", "direction", "across", "by", "diode-sort"), ""),
    **dict.fromkeys(("diodes", "shielded"), ()),
    "has-shield": False,
    **dict.fromkeys(("recovery-charge", "recovery-peak", "series-blocking"), 0.0),
    **dict.fromkeys(("current", "voltage"), Interval(0.0, 0.0)),
    **dict.fromkeys(("recovery-current", "recovery-voltage", "recovery-time", "period"), 0.0),
}


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    demands = inputs.demands
    return (
        *(_interrupted(inputs, item) for item in demands.interrupted),
        *(_short(inputs, item) for item in demands.free_shorts),
        *(_recovery(inputs, item) for item in demands.hard_commutations),
    )


def names_by_position(demands: Demands) -> dict[tuple[str, str], tuple[str, ...]]:
    """By sort and position: the names of the free paths at it."""
    found: dict[tuple[str, str], list[str]] = {}
    for sort, name, positions in _named(demands):
        for position in positions:
            found.setdefault((sort, position), []).append(name)
    return {key: tuple(names) for key, names in found.items()}


def _named(demands: Demands) -> Iterable[tuple[str, str, tuple[str, ...]]]:
    for interrupted in demands.interrupted:
        yield "interrupted", interrupted_name(interrupted), interrupted.positions
    for short in demands.free_shorts:
        yield "short", short_name(short), short.positions
    for recovery in demands.hard_commutations:
        yield "recovery", recovery_name(recovery), (recovery.position,)


def interrupted_name(item: InterruptedCurrent) -> str:
    return f"{item.carrier} {item.direction}"


def short_name(item: FreeShort) -> str:
    return "+".join(item.positions)


def recovery_name(item: HardCommutation) -> str:
    return f"{item.position} by {item.by}"


def _interrupted(inputs: Inputs, item: InterruptedCurrent) -> Subject:
    parts = (item.carrier,) if item.carrier in inputs.part_by_name else ()
    parts = (*parts, *inputs.parts_of_positions(item.positions))
    part = inputs.part_by_name.get(item.carrier)
    values: dict[str, Value] = {
        "sort": "interrupted",
        "carrier": item.carrier,
        "direction": item.direction,
        "current": item.within,
    }
    links = {
        "positions": item.positions,
        "inductors": (part.name,) if part and part.kind is Kind.INDUCTOR else (),
    }
    return _subject(inputs, interrupted_name(item), values, links, parts, item.nets)


def _short(inputs: Inputs, item: FreeShort) -> Subject:
    known = [inputs.position_by_name[name] for name in item.positions]
    nets = tuple(dict.fromkeys(net for p in known for net in (p.start, p.end)))
    values: dict[str, Value] = {"sort": "short", "across": item.across, "voltage": item.voltage}
    links = {"positions": item.positions, "inductors": ()}
    parts = inputs.parts_of_positions(item.positions)
    return _subject(inputs, short_name(item), values, links, parts, nets)


def _recovery(inputs: Inputs, item: HardCommutation) -> Subject:
    position = inputs.position_by_name[item.position]
    values: dict[str, Value] = {
        "sort": "recovery",
        "by": item.by,
        "recovery-current": item.current,
        "recovery-voltage": item.voltage,
        "period": _period(inputs, item.position),
        **_diode_values(inputs, item, position),
    }
    links = {"positions": (item.position,), "inductors": (), "turned-off-by": (item.by,)}
    nets = (position.start, position.end)
    return _subject(inputs, recovery_name(item), values, links, position.parts, nets)


def _diode_values(inputs: Inputs, item: HardCommutation, position: Position) -> dict[str, Value]:
    forward = inputs.capabilities.positions[item.position].forward.freewheels
    found = recovering_diodes(inputs, position, forward)
    charge = recovery_charge(inputs, position, found.devices)
    series = [stated_number(inputs.part_by_name[n], "ratings.blocking") for n in found.series]
    known = [value for value in series if isinstance(value, float)]
    return {
        "recovery-time": recovery_time(inputs, found.devices),
        "recovery-charge": charge,
        "recovery-peak": _peak(inputs, item, charge),
        "diode-sort": found.sort,
        "diodes": found.devices,
        "shielded": found.shielded,
        "has-shield": bool(found.shielded),
        "series-blocking": next((v for v in series if v not in known), min(known, default=0.0)),
    }


def _peak(inputs: Inputs, item: HardCommutation, charge: Value) -> Value:
    """Of an abrupt diode, whose peak is the largest; open upwards where the charge is."""
    devices = inputs.parts_of_positions((item.by,))
    gated = [name for name in devices if inputs.part_by_name[name].gated]
    slope = current_slope(inputs, item.current, gated)
    if not isinstance(slope, float):
        return slope
    if isinstance(charge, Bounds):
        least = peak_recovery_current(charge.range.low, slope)
        return Bounds(Interval(least, float("inf")), charge.missing)
    return peak_recovery_current(charge, slope) if isinstance(charge, float) else charge


def _period(inputs: Inputs, position: str) -> Value:
    legs = inputs.legs_of_position.get(position, ())
    own = [inputs.stage.leg_switching[leg] for leg in legs if leg in inputs.stage.leg_switching]
    for switching in (*own, inputs.stage.switching):
        if switching.frequency:
            return 1.0 / switching.frequency
    return Unknown("switching frequency", "switching: {frequency: ...}")


def _subject(
    inputs: Inputs,
    name: str,
    values: Mapping[str, Value],
    links: Mapping[str, tuple[str, ...]],
    parts: tuple[str, ...],
    nets: tuple[str, ...],
) -> Subject:
    span, related = inputs.span_of_parts(parts), inputs.related_spans(parts)
    return Subject(
        "free-path", name, {**_NOT_OF_THIS_SORT, **values}, links, parts, nets, span, related
    )
