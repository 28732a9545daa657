"""Facts of gate nets: which devices share one, and what else is there."""

from collections.abc import Mapping

from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.gate_source import find_gate_source
from rulecheck.facts.inputs import Inputs
from rulecheck.facts.terms import SubjectTerm, count, link, number, text, texts, yes_no
from rulecheck.parts import Part
from rulecheck.values import Dimension, natural_key

GATE_DRIVE = SubjectTerm(
    "gate-drive",
    "A net with the gate or base of a device on it; named after the net.",
    (
        count("gates", "How many devices have their gate on it."),
        count("positions-driven", "How many positions those devices are in."),
        texts("kinds", "Kinds of the devices with their gate on it."),
        yes_no("driven", "Something leads to it from elsewhere than its devices' own terminals."),
        text("driven-by", "`driver` or `source` behind its resistors; empty where neither is."),
        text("driver", "The name of that driver or source."),
        number("drive-voltage", Dimension.VOLTAGE, "The largest voltage that it puts on the gate."),
        yes_no("on-own-return", "A device's gate is on that device's own source or emitter."),
    ),
    (
        link("devices", "part", "The devices with their gate on it."),
        link("positions", "position", "The positions of those devices."),
        link("legs", "leg", "The legs of those positions."),
    ),
)

_RETURNS = ("source", "emitter", "cathode")


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    gates = sorted(inputs.devices_at_gate, key=natural_key)
    return tuple(_gate_drive(inputs, gate) for gate in gates)


def _gate_drive(inputs: Inputs, gate: str) -> Subject:
    devices = inputs.devices_at_gate[gate]
    parts = [inputs.part_by_name[name] for name in devices]
    positions = _distinct(inputs.positions_of_part, devices)
    source = find_gate_source(inputs, gate)
    values: dict[str, Value] = {
        "gates": float(len(devices)),
        "positions-driven": float(len(positions)),
        "kinds": tuple(sorted({part.kind.value for part in parts})),
        "driven": _driven(inputs, gate, devices),
        "driven-by": source.by,
        "driver": source.part,
        "drive-voltage": source.voltage,
        "on-own-return": any(_on_own_return(inputs, part) for part in parts),
    }
    links = {
        "devices": devices,
        "positions": positions,
        "legs": _distinct(inputs.legs_of_position, positions),
    }
    span, related = inputs.span_of_parts(devices), inputs.related_spans(devices)
    return Subject("gate-drive", gate, values, links, devices, (gate,), span, related)


def _distinct(table: Mapping[str, tuple[str, ...]], names: tuple[str, ...]) -> tuple[str, ...]:
    return tuple(dict.fromkeys(found for name in names for found in table.get(name, ())))


def _driven(inputs: Inputs, gate: str, devices: tuple[str, ...]) -> bool:
    """Whether anything leads to the gate from elsewhere than its devices' own terminals."""
    own = {gate} | {
        inputs.merged(pin.net) for name in devices for pin in inputs.part_by_name[name].pins
    }
    others = set(inputs.parts_at_net.get(gate, ())) - set(devices)
    led = any(
        inputs.merged(net) not in own for name in others for net in inputs.part_by_name[name].nets
    )
    return (
        led
        or gate in inputs.power_nets
        or any(_at_another_pin(inputs, gate, name) for name in devices)
    )


def _at_another_pin(inputs: Inputs, gate: str, name: str) -> bool:
    """A gate strapped to another pin of its own device is driven, if oddly."""
    pins = inputs.part_by_name[name].pins
    return any(inputs.merged(p.net) == gate and p.role not in ("gate", "base") for p in pins)


def _on_own_return(inputs: Inputs, part: Part) -> bool:
    gates = {inputs.merged(pin.net) for pin in part.pins if pin.role in ("gate", "base")}
    returns = {inputs.merged(pin.net) for pin in part.pins if pin.role in _RETURNS}
    return bool(gates & returns)
