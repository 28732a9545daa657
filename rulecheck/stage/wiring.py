"""Merge nets that are one node for topology.

    BUS - R_shunt 5 mohm - BUS_R - Q1      becomes      BUS - Q1

Zero-volt sources, fuses, beads, resistors of 0.1 ohm and less, and inductors of 50 nH and less
are wires here, unless the sheet gives the part another role. They stay parts for the rules.
"""

import difflib
from collections import Counter
from collections.abc import Iterable, Mapping

from rulecheck.parts import Kind, Part, PartList, through_nets
from rulecheck.stage.sheet import Sheet
from rulecheck.stage.stage import Role
from rulecheck.values import Unknown, natural_key, write_quantity
from rulecheck.values.record import Record

WIRE_RESISTANCE = 0.1
"""Ohm; common practice: shunts, jumpers and beads are below it, loads above."""
WIRE_INDUCTANCE = 50e-9
"""Henry; common practice: parasitics of leads and planes."""
_THROUGH_WORDS = {
    Kind.RELAY: "relay, its contact closed",
    Kind.NTC: "inrush limiter, warm",
    Kind.SENSOR: "current sensor",
}


class Wiring(Record):
    """Net -> the net that stands for it, the parts that act as wires, and why."""

    merged: Mapping[str, str]
    wires: tuple[str, ...]
    assumed: tuple[str, ...]


def merge_wires(parts: PartList, sheet: Sheet) -> Wiring:
    wires: list[Part] = []
    assumed: list[str] = []
    for part in parts.parts:
        reason = _why_wire(part, sheet)
        if reason:
            wires.append(part)
            assumed.append(f"{part.name} read as a wire ({reason})")
    preferred = _preferred_nets(sheet, parts)
    of_ports = _only_in_ports(parts, sheet)
    assumed += [f"net {net} exists only in the stage sheet, where ports meet" for net in of_ports]
    merged = _merge(parts, wires, preferred, of_ports)
    return Wiring(merged, tuple(p.name for p in wires), tuple(assumed))


def _why_wire(part: Part, sheet: Sheet) -> str:
    override = sheet.overrides.get(part.name.lower())
    if override is not None and override.role is not None:
        wired = override.role is Role.WIRE and (len(part.nets) == 2 or through_nets(part))
        return "role of the stage sheet" if wired else ""
    if through_nets(part):
        return _THROUGH_WORDS.get(part.kind, part.kind.value)
    passes = part.kind is not Kind.RESISTOR and override is not None and override.current
    if passes or (override is not None and override.voltage):
        return ""
    if len(part.nets) != 2:
        return ""
    if isinstance(part.value, Unknown) or part.waveform is not None:
        return ""
    limits = {
        Kind.RESISTOR: (WIRE_RESISTANCE, "ohm"),
        Kind.INDUCTOR: (WIRE_INDUCTANCE, "H"),
        Kind.VOLTAGE_SOURCE: (0.0, "V"),
    }
    limit, unit = limits.get(part.kind, (-1.0, ""))
    if abs(part.value) > limit:
        return ""
    if part.kind is Kind.VOLTAGE_SOURCE:
        return "zero-volt source"
    return write_quantity(part.value, unit)


def _ends(wire: Part) -> tuple[tuple[str, str], ...]:
    """The pairs of nets that become one."""
    return through_nets(wire) or ((wire.nets[0], wire.nets[-1]),)


def _preferred_nets(sheet: Sheet, parts: PartList) -> dict[str, int]:
    """Rank of the nets whose names stay when nets merge: ports first, then ground."""
    names = [net for port in sheet.ports for net in (*port.nets, port.neutral) if net]
    names += [leg.midpoint for leg in sheet.legs]
    names.append(parts.ground)
    return {name: rank for rank, name in enumerate(dict.fromkeys(n.lower() for n in names))}


def _only_in_ports(parts: PartList, sheet: Sheet) -> tuple[str, ...]:
    """Nets that no part touches but where two or more ports meet, such as a split source's
    midpoint; one that is nearly the name of a net of the circuit is a slip, not a net."""
    own = {net.lower() for part in parts.parts for net in part.nets}
    named = [net for port in sheet.ports for net in (*port.nets, port.neutral) if net]
    count = Counter(net.lower() for net in named)
    return tuple(
        net
        for net in dict.fromkeys(named)
        if net.lower() not in own
        and count[net.lower()] > 1
        and not difflib.get_close_matches(net.lower(), own, n=1, cutoff=0.6)
    )


def _merge(
    parts: PartList,
    wires: Iterable[Part],
    preferred: Mapping[str, int],
    of_ports: Iterable[str],
) -> dict[str, str]:
    usage: dict[str, int] = dict.fromkeys(of_ports, 0)
    for part in parts.parts:
        for net in part.nets:
            usage[net] = usage.get(net, 0) + 1
    parent = {net: net for net in usage}

    def root(net: str) -> str:
        while parent[net] != net:
            parent[net] = parent[parent[net]]
            net = parent[net]
        return net

    def rank(net: str) -> tuple[object, ...]:
        return (preferred.get(net.lower(), len(preferred)), -usage[net], natural_key(net))

    for pair in (pair for wire in wires for pair in _ends(wire)):
        kept, *others = sorted({root(net) for net in pair}, key=rank)
        for other in others:
            parent[other] = kept
    return {net: root(net) for net in sorted(usage)}
