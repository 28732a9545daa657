"""Whose current passes a part that stands in a line: a port's, a position's or an inductor's.

    bank port - BAT_IN - XF1 - BAT - C1, L1        XF1 carries what the bank supplies
    M2 - S2 - R1 (1 mohm) - PGND                   R1 carries what M2 carries

Wires are followed on one side of the part; where one port, position or inductor alone stands
there, the part carries its current. Capacitors carry no mean current and are passed over.
"""

import math
from collections.abc import Iterator, Mapping

from rulecheck.demand import Derived
from rulecheck.facts.inputs import Inputs
from rulecheck.parts import Part, through_nets
from rulecheck.stage import BranchKind, Port, PortKind, Position, Role
from rulecheck.values import Interval, Unknown
from rulecheck.values.record import Record

Feeder = tuple[str, str]
"""`port`, `position` or `inductor`, and its name."""


class Heating(Record):
    """A current as a line part sees it: its peak, and its rms between two bounds; amperes."""

    peak: float
    rms_low: float
    rms_high: float


class Wires(Record):
    """Who is joined to a net as written by a wire, and which net a feeder stands at."""

    at: Mapping[str, tuple[tuple[str, str], ...]]
    """By net: (part, net behind it)."""
    feeders: Mapping[str, tuple[Feeder, ...]]
    """By net."""


def find_wires(inputs: Inputs) -> Wires:
    at: dict[str, list[tuple[str, str]]] = {}
    for part in inputs.stage.parts.parts:
        for first, second in wire_pairs(inputs, part):
            at.setdefault(first, []).append((part.name, second))
            at.setdefault(second, []).append((part.name, first))
    feeders: dict[str, dict[Feeder, None]] = {}
    for net, feeder in _feeders(inputs):
        feeders.setdefault(net, {})[feeder] = None
    return Wires(
        {net: tuple(found) for net, found in at.items()},
        {net: tuple(found) for net, found in feeders.items()},
    )


def wire_pairs(inputs: Inputs, part: Part) -> tuple[tuple[str, str], ...]:
    """The nets that a part joins as a wire; none where it is none."""
    if inputs.stage.roles.get(part.name) is not Role.WIRE:
        return ()
    return through_nets(part) or ((part.nets[0], part.nets[-1]),)


def _feeders(inputs: Inputs) -> Iterator[tuple[str, Feeder]]:
    spelled = {net.lower(): net for net in inputs.stage.merged}
    for port in inputs.stage.ports:
        for net in port.named_nets or port.nets:
            yield spelled.get(net.lower(), net), ("port", port.name)
    for position in inputs.stage.positions:
        for name in position.parts:
            for edge in inputs.part_by_name[name].edges:
                yield edge.tail, ("position", position.name)
                yield edge.head, ("position", position.name)
    wound = {name for transformer in inputs.stage.transformers for name in transformer.parts}
    carrying = {
        branch.part
        for branch in inputs.stage.branches
        if branch.part and branch.kind is not BranchKind.VOLTAGE
    }
    for name in sorted(carrying | wound):
        for net in inputs.part_by_name[name].nets:
            yield net, ("inductor", name)


def sole_feeder(wires: Wires, part: str, start: str) -> Feeder | None:
    """The one feeder on that side of the part; None where there is none or more than one."""
    found: set[Feeder] = set()
    seen = {start}
    waiting = [start]
    while waiting and len(found) < 2:
        net = waiting.pop()
        found |= set(wires.feeders.get(net, ()))
        for name, behind in wires.at.get(net, ()):
            if name != part and behind not in seen:
                seen.add(behind)
                waiting.append(behind)
    return next(iter(found)) if len(found) == 1 else None


def feeders_of(wires: Wires, inputs: Inputs, part: Part) -> tuple[Feeder, ...]:
    """The sole feeders on each side of each wire of the part, each once."""
    sides = (net for pair in wire_pairs(inputs, part) for net in pair)
    found = (sole_feeder(wires, part.name, net) for net in sides)
    return tuple(dict.fromkeys(feeder for feeder in found if feeder is not None))


def heating_of(inputs: Inputs, feeder: Feeder) -> Heating | Unknown:
    """Peak and rms of the feeder's current."""
    kind, name = feeder
    if kind == "port":
        port = next(port for port in inputs.stage.ports if port.name == name)
        return _of_port(inputs, port)
    if kind == "position":
        return _of_position(inputs, inputs.position_by_name[name])
    return _of_inductor(inputs, name)


def port_current(inputs: Inputs, port: Port) -> Interval | Unknown:
    """Mean or amplitude of a port's current, as stated or as derived."""
    if port.current is not None:
        return port.current
    derived = inputs.variable_by_name.get(f"i({port.name})")
    settle = f"ports: {{{port.name}: {{draws: ...}}}}"
    return derived.range if derived else Unknown(f"current of port {port.name}", settle)


def _of_port(inputs: Inputs, port: Port) -> Heating | Unknown:
    span = port_current(inputs, port)
    if isinstance(span, Unknown):
        return span
    if not span.bounded:
        return Unknown(f"current of port {port.name}", f"ports: {{{port.name}: {{draws: ...}}}}")
    peak = span.magnitude
    rms = peak if port.kind is PortKind.DC else peak / math.sqrt(2.0)
    return Heating(peak, rms, rms)


def _of_position(inputs: Inputs, position: Position) -> Heating | Unknown:
    """A position of a leg that makes a sine carries half the amplitude as rms, whatever the
    modulation: transistor and diode together, integrated over a cycle (Mohan, Undeland and
    Robbins, Power Electronics, ch. 8, from memory; confirmed by integration)."""
    span = inputs.demands.positions[position.name].on_current
    if isinstance(span, Unknown):
        return span
    if not span.bounded:
        return Unknown(f"current of {position.name}", "the currents of the ports")
    peak = span.magnitude
    if _makes_a_sine(inputs, position):
        return Heating(peak, peak / 2.0, peak / 2.0)
    waves = inputs.demands.waveforms.positions.get(position.name)
    return _with_rms(peak, waves.rms if waves else None)


def _with_rms(peak: float, derived: Derived | None) -> Heating:
    """The worst rms over all operating points, as far as it is known."""
    if derived is None or isinstance(derived.range, Unknown) or not derived.range.bounded:
        return Heating(peak, 0.0, peak)
    high = derived.range.high
    return Heating(peak, derived.range.low if derived.missing else high, high)


def _makes_a_sine(inputs: Inputs, position: Position) -> bool:
    alternating = {
        net
        for port in inputs.stage.ports
        if port.kind is not PortKind.DC and port.voltage is None
        for net in port.nets
    }
    legs = inputs.legs_of_position.get(position.name, ())
    return any(leg.midpoint in alternating for leg in inputs.demands.legs if leg.name in legs)


def _of_inductor(inputs: Inputs, name: str) -> Heating | Unknown:
    """rms squared is mean squared and a third of the half ripple squared (a triangle)."""
    variable = inputs.variable_by_name.get(f"i({name})")
    settle = f"set: {{{name}: {{current: [LOW, HIGH]}}}}"
    if variable is None:
        return Unknown(f"current of {name}", settle)
    if isinstance(variable.range, Unknown):
        return variable.range
    if not variable.range.bounded:
        return Unknown(f"current of {name}", settle)
    peak = variable.range.magnitude
    if not math.isfinite(variable.ripple):
        return Heating(peak, 0.0, peak)
    mean = max(peak - variable.ripple, 0.0)
    rms = math.sqrt(mean**2 + variable.ripple**2 / 3.0)
    return Heating(peak, rms if variable.ripple else 0.0, rms if variable.ripple else peak)
