"""Facts of what stands in the line of a port: fuses, breakers, contacts, connectors, sensors."""

import math
from collections.abc import Iterator

from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.feeding import Feeder, Wires, feeders_of, find_wires, heating_of
from rulecheck.facts.inputs import Inputs, stated_number
from rulecheck.facts.terms import SubjectTerm, link, number, text, yes_no
from rulecheck.parts import Kind, Part, through_nets
from rulecheck.stage import Port, PortKind
from rulecheck.values import Dimension, Interval, Unknown

V, A = Dimension.VOLTAGE, Dimension.CURRENT

LINE_ELEMENT = SubjectTerm(
    "line-element",
    "A fuse, breaker, contact, connector, choke, thermistor or current sensor in a line.",
    (
        text("kind", "Its kind: `fuse`, `relay`, `connector`, ..."),
        text("port", "The port in whose line it stands; empty where it stands in none."),
        text("sort", "`dc` or `ac`: what the port's voltage is; empty where there is no port."),
        number("working-current", A, "The largest current through it; of AC the rms value."),
        number("working-voltage", V, "The port's voltage; of AC the rms value, line to line."),
        number("rated-current", A, "Its rated current."),
        number("rated-voltage", V, "Its rated voltage, for DC where the port is DC."),
        yes_no("dc-rated", "Its DC voltage is stated on its own."),
    ),
    (link("part", "part", "The same thing as a part."), link("ports", "port", "That port.")),
)

_ALWAYS = frozenset(
    {Kind.FUSE, Kind.CIRCUIT_BREAKER, Kind.RELAY, Kind.NTC}
    | {Kind.COMMON_MODE_CHOKE, Kind.CURRENT_TRANSFORMER, Kind.SENSOR}
)


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    """Every such part that power current can pass; connectors where a port's nets are on them."""
    wires = find_wires(inputs)
    found = [
        _element(inputs, part, feeders_of(wires, inputs, part))
        for part in inputs.stage.parts.parts
        if part.kind in _ALWAYS and through_nets(part)
    ]
    return (*found, *_connectors(inputs))


def fused_nets(inputs: Inputs, wires: Wires) -> Iterator[tuple[str, str]]:
    """(port, net as written) of each line of a port that a fuse or breaker interrupts."""
    for part in inputs.stage.parts.parts:
        if part.kind not in (Kind.FUSE, Kind.CIRCUIT_BREAKER):
            continue
        for kind, name in feeders_of(wires, inputs, part):
            if kind == "port":
                yield name, inputs.merged(part.nets[0])


def _element(inputs: Inputs, part: Part, feeders: tuple[Feeder, ...]) -> Subject:
    at_port = next((name for kind, name in feeders if kind == "port"), "")
    port = next((p for p in inputs.stage.ports if p.name == at_port), None)
    ranked = sorted(feeders, key=lambda feeder: ("port", "inductor", "position").index(feeder[0]))
    return _subject(inputs, part, port, _working_current(inputs, part, ranked))


def _working_current(inputs: Inputs, part: Part, feeders: list[Feeder]) -> Value:
    settle = f"set: {{{part.name}: {{current: [LOW, HIGH]}}}}"
    unknown = Unknown(f"current of {part.name}", settle)
    if not feeders:
        return unknown
    found = heating_of(inputs, feeders[0])
    if isinstance(found, Unknown):
        return found
    return found.rms_high if feeders[0][0] == "port" else found.peak


def _connectors(inputs: Inputs) -> Iterator[Subject]:
    """The one connector that all nets of a port are on carries its current."""
    spelled = {net.lower(): net for net in inputs.stage.merged}
    for port in inputs.stage.ports:
        nets = {spelled.get(net.lower(), net) for net in port.named_nets or port.nets}
        at = [
            part
            for part in inputs.stage.parts.parts
            if part.kind is Kind.CONNECTOR and nets <= set(part.nets)
        ]
        if len(at) == 1 and nets:
            found = heating_of(inputs, ("port", port.name))
            shared = min(at[0].nets.count(net) for net in nets)
            current = found if isinstance(found, Unknown) else found.rms_high / shared
            yield _subject(inputs, at[0], port, current)


def _subject(inputs: Inputs, part: Part, port: Port | None, current: Value) -> Subject:
    direct = port is not None and port.kind is PortKind.DC
    stated = inputs.stage.stated_current.get(part.name)
    if stated is not None:
        current = stated.magnitude if direct or port is None else stated.magnitude / math.sqrt(2.0)
    dc_rated = "ratings.dc-voltage" in part.data
    rated = "ratings.dc-voltage" if direct and dc_rated else "ratings.voltage"
    values: dict[str, Value] = {
        "kind": part.kind.value,
        "port": port.name if port else "",
        "sort": "" if port is None else "dc" if direct else "ac",
        "working-current": current,
        "working-voltage": working_voltage(inputs, port, part),
        "rated-current": stated_number(part, "ratings.current"),
        "rated-voltage": stated_number(part, rated),
        "dc-rated": dc_rated,
    }
    links = {"part": (part.name,), "ports": (port.name,) if port else ()}
    return Subject("line-element", part.name, values, links, (part.name,), part.nets, part.span)


def _rails_around(inputs: Inputs, port: Port) -> float | None:
    """Where legs switch all nets of a port but its neutral: the widest of their rails."""
    legs = [leg for leg in inputs.demands.legs if leg.midpoint in port.nets]
    spans = [inputs.voltage_between.get((leg.rails[0], leg.rails[-1])) for leg in legs]
    known = [s.magnitude for s in spans if isinstance(s, Interval) and s.bounded]
    if {leg.midpoint for leg in legs} < set(port.nets) or len(known) < len(legs):
        return None
    return max(known, default=None)


def working_voltage(inputs: Inputs, port: Port | None, part: Part) -> Value:
    """DC as it is; AC as rms, of phases from line to line."""
    if port is None:
        settle = f"a port in whose line {part.name} stands"
        return Unknown(f"working voltage of {part.name}", settle)
    span = inputs.stage.stated_voltage.get(part.name, port.voltage)
    if span is None:
        derived = inputs.variable_by_name.get(f"v({port.name})")
        settle = f"ports: {{{port.name}: {{voltage: ...}}}}"
        if derived is None or isinstance(derived.range, Unknown) or not derived.range.bounded:
            switched = _rails_around(inputs, port)
            return switched or Unknown(f"voltage of port {port.name}", settle)
        span = derived.range
    if port.kind is PortKind.DC:
        return span.magnitude
    phases = len(port.nets) if port.kind is PortKind.PHASES else 0
    # line to line of neighbours in a symmetrical set of n: 2 sin(pi/n) times the phase
    ratio = 2.0 * math.sin(math.pi / phases) if phases else 1.0
    return span.magnitude * ratio / math.sqrt(2.0)
