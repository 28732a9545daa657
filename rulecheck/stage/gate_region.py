"""Find what belongs to gate drives, so that it is not taken for a part of the power path.

    driver - R - BUF(Qn, Qp emitters) - Rg - gate of Q1      Qn, Qp, R, Rg belong to Q1's drive

The search starts at every gate and goes back through resistors, diodes, capacitors, buffer
transistors and gate transformers until it meets the device's own terminals or a net with a
fixed place in the stage: a port, ground, a supply, an inductor.
"""

from collections import deque

from rulecheck.parts import Kind, Part
from rulecheck.stage.layout import (
    CIRCUITS,
    DIODES,
    Layout,
    Touch,
    control_nets,
    is_semiconductor,
    main_nets,
)
from rulecheck.values.record import Record

_SUPPLY_ROLES = ("supply", "ground", "bootstrap", "return")
_PASSED = frozenset({Kind.RESISTOR, Kind.CAPACITOR}) | DIODES
_BEAD = 1e-6
"""Henry; common practice: an inductor up to this at a gate is a bead or a gate choke."""


class GateRegion(Record):
    nets: frozenset[str]
    parts: frozenset[str]
    """Names of passives, diodes and buffer transistors that drive some gate."""
    cores: frozenset[str]
    """Names of gate transformers."""


def find_gate_region(layout: Layout) -> GateRegion:
    search = _Search(layout)
    for part in layout.parts.parts:
        if is_semiconductor(part):
            search.start(part)
    search.run()
    return GateRegion(
        frozenset(search.nets),
        frozenset(search.driving | _passives_within(layout, search.nets)),
        frozenset(search.cores),
    )


def is_bead(part: Part) -> bool:
    return part.kind is Kind.INDUCTOR and isinstance(part.value, float) and part.value <= _BEAD


def _passives_within(layout: Layout, nets: set[str]) -> set[str]:
    return {
        touch.part.name
        for net in nets
        for touch in layout.touches[net]
        if touch.part.kind in _PASSED or is_bead(touch.part)
    }


class _Search:
    """A breadth-first walk; its state is the frontier and what was found so far."""

    def __init__(self, layout: Layout) -> None:
        self.layout = layout
        self.nets: set[str] = set()
        self.driving: set[str] = set()
        self.cores: set[str] = set()
        self._queue: deque[tuple[str, frozenset[str]]] = deque()
        self._windings = {name: core for core in layout.parts.cores for name in core.windings}
        self._by_name = {part.name: part for part in layout.parts.parts}

    def start(self, part: Part) -> None:
        """Walk from this device's gates; its own terminals are where the walk turns back."""
        own = frozenset(main_nets(self.layout, part))
        for net in control_nets(self.layout, part):
            self._reach(net, own)

    def run(self) -> None:
        while self._queue:
            net, own = self._queue.popleft()
            for touch in self.layout.touches[net]:
                self._pass_through(touch, net, own)

    def _reach(self, net: str, own: frozenset[str]) -> None:
        if net in own or net in self.nets or self._anchored(net):
            return
        self.nets.add(net)
        self._queue.append((net, own | self._terminals_gated_from(net)))

    def _terminals_gated_from(self, net: str) -> frozenset[str]:
        """Where resistors and clamps from this net may end without driving anything."""
        gated = (t.part for t in self.layout.touches[net] if t.role in ("gate", "base"))
        return frozenset(end for part in gated for end in main_nets(self.layout, part))

    def _pass_through(self, touch: Touch, net: str, own: frozenset[str]) -> None:
        part = touch.part
        if part.kind in _PASSED or self._is_gate_bead(part):
            for other in self.layout.others(part, net):
                self._reach(other, own)
        elif part.name in self._windings:
            self._cross_core(part, net, own)
        elif is_semiconductor(part) and net in main_nets(self.layout, part):
            self.driving.add(part.name)
            self.start(part)

    def _is_gate_bead(self, part: Part) -> bool:
        return part.name not in self.layout.coupled and is_bead(part)

    def _cross_core(self, winding: Part, net: str, own: frozenset[str]) -> None:
        """A winding that feeds a gate and returns to the gated device is a gate transformer's."""
        if any(is_semiconductor(t.part) and t.part.gated for t in self.layout.touches[net]):
            return
        core = self._windings[winding.name]
        if core.name in self.cores:
            return
        self.cores.add(core.name)
        for name in core.windings:
            for end in self.layout.ends(self._by_name[name]):
                if not self._returns_some_gate(end):
                    self._reach(end, own)

    def _returns_some_gate(self, net: str) -> bool:
        return any(t.role in ("source", "emitter", "kelvin") for t in self.layout.touches[net])

    def _anchored(self, net: str) -> bool:
        layout = self.layout
        if net in layout.port_nets or net in layout.grounds:
            return True
        return any(self._anchors(touch) for touch in layout.touches[net])

    def _anchors(self, touch: Touch) -> bool:
        part = touch.part
        if part.kind in (Kind.VOLTAGE_SOURCE, Kind.CURRENT_SOURCE):
            return True
        if part.kind is Kind.INDUCTOR:
            return part.name not in self.layout.coupled and not is_bead(part)
        return part.kind in CIRCUITS and touch.role.startswith(_SUPPLY_ROLES)
