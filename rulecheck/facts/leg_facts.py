"""Facts of legs and bridges, which the switching states name."""

from collections.abc import Iterable

from rulecheck.demand import Bridge, Leg, Likeness
from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.feeding import Wires, find_wires
from rulecheck.facts.inputs import Inputs
from rulecheck.facts.leg_timing_facts import TIMING_FIELDS, timing_values
from rulecheck.facts.likeness_facts import LEG_LIKENESS, leg_likeness, likeness_of_legs
from rulecheck.facts.loop_facts import LOOP_TERMS, loop_values
from rulecheck.facts.short_path import is_short_sensed
from rulecheck.facts.terms import SubjectTerm, count, link, number, text, texts, yes_no
from rulecheck.stage import Role
from rulecheck.values import Dimension, Unknown, natural_key
from rulecheck.values.record import replace

LEG = SubjectTerm(
    "leg",
    "Two or more positions that share a midpoint between two rails.",
    (
        text("sort", "`half-bridge leg`, `chopper cell`, `rectifier leg`, `multilevel leg`, ..."),
        text("midpoint", "The net that its positions share."),
        text("high-rail", "The rail of higher potential."),
        text("low-rail", "The rail of lower potential."),
        count("levels", "How many potentials the midpoint takes."),
        count("gated-positions", "How many of its positions follow a gate."),
        yes_no("gates-joined", "A gate net, or the output behind it, serves above and below."),
        texts("joined-gates", "The gate nets and outputs that serve above and below."),
        yes_no("high-turned", "A gated position above is drawn from the midpoint to the rail."),
        yes_no("low-turned", "A gated position below is drawn from the rail to the midpoint."),
        yes_no("midpoint-loaded", "Something other than its switches and their aids is there."),
        yes_no("short-sensed", "A current sensor sees what flows when all its switches are on."),
        texts("high-kinds", "Kinds of the devices above the midpoint."),
        texts("low-kinds", "Kinds of the devices below the midpoint."),
        texts("high-models", "Models of the gated devices above the midpoint."),
        texts("low-models", "Models of the gated devices below the midpoint."),
        number("frequency", Dimension.FREQUENCY, "Its switching frequency."),
        *LEG_LIKENESS,
        *LOOP_TERMS,
        *TIMING_FIELDS,
    ),
    (
        link("positions", "position", "All its positions."),
        link("high", "position", "Its positions above the midpoint."),
        link("low", "position", "Its positions below the midpoint."),
        link("bridges", "bridge", "The bridges that it is in."),
    ),
)

BRIDGE = SubjectTerm(
    "bridge",
    "Two or three legs on the same rails whose midpoints meet in one load.",
    (
        text("sort", "`H-bridge` or `three-phase bridge`."),
        count("legs-of-one-sort", "How many of its legs are of the sort of the first one."),
        texts("models", "Models of its gated devices, each once."),
        texts("kinds", "Kinds of its devices, each once."),
    ),
    (
        link("legs", "leg", "Its legs."),
        link("positions", "position", "The positions of its legs."),
    ),
)

_AIDS = frozenset(
    {Role.SWITCH, Role.SNUBBER, Role.CLAMP, Role.SHARING, Role.GATE_DRIVE, Role.BOOTSTRAP}
    | {Role.SENSE, Role.SIGNAL, Role.IGNORED, Role.WIRE}
)


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    """Legs and then bridges."""
    wires = find_wires(inputs)
    likeness = {id(item.leg): item for item in likeness_of_legs(inputs)}
    legs = tuple(
        _with_likeness(_leg(inputs, wires, leg), likeness.get(id(leg)))
        for leg in inputs.demands.legs
    )
    return (*legs, *(_bridge(inputs, bridge) for bridge in inputs.demands.bridges))


def _with_likeness(subject: Subject, found: Likeness | None) -> Subject:
    return replace(subject, values={**subject.values, **leg_likeness(found)})


def _leg(inputs: Inputs, wires: Wires, leg: Leg) -> Subject:
    positions = tuple(dict.fromkeys((*leg.high, *leg.low, *leg.others)))
    parts = inputs.parts_of_positions(positions)
    joined = sorted(_gates(inputs, leg.high) & _gates(inputs, leg.low))
    values: dict[str, Value] = {
        "sort": leg.kind,
        "midpoint": leg.midpoint,
        "high-rail": leg.rails[0],
        "low-rail": leg.rails[-1],
        "levels": float(leg.levels),
        "gated-positions": float(sum(inputs.position_by_name[name].gated for name in positions)),
        "gates-joined": bool(joined),
        "joined-gates": tuple(joined),
        "high-turned": _turned(inputs, leg.high, starts_at={leg.midpoint}, ends_at={leg.rails[0]}),
        "low-turned": _turned(inputs, leg.low, starts_at={leg.rails[-1]}, ends_at={leg.midpoint}),
        "midpoint-loaded": _loaded(inputs, leg.midpoint),
        "short-sensed": is_short_sensed(inputs, wires, leg),
        "high-kinds": _kinds(inputs, leg.high),
        "low-kinds": _kinds(inputs, leg.low),
        "high-models": _models(inputs, leg.high),
        "low-models": _models(inputs, leg.low),
        **loop_values(inputs, leg),
        "frequency": _frequency(inputs, leg.midpoint),
        **timing_values(inputs, leg),
    }
    links = {
        "positions": positions,
        "high": leg.high,
        "low": leg.low,
        "bridges": tuple(b.name for b in inputs.demands.bridges if leg.name in b.legs),
    }
    nets = tuple(dict.fromkeys((leg.midpoint, *leg.rails)))
    span, related = inputs.span_of_parts(parts), inputs.related_spans(parts)
    return Subject("leg", leg.name, values, links, parts, nets, span, related)


def _gates(inputs: Inputs, positions: Iterable[str]) -> set[str]:
    """The gate nets of the positions, and the outputs of the drivers behind them."""
    devices = (inputs.part_by_name[name] for name in inputs.parts_of_positions(positions))
    gates = {
        inputs.merged(pin.net)
        for device in devices
        if device.gated
        for pin in device.pins
        if pin.role in ("gate", "base")
    }
    drives = inputs.stage.gate_drives
    return gates | ({drives[gate].output.net for gate in gates if gate in drives} - {""})


def _turned(inputs: Inputs, names: Iterable[str], starts_at: set[str], ends_at: set[str]) -> bool:
    """True where a gated position that holds off one polarity only is drawn the other way up."""
    for name in names:
        position = inputs.position_by_name[name]
        capability = inputs.capabilities.positions[name]
        one_way = capability.forward.holds_off != capability.reverse.holds_off
        upside_down = position.start in starts_at or position.end in ends_at
        if position.gated and one_way and upside_down:
            return True
    return False


def _loaded(inputs: Inputs, midpoint: str) -> bool:
    """Whether power current can leave the midpoint otherwise than through its switches."""
    return midpoint in inputs.ports_at_net or any(
        inputs.stage.roles.get(part, Role.SIGNAL) not in _AIDS
        for part in inputs.parts_at_net.get(midpoint, ())
    )


def _kinds(inputs: Inputs, positions: Iterable[str]) -> tuple[str, ...]:
    names = inputs.parts_of_positions(positions)
    return tuple(sorted({inputs.part_by_name[name].kind.value for name in names}))


def _models(inputs: Inputs, positions: Iterable[str]) -> tuple[str, ...]:
    devices = (inputs.part_by_name[name] for name in inputs.parts_of_positions(positions))
    models = {inputs.spelling[part.text.casefold()] for part in devices if part.gated}
    return tuple(sorted(models, key=natural_key))


def _frequency(inputs: Inputs, midpoint: str) -> Value:
    own = inputs.stage.leg_switching.get(midpoint)
    frequency = (own.frequency if own else None) or inputs.stage.switching.frequency
    settle = "switching: {frequency: ...}"
    return frequency or Unknown(f"switching frequency of leg {midpoint}", settle)


def _bridge(inputs: Inputs, bridge: Bridge) -> Subject:
    legs = [leg for leg in inputs.demands.legs if leg.name in bridge.legs]
    positions = tuple(
        dict.fromkeys(name for leg in legs for name in (*leg.high, *leg.low, *leg.others))
    )
    parts = inputs.parts_of_positions(positions)
    values: dict[str, Value] = {
        "sort": bridge.kind,
        "legs-of-one-sort": float(sum(leg.kind == legs[0].kind for leg in legs)),
        "models": _models(inputs, positions),
        "kinds": _kinds(inputs, positions),
    }
    links = {"legs": bridge.legs, "positions": positions}
    nets = tuple(dict.fromkeys(net for leg in legs for net in (leg.midpoint, *leg.rails)))
    span, related = inputs.span_of_parts(parts), inputs.related_spans(parts)
    return Subject("bridge", bridge.name, values, links, parts, nets, span, related)
