"""Facts of nets and of the stage as a whole."""

from collections.abc import Iterable, Mapping

from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.inputs import Inputs
from rulecheck.facts.islands import Island, find_islands
from rulecheck.facts.terms import SubjectTerm, count, link, number, text, texts, yes_no
from rulecheck.parts import Kind
from rulecheck.values import Dimension, Span, Unknown, natural_key

NET = SubjectTerm(
    "net",
    "A net as the netlist names it.",
    (
        count("pins", "How many pins are on it, a port of the sheet counting as one."),
        yes_no("ground", "It is the ground, or looks like one."),
        yes_no("no-connect", "Its name says that it is left open on purpose."),
        yes_no("power", "A switch or branch of the power stage is on it."),
        yes_no("gate", "The gate or base of a device is on it."),
        yes_no("at-connector", "A connector, controller or sensor is on it."),
        text("merged-into", "The net that stands for it after wires are merged."),
        yes_no("island-head", "It stands for an island of nets that parts join."),
        yes_no("island-grounded", "Its island has a ground, or a core or isolator in it."),
        count("island-nets", "How many nets its island has."),
    ),
    (link("parts", "part", "The parts with a pin on it."),),
)

STAGE = SubjectTerm(
    "stage",
    "The power stage as a whole.",
    (
        text("sheet", "The stage sheet's file; empty where there is none."),
        yes_no("has-ground", "Some net is the ground."),
        texts("grounds", "The grounds, by name."),
        number("frequency", Dimension.FREQUENCY, "The switching frequency stated for all legs."),
        number("dead-time", Dimension.TIME, "The dead time stated for all legs."),
        number("efficiency", Dimension.NUMBER, "The efficiency of the power balance."),
        yes_no("pin-order-suspect", "All its transistors, or all its diodes, seem to be turned."),
        count("suspect-devices", "How many devices that concerns."),
        texts("suspect-models", "Models of those devices."),
    ),
    (
        link("parts", "part", "All parts."),
        link("nets", "net", "All nets."),
        link("positions", "position", "All positions."),
        link("legs", "leg", "All legs."),
        link("bridges", "bridge", "All bridges."),
        link("groups", "group", "All groups."),
        link("ports", "port", "All ports."),
        link("free-paths", "free-path", "All free paths."),
    ),
)

_NO_CONNECT = ("unconnected-", "nc", "n/c", "no_connect", "noconnect", "nc_", "nc-")
_OUTSIDE = frozenset(
    {Kind.CONNECTOR, Kind.CONTROLLER, Kind.SENSOR, Kind.DRIVER, Kind.ISOLATOR, Kind.OTHER}
    | {Kind.UNKNOWN}
)


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    """Every net of the circuit, in natural order."""
    pins: dict[str, list[str]] = {}
    for part in inputs.stage.parts.parts:
        for pin in part.pins:
            pins.setdefault(pin.net, []).append(part.name)
    ports = _port_nets(inputs)
    for net in ports:
        pins.setdefault(net, [])
    islands = find_islands(inputs)
    return tuple(
        _net(inputs, net, pins[net], ports, islands) for net in sorted(pins, key=natural_key)
    )


def _port_nets(inputs: Inputs) -> dict[str, int]:
    """Ports by net as written; a merged net is counted on all that merge into it."""
    stage = inputs.stage
    counts: dict[str, int] = {}
    at_ports = {net: len(names) for net, names in inputs.ports_at_net.items()}
    for net in (*stage.merged, *at_ports):
        if stage.merged.get(net, net) in at_ports:
            counts[net] = at_ports[stage.merged.get(net, net)]
    return counts


def _net(
    inputs: Inputs,
    net: str,
    at: Iterable[str],
    ports: Mapping[str, int],
    islands: Mapping[str, Island],
) -> Subject:
    parts = tuple(dict.fromkeys(at))
    kinds = {inputs.part_by_name[name].kind for name in parts}
    island = islands[net]
    power = [p for p in parts if p in inputs.positions_of_part or p in inputs.branch_parts]
    values: dict[str, Value] = {
        "pins": float(len(list(at)) + ports.get(net, 0)),
        "ground": net in inputs.grounds,
        "no-connect": _no_connect(net),
        "power": bool(power),
        "gate": inputs.merged(net) in inputs.devices_at_gate,
        "at-connector": bool(kinds & _OUTSIDE),
        "merged-into": inputs.merged(net),
        "island-head": island.head == net,
        "island-grounded": island.grounded,
        "island-nets": float(island.size),
    }
    span, related = inputs.span_of_parts(parts), inputs.related_spans(parts)
    return Subject("net", net, values, {"parts": parts}, parts, (net,), span, related)


def _no_connect(net: str) -> bool:
    name = net.casefold().rsplit("/", 1)[-1]
    return name.startswith(("unconnected-", "nc_", "nc-", "no_connect")) or name in _NO_CONNECT


def collect_stage(inputs: Inputs) -> tuple[Subject, ...]:
    """The one subject that stands for all of it; its links are filled in from all others."""
    stage = inputs.stage
    switching = stage.switching
    grounds = inputs.grounds
    values: dict[str, Value] = {
        "sheet": stage.sheet,
        "has-ground": bool(grounds),
        "grounds": tuple(sorted(grounds, key=natural_key)),
        "frequency": switching.frequency
        or Unknown("switching frequency", "switching: {frequency: ...}"),
        "dead-time": switching.dead_time
        if switching.dead_time is not None
        else Unknown("dead time", "switching: {dead-time: ...}"),
        "efficiency": stage.efficiency,
    }
    return (Subject("stage", "stage", values, {}, (), (), Span(stage.netlist, 1)),)
