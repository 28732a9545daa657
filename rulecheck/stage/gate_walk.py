"""Walk from a gate through its small parts to everything that could command it.

It goes through resistors, beads, diodes and series capacitors, and ends at outputs, sources,
windings of gate transformers and drive transistors.
"""

from collections import deque
from collections.abc import Iterable, Mapping

from rulecheck.parts import Core, Kind, Part
from rulecheck.stage.drive_pins import BY_KIND, drive_output, gives_out
from rulecheck.stage.gate_drive import DrivenBy, DriveOutput
from rulecheck.stage.gate_network import Network, OneWay, Resistive
from rulecheck.stage.gate_region import GateRegion, is_bead
from rulecheck.stage.layout import (
    CIRCUITS,
    SOURCES,
    Layout,
    Touch,
    is_semiconductor,
    main_nets,
)
from rulecheck.values import Unknown
from rulecheck.values.record import Mutable, Record, field

_FARTHEST = 100
"""Nets of one gate drive; a walk that meets more has left it."""


_DIODE_PINS = ("anode", "cathode")
_PASSED = (Kind.RESISTOR, Kind.CAPACITOR, Kind.INDUCTOR, Kind.DIODE)


class Reached(Record):
    """What a walk from some nets came to."""

    network: Network
    coupling: Network
    """The same with its capacitors as wires, for a gate that is driven through one."""
    outputs: tuple[DriveOutput, ...]
    transistors: tuple[tuple[Part, str], ...]
    """Drive transistors with the net at which their main pin was met."""
    transformer: str
    winding_nets: tuple[str, ...]
    holding: tuple[str, ...]
    nets: frozenset[str]


class Walk(Mutable):
    """A breadth-first walk over one gate's network; its state is what was met so far."""

    layout: Layout
    region: GateRegion
    core_of: Mapping[str, Core]
    own: frozenset[str]
    resistors: list[Resistive] = field(default_factory=list)
    capacitors: list[Resistive] = field(default_factory=list)
    diodes: list[OneWay] = field(default_factory=list)
    outputs: list[DriveOutput] = field(default_factory=list)
    transistors: list[tuple[Part, str]] = field(default_factory=list)
    holding: list[str] = field(default_factory=list)
    transformer: str = ""
    winding_nets: list[str] = field(default_factory=list)
    seen: set[str] = field(default_factory=set)
    met: set[str] = field(default_factory=set)

    def from_nets(self, starts: Iterable[str]) -> Reached:
        waiting = deque(starts)
        self.seen |= set(waiting)
        while waiting and len(self.seen) < _FARTHEST:
            net = waiting.popleft()
            onward = [self._meet(touch, net) for touch in self.layout.touches.get(net, ())]
            if net in self.region.nets and not self._commands(net):
                waiting.extend(other for nets in onward for other in nets)
        return Reached(
            Network(tuple(self.resistors), tuple(self.diodes)),
            Network((*self.resistors, *self.capacitors), tuple(self.diodes)),
            tuple(self.outputs),
            tuple(self.transistors),
            self.transformer,
            tuple(dict.fromkeys(self.winding_nets)),
            tuple(dict.fromkeys(self.holding)),
            frozenset(self.seen),
        )

    def _commands(self, net: str) -> bool:
        """An output is there, which decides its net's voltage whatever lies beyond."""
        return any(o.net == net and o.by is not DrivenBy.CONNECTOR for o in self.outputs)

    def _meet(self, touch: Touch, net: str) -> list[str]:
        """Note what the touch is; the nets to go on to."""
        part = touch.part
        if part.kind in BY_KIND:
            if gives_out(part, touch.role):
                self.outputs.append(drive_output(self.layout, part, touch.role, net))
            return []
        if part.kind in SOURCES:
            self.outputs.append(_source_output(self.layout, part, net))
            return []
        if part.name in self.core_of:
            return self._meet_winding(part, net)
        if is_semiconductor(part) and part.gated:
            if part.name in self.region.parts and net in main_nets(self.layout, part):
                self.transistors.append((part, net))
            return []
        return self._pass(part, net)

    def _meet_winding(self, part: Part, net: str) -> list[str]:
        name = self.core_of[part.name].name
        if name in self.region.cores:
            self.transformer = self.transformer or name
            self.winding_nets += self.layout.others(part, net)
        return []

    def _pass(self, part: Part, net: str) -> list[str]:
        passed = part.kind in _PASSED
        if (
            not passed
            or part.name in self.met
            or (part.kind is Kind.INDUCTOR and not is_bead(part))
        ):
            return []
        self.met.add(part.name)
        others = self.layout.others(part, net)
        if any(other in self.own for other in others):
            if part.kind is Kind.RESISTOR:
                self.holding.append(part.name)
            return []
        if not others or any(self._leaves(other) for other in others):
            return []
        self._note(part)
        fresh = [other for other in others if other not in self.seen]
        self.seen |= set(fresh)
        return fresh

    def _note(self, part: Part) -> None:
        if part.kind is Kind.DIODE:
            anode, cathode = (self.layout.net(part.net(role) or "") for role in _DIODE_PINS)
            self.diodes.append(OneWay(part.name, anode, cathode))
        elif part.kind is Kind.CAPACITOR:
            self.capacitors.append(Resistive(part.name, self.layout.ends(part), 0.0))
        else:
            ohms = part.value if part.kind is Kind.RESISTOR else 0.0
            self.resistors.append(Resistive(part.name, self.layout.ends(part), ohms))

    def _leaves(self, net: str) -> bool:
        """A supply, a port or the ground: what hangs there is no gate's own."""
        layout = self.layout
        if net in layout.port_nets or net in layout.grounds:
            return True
        return any(
            t.part.kind in CIRCUITS
            and t.role.startswith(("supply", "ground", "bootstrap", "return"))
            for t in layout.touches[net]
        )


def _source_output(layout: Layout, part: Part, net: str) -> DriveOutput:
    by = DrivenBy.SOURCE if part.waveform is not None else DrivenBy.CONSTANT
    if isinstance(part.value, Unknown) or part.kind is Kind.CURRENT_SOURCE:
        by = DrivenBy.SOURCE
    other = next(iter(layout.others(part, net)), net)
    return DriveOutput(by, part.name, "", net, other, other, input_nets=(net,), own_return=True)
