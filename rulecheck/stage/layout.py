"""The circuit on merged nets: who touches which net, before anything is decided."""

from collections.abc import Mapping

from rulecheck.parts import Conduction, Kind, Part, PartList, through_nets
from rulecheck.stage.sheet import Sheet
from rulecheck.stage.wiring import Wiring
from rulecheck.values import natural_key
from rulecheck.values.record import Record

_CONTROLS = ("gate", "base", "control-plus")
DIODES = frozenset({Kind.DIODE, Kind.ZENER})
SOURCES = frozenset({Kind.VOLTAGE_SOURCE, Kind.CURRENT_SOURCE})
CIRCUITS = frozenset(
    {Kind.DRIVER, Kind.ISOLATOR, Kind.CONTROLLER, Kind.SENSOR, Kind.UNKNOWN, Kind.OTHER}
)
"""Kinds whose pins carry signals, or whose inside is not known."""


class Touch(Record):
    """A part's pin on a net."""

    part: Part
    role: str


class Layout(Record):
    parts: PartList
    sheet: Sheet
    merged: Mapping[str, str]
    wires: frozenset[str]
    touches: Mapping[str, tuple[Touch, ...]]
    """By merged net, wires and modules left out, natural order of parts."""
    port_nets: frozenset[str]
    """Nets of the sheet's ports, ground left out."""
    grounds: frozenset[str]
    coupled: frozenset[str]
    """Inductors that are windings on a core."""

    def net(self, name: str) -> str:
        """The net that stands for this one; a ground that no part touches stands for itself."""
        return self.merged.get(name, name)

    def ends(self, part: Part) -> tuple[str, str]:
        """The merged nets of a two-terminal part."""
        return self.merged[part.nets[0]], self.merged[part.nets[1]]

    def others(self, part: Part, net: str) -> tuple[str, ...]:
        """The other nets of the part, in pin order."""
        nets = (self.merged[n] for n in part.nets)
        return tuple(dict.fromkeys(n for n in nets if n != net))


def lay_out(parts: PartList, sheet: Sheet, wiring: Wiring) -> Layout:
    wires = frozenset(wiring.wires)
    merged = wiring.merged
    touches: dict[str, list[Touch]] = {net: [] for net in merged.values()}
    for part in sorted(parts.parts, key=lambda p: natural_key(p.name)):
        if part.kind is Kind.MODULE:
            continue
        # of a relay or current transformer the coil and the secondary still stand for themselves
        passed = {net for pair in through_nets(part) for net in pair} or set(part.nets)
        for pin in part.pins:
            if part.name in wires and pin.net in passed:
                continue
            touches[merged[pin.net]].append(Touch(part, pin.role))
    by_lower = {net.lower(): merged[net] for net in merged}
    grounds = {by_lower[g.lower()] for g in (parts.ground, *parts.grounds) if g.lower() in by_lower}
    ports = {
        by_lower[net.lower()]
        for port in sheet.ports
        for net in (*port.nets, port.neutral)
        if net.lower() in by_lower
    }
    return Layout(
        parts,
        sheet,
        merged,
        wires,
        {net: tuple(found) for net, found in sorted(touches.items())},
        frozenset(ports - grounds),
        frozenset(grounds),
        frozenset(name for core in parts.cores for name in core.windings),
    )


def main_nets(layout: Layout, part: Part) -> tuple[str, ...]:
    """The merged nets between which a power device conducts, each once."""
    nets = (layout.net(net) for edge in part.edges for net in (edge.tail, edge.head))
    return tuple(dict.fromkeys(nets))


def control_nets(layout: Layout, part: Part) -> tuple[str, ...]:
    """The merged nets on a device's gates or bases."""
    return tuple(layout.net(pin.net) for pin in part.pins if pin.role in _CONTROLS)


def is_semiconductor(part: Part) -> bool:
    return bool(part.edges) and part.kind is not Kind.MODULE


def is_free_only(part: Part) -> bool:
    """True for a diode: it conducts one way, always, and nothing else."""
    return is_semiconductor(part) and not any(
        edge.conduction is Conduction.GATED for edge in part.edges
    )
