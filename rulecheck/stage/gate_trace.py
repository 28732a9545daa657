"""Trace every gate back to what commands it.

XU1 output-high - HO - 22 // (6.8 + diode) - GH - gate of Q1      driver XU1, 22 ohm on, 5.2 off

A drive transistor is passed by its base or gate, a gate transformer by its other windings; of
several outputs that reach a gate the most telling one counts.
"""

from collections.abc import Iterable, Mapping

from rulecheck.parts import Conduction, Part
from rulecheck.stage.drive_pins import pulls_down, pulls_up
from rulecheck.stage.drive_return import judge_return
from rulecheck.stage.gate_clamps import find_clamps
from rulecheck.stage.gate_drive import DrivenBy, DriveOutput, GateDrive, GatePath
from rulecheck.stage.gate_network import carrying, resistance
from rulecheck.stage.gate_region import GateRegion
from rulecheck.stage.gate_walk import Reached, Walk
from rulecheck.stage.layout import Layout, control_nets, is_semiconductor, main_nets
from rulecheck.values import Unknown, natural_key
from rulecheck.values.record import Record, replace

_RANK = {
    by: rank
    for rank, by in enumerate(
        (
            DrivenBy.DRIVER,
            DrivenBy.SOURCE,
            DrivenBy.TRANSFORMER,
            DrivenBy.ISOLATOR,
            DrivenBy.CONTROLLER,
            DrivenBy.CIRCUIT,
            DrivenBy.TRANSISTOR,
            DrivenBy.CONNECTOR,
            DrivenBy.CONSTANT,
        )
    )
}
NOTHING = DriveOutput(DrivenBy.NOTHING, "", "", "")
_OPEN = float("inf")


def trace_gates(layout: Layout, region: GateRegion) -> Mapping[str, GateDrive]:
    """By merged gate net, in natural order; gates of drive transistors are left out."""
    gates: dict[str, list[Part]] = {}
    for part in layout.parts.parts:
        if is_semiconductor(part) and part.gated and part.name not in region.parts:
            for net in control_nets(layout, part)[:1]:
                gates.setdefault(net, []).append(part)
    tracer = _Tracer(layout, region)
    return {gate: tracer.drive(gate, gates[gate]) for gate in sorted(gates, key=natural_key)}


def taken_for_drivers(drives: Mapping[str, GateDrive]) -> tuple[str, ...]:
    """One sentence for each part that is no described driver and yet drives gates."""
    gates: dict[str, list[str]] = {}
    for drive in drives.values():
        if drive.output.by is DrivenBy.CIRCUIT:
            gates.setdefault(drive.output.part, []).append(drive.gate)
    return tuple(
        f"{part} taken for the driver of {', '.join(nets)}: part data do not say what it is"
        for part, nets in gates.items()
    )


class _Command(Record):
    """An output, and the drive transistors and the gate transformer between it and the gate."""

    output: DriveOutput
    buffers: tuple[str, ...] = ()
    transformer: str = ""
    inverted: bool = False


class _Tracer:
    """The circuit with the look-ups that every gate's walk needs."""

    def __init__(self, layout: Layout, region: GateRegion) -> None:
        self.layout = layout
        self.region = region
        self.core_of = {name: core for core in layout.parts.cores for name in core.windings}

    def drive(self, gate: str, devices: list[Part]) -> GateDrive:
        built_in = self._built_in(gate, devices)
        own = _own_nets(self.layout, devices) - {gate}
        names = tuple(sorted((part.name for part in devices), key=natural_key))
        returns = _returns(self.layout, devices)
        reached = self._walk([gate], own)
        command = self._commanded_by(reached, own, frozenset({gate}))
        up, down = self._ends(reached, command.output, command.transformer)
        drive = GateDrive(
            gate,
            names,
            returns,
            built_in or command.output,
            _path(reached, up, [gate], ends=up),
            _path(reached, [gate], down, ends=down),
            command.buffers,
            tuple(
                part.name
                for part, _ in reached.transistors
                if set(main_nets(self.layout, part)) & set(returns)
            ),
            command.transformer,
            reached.holding,
            find_clamps(self.layout, reached.nets, returns),
            inverted=command.inverted,
        )
        return judge_return(self.layout, drive)

    def _built_in(self, gate: str, devices: list[Part]) -> DriveOutput | None:
        """A module's own driver, where part data say that the module has one."""
        for device in devices:
            module = self.layout.parts.by_name.get(device.module)
            if module is not None and any(path.startswith("driver.") for path in module.data):
                returned = _returns(self.layout, devices)
                first = returned[0] if returned else ""
                return DriveOutput(
                    DrivenBy.MODULE,
                    module.name,
                    "",
                    gate,
                    first,
                    first,
                    input_nets=(gate,),
                    own_return=True,
                )
        return None

    def _walk(self, starts: Iterable[str], own: frozenset[str]) -> Reached:
        return Walk(self.layout, self.region, self.core_of, own).from_nets(starts)

    def _commanded_by(
        self, reached: Reached, own: frozenset[str], seen: frozenset[str]
    ) -> _Command:
        """The output behind buffers and gate transformers, and what lies between."""
        best = min(reached.outputs, key=lambda o: _RANK[o.by], default=NOTHING)
        if _rank(best) < _RANK[DrivenBy.CIRCUIT]:
            return _Command(best, transformer=reached.transformer)
        behind = self._behind_transistors(reached, own, seen)
        if behind.output is not NOTHING and _rank(behind.output) < _rank(best):
            return replace(behind, transformer=behind.transformer or reached.transformer)
        if reached.transformer:
            return _Command(self._behind_core(reached, seen), transformer=reached.transformer)
        return behind if best is NOTHING else _Command(best)

    def _behind_transistors(
        self, reached: Reached, own: frozenset[str], seen: frozenset[str]
    ) -> _Command:
        """The best of what commands the drive transistors' own bases and gates."""
        found = _Command(NOTHING)
        for part, net in reached.transistors:
            starts = [start for start in control_nets(self.layout, part) if start not in seen]
            around = own | set(main_nets(self.layout, part))
            further = self._walk(starts, around - set(starts))
            command = self._commanded_by(further, around, seen | set(starts))
            if _rank(command.output) < _rank(found.output):
                inverted = command.inverted != _turns_round(self.layout, part, net)
                found = replace(command, inverted=inverted)
        names = tuple(part.name for part, _ in reached.transistors)
        if found.output is NOTHING and names:
            part, net = reached.transistors[0]
            return _Command(DriveOutput(DrivenBy.TRANSISTOR, part.name, "", net), names)
        return replace(found, buffers=tuple(dict.fromkeys((*names, *found.buffers))))

    def _behind_core(self, reached: Reached, seen: frozenset[str]) -> DriveOutput:
        """What feeds the primary; the secondary's far end is what the gate is driven against."""
        fed = set(self._winding_ends(reached.transformer)) - reached.nets - seen
        fed -= set(reached.winding_nets)
        further = replace(self._walk(sorted(fed), frozenset()), transformer="")
        behind = self._commanded_by(further, frozenset(), seen | reached.nets | fed).output
        far = reached.winding_nets[0] if reached.winding_nets else ""
        return replace(
            behind,
            by=DrivenBy.TRANSFORMER,
            part=behind.part or reached.transformer,
            return_net=far,
            off_net=far,
            own_return=True,
            isolated=True,
            input_ground=behind.return_net,
        )

    def _ends(
        self, reached: Reached, output: DriveOutput, transformer: str
    ) -> tuple[list[str], list[str]]:
        """The nets that pull the gate up, and those that pull it down."""
        served = [o for o in reached.outputs if o.by is output.by]
        up = [o.net for o in served if pulls_up(o.role)]
        down = [o.net for o in served if pulls_down(o.role)]
        for part, net in reached.transistors:
            up += [net] if _conducts(part, self.layout, into=net) else []
            down += [net] if _conducts(part, self.layout, out_of=net) else []
        if transformer and reached.transformer:
            near = [net for net in self._winding_ends(transformer) if net in reached.nets]
            up, down = up + near, down + near
        return list(dict.fromkeys(up)), list(dict.fromkeys(down))

    def _winding_ends(self, core: str) -> list[str]:
        windings = next(c.windings for c in self.layout.parts.cores if c.name == core)
        parts = self.layout.parts.by_name
        return [net for name in windings for net in self.layout.ends(parts[name])]


def _turns_round(layout: Layout, part: Part, net: str) -> bool:
    """A transistor whose drain or collector gives out the command inverts it."""
    return any(
        layout.net(pin.net) == net and pin.role in ("drain", "collector") for pin in part.pins
    )


def _conducts(part: Part, layout: Layout, into: str = "", out_of: str = "") -> bool:
    """Whether its gate lets current into the net, or out of it."""
    return any(
        edge.conduction is Conduction.GATED
        and (layout.net(edge.head) == into or layout.net(edge.tail) == out_of)
        for edge in part.edges
    )


def _rank(output: DriveOutput) -> int:
    return _RANK.get(output.by, len(_RANK))


def _own_nets(layout: Layout, devices: Iterable[Part]) -> frozenset[str]:
    nets = {net for part in devices for net in main_nets(layout, part)}
    return frozenset(nets | set(_returns(layout, devices)))


_RETURNS = ("source", "emitter", "cathode", "kelvin", "control-minus")


def _returns(layout: Layout, devices: Iterable[Part]) -> tuple[str, ...]:
    return tuple(
        dict.fromkeys(
            layout.net(pin.net) for part in devices for pin in part.pins if pin.role in _RETURNS
        )
    )


def _path(
    reached: Reached, start: Iterable[str], end: Iterable[str], ends: Iterable[str]
) -> GatePath:
    start, end, ends = list(start), list(end), list(ends)
    for network in (reached.network, reached.coupling):
        ohms = resistance(network, start, end) if ends else _OPEN
        if ohms != _OPEN:
            return GatePath(ohms, carrying(network, start, end), ends[0])
    return GatePath(Unknown("resistance of a gate path", "an output at the gate"), (), "")
