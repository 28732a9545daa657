"""Build the stage from the parts and the sheet: one named step after another."""

import difflib
from collections.abc import Iterable, Iterator, Mapping

from rulecheck.parts import Kind, Part, PartList
from rulecheck.stage.branches import build_transformers, part_branches, port_branches
from rulecheck.stage.domains import find_crossings
from rulecheck.stage.gate_command import GateCommand
from rulecheck.stage.gate_region import GateRegion, find_gate_region
from rulecheck.stage.gate_timing import find_gate_commands
from rulecheck.stage.gate_trace import taken_for_drivers, trace_gates
from rulecheck.stage.grouping import Grouping, group_devices
from rulecheck.stage.layout import CIRCUITS, Layout, is_semiconductor, lay_out, main_nets
from rulecheck.stage.orientation import mean_potentials
from rulecheck.stage.peripheral import Peripheral, find_peripheral
from rulecheck.stage.ports import Ports, resolve_ports, source_ports
from rulecheck.stage.positions import build_positions
from rulecheck.stage.power_path import (
    find_isolation_capacitors,
    find_live_nets,
    find_power_devices,
)
from rulecheck.stage.sheet import Override, Sheet
from rulecheck.stage.stage import Branch, BranchKind, Port, Role, Stage, Switching, Transformer
from rulecheck.stage.wiring import merge_wires
from rulecheck.values import Interval, Problem, error, natural_key
from rulecheck.values.record import Record, replace


class StageReading(Record):
    """The stage, and the mistakes that only show when sheet and circuit meet."""

    stage: Stage
    problems: tuple[Problem, ...]


class _Sorted(Record):
    """Who is who, before positions are formed."""

    layout: Layout
    region: GateRegion
    peripheral: Peripheral
    aside: frozenset[str]
    live: frozenset[str]
    switches: frozenset[str]
    isolating: frozenset[str]


def read_stage(parts: PartList, sheet: Sheet) -> StageReading:
    """Find ports, roles, branches and positions of the power stage."""
    wiring = merge_wires(parts, sheet)
    layout = lay_out(parts, sheet, wiring)
    known = _sort_parts(layout)
    ports = _ports(known)
    branches = _branches(known, ports.ports)
    transformers = build_transformers(layout, known.live, known.region.cores)
    grouping = _group(known, branches, transformers)
    potentials = mean_potentials(branches, transformers, layout.net(parts.ground))
    positions = build_positions(grouping.pieces, parts.by_name, layout.merged, potentials)
    domains = _domains(layout, sheet)
    drives = trace_gates(layout, known.region)
    commands = find_gate_commands(layout, drives)
    stage = Stage(
        parts.file,
        parts,
        ports.ports,
        branches,
        transformers,
        positions,
        layout.merged,
        _roles(known, branches, transformers),
        known.peripheral.refers_to,
        _given(parts, sheet),
        layout.net(parts.ground),
        _switching(sheet.switching, commands),
        _leg_switching(layout, sheet),
        commands,
        domains,
        sheet.barriers,
        find_crossings(parts, domains, sheet.barriers),
        {n: o.current for n, o in _overrides(parts, sheet) if o.current is not None},
        {n: o.voltage for n, o in _overrides(parts, sheet) if o.voltage is not None},
        {n: o.leakage for n, o in _overrides(parts, sheet) if o.leakage is not None},
        {n: o.rms_current for n, o in _overrides(parts, sheet) if o.rms_current is not None},
        {n: o.balance for n, o in _overrides(parts, sheet) if o.balance},
        sheet.efficiency,
        sheet.file,
        (
            *(*parts.assumed, *wiring.assumed),
            *(*_kept_assumptions(known), *taken_for_drivers(drives)),
        ),
        _not_covered(known, grouping),
        drives,
        _gate_supplies(layout, sheet),
    )
    return StageReading(stage, (*ports.problems, *_unknown_names(parts, layout, sheet)))


def _sort_parts(layout: Layout) -> _Sorted:
    region = find_gate_region(layout)
    peripheral = find_peripheral(layout, region.parts)
    overridden = {
        name: override.role
        for part in layout.parts.parts
        for name, override in ((part.name, layout.sheet.overrides.get(part.name.lower())),)
        if override is not None and override.role is not None
    }
    put_aside = {Role.SNUBBER, Role.CLAMP, Role.BOOTSTRAP, Role.SUPPLY, Role.SHARING}
    put_aside |= {Role.SENSE, Role.ISOLATION}
    put_aside |= {Role.GATE_DRIVE, Role.SIGNAL, Role.IGNORED}
    by_sheet = {name for name, role in overridden.items() if role in put_aside}
    drives = {n for core in layout.parts.cores if core.name in region.cores for n in core.windings}
    aside = frozenset(region.parts | set(peripheral.roles) | by_sheet | drives)
    aside -= {name for name, role in overridden.items() if role not in put_aside}
    live = find_live_nets(layout, aside)
    isolating = find_isolation_capacitors(layout, aside, live) - set(overridden)
    aside |= isolating
    bulk = frozenset(
        part.name
        for part in layout.parts.parts
        if part.kind is Kind.CAPACITOR and part.name not in aside
    )
    switches = find_power_devices(layout, aside, live, bulk)
    switches |= {name for name, role in overridden.items() if role is Role.SWITCH}
    return _Sorted(layout, region, peripheral, aside, live, switches, isolating)


def _ports(known: _Sorted) -> Ports:
    """The sheet's ports; sources of the netlist that it leaves out serve beside them."""
    stated = resolve_ports(known.layout.sheet, known.layout.merged)
    pairs = {frozenset(port.nets) for port in stated.ports}
    beside = tuple(
        port
        for port in source_ports(known.layout, known.aside)
        if frozenset(port.nets) not in pairs and set(port.nets) <= known.live
    )
    return Ports((*stated.ports, *beside), stated.problems)


def _branches(known: _Sorted, ports: Iterable[Port]) -> tuple[Branch, ...]:
    ports = tuple(ports)
    branches = [*port_branches(ports)]
    branches += part_branches(known.layout, known.live, known.aside, ports)
    return tuple(sorted(branches, key=lambda branch: natural_key(branch.name)))


def _group(
    known: _Sorted, branches: Iterable[Branch], transformers: Iterable[Transformer]
) -> Grouping:
    layout = known.layout
    joints = {net for branch in branches for net in (branch.start, branch.end)}
    joints |= {net for t in transformers for pair in t.windings for net in pair}
    joints |= layout.port_nets | layout.grounds
    joints |= {
        layout.net(net)
        for part in layout.parts.parts
        if part.kind is Kind.CONNECTOR
        for net in part.nets
    }
    ends: dict[str, tuple[str, str]] = {}
    for part in layout.parts.parts:
        nets = main_nets(layout, part)
        if part.name in known.switches and len(nets) == 2:
            ends[part.name] = (nets[0], nets[1])
    return group_devices(ends, frozenset(joints))


def _roles(
    known: _Sorted, branches: Iterable[Branch], transformers: Iterable[Transformer]
) -> Mapping[str, Role]:
    by_kind = {
        BranchKind.VOLTAGE: Role.BULK_CAPACITOR,
        BranchKind.CURRENT: Role.INDUCTOR,
        BranchKind.RESISTOR: Role.LOAD,
    }
    parts = known.layout.parts.by_name
    roles: dict[str, Role] = {}
    for branch in branches:
        if branch.part:
            source = parts[branch.part].kind in (Kind.VOLTAGE_SOURCE, Kind.CURRENT_SOURCE)
            roles[branch.part] = Role.SOURCE if source else by_kind[branch.kind]
    roles |= {name: Role.WINDING for t in transformers for name in t.parts}
    roles |= {name: Role.WIRE for name in known.layout.wires}
    roles |= {name: Role.GATE_DRIVE for name in known.region.parts}
    roles |= known.peripheral.roles
    roles |= dict.fromkeys(known.isolating, Role.ISOLATION)
    roles |= {name: Role.SWITCH for name in known.switches}
    overridden = {
        name: known.layout.sheet.overrides[name.lower()].role
        for name in parts
        if name.lower() in known.layout.sheet.overrides
    }
    roles |= {name: role for name, role in overridden.items() if role is not None}
    return {name: roles[name] for name in sorted(roles, key=natural_key)}


def _given(parts: PartList, sheet: Sheet) -> dict[str, Interval]:
    given = {}
    for part in parts.parts:
        override = sheet.overrides.get(part.name.lower())
        stated = override and (override.current or override.voltage)
        if stated:
            given[part.name] = stated
    return given


def _overrides(parts: PartList, sheet: Sheet) -> Iterator[tuple[str, Override]]:
    for part in parts.parts:
        override = sheet.overrides.get(part.name.lower())
        if override is not None:
            yield part.name, override


def _domains(layout: Layout, sheet: Sheet) -> dict[str, tuple[str, ...]]:
    """The sheet's domains by the netlist's own spelling of nets; unknown ones are problems."""
    by_lower = {net.lower(): net for net in layout.merged}
    return {
        name: tuple(by_lower[net.lower()] for net in domain.nets if net.lower() in by_lower)
        for name, domain in sheet.domains.items()
    }


def _switching(stated: Switching, commands: Mapping[str, GateCommand]) -> Switching:
    """Where the sheet states no frequency, the slowest gate source of the netlist gives it."""
    periods = [command.period for command in commands.values() if command.repeats]
    if stated.frequency is not None or not periods:
        return stated
    return replace(stated, frequency=1.0 / max(periods))


def _leg_switching(layout: Layout, sheet: Sheet) -> dict[str, Switching]:
    by_lower = {net.lower(): merged for net, merged in layout.merged.items()}
    return {
        by_lower[leg.midpoint.lower()]: leg.switching
        for leg in sheet.legs
        if leg.midpoint.lower() in by_lower
    }


def _gate_supplies(layout: Layout, sheet: Sheet) -> dict[str, Interval]:
    by_lower = {net.lower(): merged for net, merged in layout.merged.items()}
    return {
        by_lower[supply.net.lower()]: supply.voltage
        for supply in sheet.gate_supplies
        if supply.net.lower() in by_lower
    }


def _kept_assumptions(known: _Sorted) -> tuple[str, ...]:
    lines = list(known.peripheral.assumed)
    lines += [
        f"{name} read as an isolation capacitor: it alone joins two parts of the stage"
        for name in sorted(known.isolating, key=natural_key)
    ]
    for part in sorted(known.layout.parts.parts, key=lambda p: natural_key(p.name)):
        if not is_semiconductor(part):
            continue
        if part.name in known.region.parts:
            lines.append(f"{part.name} read as part of a gate drive")
        elif _is_signal(known, part):
            lines.append(f"{part.name} read as a signal part (no power current can pass it)")
    return tuple(lines)


def _is_signal(known: _Sorted, part: Part) -> bool:
    """No port reaches its ends, or behind one of them only signals go on."""
    if part.name in known.switches or part.name in known.aside:
        return False
    ends = set(main_nets(known.layout, part)) - known.layout.grounds
    fed = bool(ends & known.live)
    return bool(ends) and (not fed or any(_only_signals(known, part, net) for net in ends))


def _only_signals(known: _Sorted, part: Part, net: str) -> bool:
    others = [t.part for t in known.layout.touches[net] if t.part.name != part.name]
    quiet = {Kind.RESISTOR, Kind.CAPACITOR, Kind.NTC, *CIRCUITS}
    return bool(others) and all(other.kind in quiet for other in others)


def _not_covered(known: _Sorted, grouping: Grouping) -> tuple[str, ...]:
    lines = []
    for part in known.layout.parts.parts:
        if not is_semiconductor(part) or part.name in known.aside or _is_signal(known, part):
            continue
        if len(main_nets(known.layout, part)) < 2:
            lines.append(f"{part.name}: both its ends are on one net, so it is no switch position")
        elif part.name not in known.switches or part.name in grouping.dangling:
            lines.append(
                f"{part.name}: no power current has a way through it and back; if it does carry "
                f"power, state the port behind it or `set: {{{part.name}: {{role: switch}}}}`"
            )
    return tuple(lines)


def _unknown_names(parts: PartList, layout: Layout, sheet: Sheet) -> Iterable[Problem]:
    """Overrides and legs of the sheet that name nothing in the circuit."""
    names = {part.name.lower(): part.name for part in parts.parts}
    for lower, override in sheet.overrides.items():
        if lower not in names:
            close = difflib.get_close_matches(lower, names, n=1)
            hint = f"did you mean '{names[close[0]]}'?" if close else "name a part of the netlist"
            yield error(override.span, f"part '{override.name}' is not in the netlist", hint)
    nets = {net.lower() for net in layout.merged}
    for name, domain in sheet.domains.items():
        for net in domain.nets:
            if net.lower() not in nets:
                what = f"net '{net}' of domain '{name}' is not in the netlist"
                yield error(domain.span, what, "name a net of the netlist")
    for leg in sheet.legs:
        if leg.midpoint.lower() not in nets:
            yield error(
                leg.span,
                f"net '{leg.midpoint}' is not in the netlist",
                "name the net of a leg's midpoint",
            )
