"""Facts of networks that catch a winding's leakage: a diode into a capacitor with a resistor.

D1 SWN CLN, C3 CLN BUS, R3 CLN BUS, Q1 from SWN to PGND: when Q1 turns off, SWN rises and D1 has to
conduct from SWN into CLN; the capacitor settles where the resistor takes what the leakage brings.
"""

import math
from collections.abc import Iterator

from rulecheck.facts.facts import Bounds, Subject, Value
from rulecheck.facts.inputs import Inputs, at_least, stated_number
from rulecheck.facts.switching_times import period_of
from rulecheck.facts.terms import SubjectTerm, link, number, text, yes_no
from rulecheck.parts import Kind, Part
from rulecheck.stage import Position, Role
from rulecheck.values import Dimension, Interval, Unknown
from rulecheck.values.record import Record

V = Dimension.VOLTAGE

WINDING_CLAMP = SubjectTerm(
    "winding-clamp",
    "A diode into a capacitor with a resistor, which catches what a switch interrupts.",
    (
        text("at", "The position whose current it catches."),
        yes_no("diode-turned", "Its diode blocks just what it is to catch."),
        number("reset-voltage", V, "The voltage that its capacitor settles at."),
        number("device-peak", V, "What the position then sees at turn-off."),
        number("device-rating", V, "What the position withstands."),
        number("power", Dimension.POWER, "What its resistor turns into heat."),
        number("rated-power", Dimension.POWER, "The rated power of its resistor."),
    ),
    (link("parts", "part", "Diode, capacitor and resistor."),),
)


class _Network(Record):
    diode: Part
    capacitor: Part
    resistor: Part
    joint: str
    switched: str
    far: str
    """The capacitor's other end; all merged nets."""
    position: Position


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    return tuple(_subject(inputs, network) for network in _networks(inputs))


def _networks(inputs: Inputs) -> Iterator[_Network]:
    for part in inputs.stage.parts.parts:
        if part.kind is not Kind.DIODE or inputs.stage.roles.get(part.name) is not Role.CLAMP:
            continue
        nets = [inputs.merged(net) for net in part.nets]
        for joint, switched in (nets, nets[::-1]):
            network = _network_at(inputs, part, joint, switched)
            if network is not None:
                yield network
                break


def _network_at(inputs: Inputs, diode: Part, joint: str, switched: str) -> _Network | None:
    """At the joint a capacitor and a resistor to one far net; at the other end a gated switch."""
    near = [inputs.part_by_name[name] for name in inputs.parts_at_net.get(joint, ())]
    capacitor = next((p for p in near if p.kind is Kind.CAPACITOR), None)
    resistor = next((p for p in near if p.kind is Kind.RESISTOR), None)
    position = next(
        (
            p
            for p in inputs.stage.positions
            if p.gated and switched in (p.start, p.end) and joint not in (p.start, p.end)
        ),
        None,
    )
    if capacitor is None or resistor is None or position is None:
        return None
    far = _other(inputs, capacitor, joint)
    if far == switched or _other(inputs, resistor, joint) != far:
        return None
    return _Network(diode, capacitor, resistor, joint, switched, far, position)


def _other(inputs: Inputs, part: Part, net: str) -> str:
    return next((n for n in map(inputs.merged, part.nets) if n != net), net)


def _subject(inputs: Inputs, network: _Network) -> Subject:
    position = network.position
    anode = inputs.merged(network.diode.net("anode") or "")
    # at turn-off the drain side of a position rises, its source side falls
    rises = network.switched == position.start
    reset = _reset_voltage(inputs, network)
    below = _below(inputs, network)
    capability = inputs.capabilities.positions[position.name].forward
    rated = at_least(capability.blocks_at_least, capability.blocks, capability.missing)
    values: dict[str, Value] = {
        "at": position.name,
        "diode-turned": (anode == network.switched) != rises,
        "reset-voltage": reset,
        "device-peak": _plus(reset, below),
        "device-rating": rated,
        "power": _power(network.resistor, reset),
        "rated-power": stated_number(network.resistor, "ratings.power"),
    }
    parts = (network.diode.name, network.capacitor.name, network.resistor.name)
    nets = (network.switched, network.joint, network.far)
    span, related = network.diode.span, inputs.related_spans(parts)
    links = {"parts": parts}
    return Subject("winding-clamp", network.diode.name, values, links, parts, nets, span, related)


def _below(inputs: Inputs, network: _Network) -> Value:
    """The voltage of the capacitor's far end over the position's other end, at its largest."""
    position = network.position
    rises = network.switched == position.start
    other = position.end if rises else position.start
    if network.far == other:
        return 0.0
    pair = (network.far, other) if rises else (other, network.far)
    span = inputs.voltage_between.get(pair)
    if span is None or isinstance(span, Unknown) or not span.bounded:
        return Unknown(f"voltage between {network.far} and {other}", "the voltages of the ports")
    return span.high


def _reset_voltage(inputs: Inputs, network: _Network) -> Value:
    """As the sheet says of the capacitor, else from the leakage: the resistor takes
    (L I^2 f / 2) v / (v - r) with r the voltage that the winding itself puts there.

    Texts on flyback converters (from memory); 2 uH, 2 A, 100 kHz, 200 V, 117 V give 0.9639 W.
    """
    stated = inputs.stage.stated_voltage.get(network.capacitor.name)
    if stated is not None:
        return stated.magnitude
    reflected = _reflected(inputs, network)
    leakage = _leakage(inputs, network)
    current = inputs.demands.positions[network.position.name].on_current
    period = period_of(inputs, network.position)
    ohm = network.resistor.value
    known = (leakage, period, ohm, reflected)
    missing = next((item for item in known if isinstance(item, Unknown)), None)
    if isinstance(current, Unknown) or not current.bounded:
        missing = missing or Unknown(f"current of {network.position.name}", "the ports' currents")
    if missing is not None or isinstance(current, Unknown):
        low = reflected if isinstance(reflected, float) else 0.0
        return Bounds(Interval(low, math.inf), (missing or Unknown("leakage", "leakage"),))
    henry, seconds, ohms, volts = (item for item in known if isinstance(item, float))
    energy = henry * current.magnitude**2 / (2.0 * seconds)
    return volts / 2.0 + math.sqrt(volts**2 / 4.0 + ohms * energy)


def _reflected(inputs: Inputs, network: _Network) -> Value:
    """What the position asks for without leakage, less what lies below the capacitor."""
    span = inputs.demands.positions[network.position.name].off_voltage
    below = _below(inputs, network)
    if isinstance(span, Unknown) or not span.bounded:
        return Unknown(f"off voltage of {network.position.name}", "the voltages of the ports")
    if not isinstance(below, float):
        return below
    return max(span.high - below, 0.0)


def _leakage(inputs: Inputs, network: _Network) -> Value:
    """Of the winding at the switched net; a `K` card's coefficient is no measured leakage."""
    at = inputs.parts_at_net.get(network.switched, ())
    wound = {name for t in inputs.stage.transformers for name in t.parts}
    windings = [name for name in at if name in wound]
    for name in windings:
        if name in inputs.stage.leakage:
            return inputs.stage.leakage[name]
    name = windings[0] if windings else "the winding"
    return Unknown(f"leakage of {name}", f"set: {{{name}: {{leakage: ...}}}}")


def _plus(first: Value, second: Value) -> Value:
    if isinstance(second, Unknown):
        return second
    if isinstance(first, float) and isinstance(second, float):
        return first + second
    if isinstance(first, Bounds) and isinstance(second, float):
        return Bounds(Interval(first.range.low + second, math.inf), first.missing)
    return first


def _power(resistor: Part, reset: Value) -> Value:
    ohm = resistor.value
    if isinstance(ohm, Unknown):
        return ohm
    if isinstance(reset, float):
        return reset**2 / ohm
    if isinstance(reset, Bounds):
        return Bounds(Interval(reset.range.low**2 / ohm, math.inf), reset.missing)
    return reset
