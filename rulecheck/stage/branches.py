"""Turn ports, sources, capacitors, inductors and loads of the power path into branches.

A port with a voltage is a voltage branch; a port with only a current is a current branch. A
sheet's port stands in for a source of the netlist between the same nets.
"""

from collections.abc import Iterable, Iterator

from rulecheck.netlist import Waveform
from rulecheck.parts import Kind, Part
from rulecheck.stage.layout import SOURCES, Layout
from rulecheck.stage.power_path import LOAD_RESISTANCE
from rulecheck.stage.stage import Branch, BranchKind, Port, PortKind, Transformer
from rulecheck.values import Interval, Unknown, point


def port_branches(ports: Iterable[Port]) -> Iterator[Branch]:
    """Branches of ports that the sheet states; ports that are parts come with their part."""
    for port in ports:
        if port.stated_in != "sheet":
            continue
        if port.kind is PortKind.PHASES:
            yield from _phase_branches(port)
        elif port.voltage is not None:
            yield _port_branch(port, BranchKind.VOLTAGE, port.nets[0], port.nets[1], port.voltage)
        else:
            # a port's current leaves its first net into the stage, so through the port it
            # flows from the second net to the first
            yield _port_branch(port, BranchKind.CURRENT, port.nets[1], port.nets[0], port.current)


def _port_branch(
    port: Port, kind: BranchKind, start: str, end: str, given: Interval | None, net: str = ""
) -> Branch:
    name = f"port/{port.name}/{net}" if net else f"port/{port.name}"
    return Branch(name, kind, start, end, None, "", port.name, given)


def _phase_branches(port: Port) -> Iterator[Branch]:
    star = port.neutral or f"star of {port.name}"
    for net in port.nets:
        if port.voltage is not None:
            yield _port_branch(port, BranchKind.VOLTAGE, net, star, port.voltage, net)
        else:
            yield _port_branch(port, BranchKind.CURRENT, star, net, port.current, net)


def part_branches(
    layout: Layout, live: frozenset[str], aside: frozenset[str], ports: Iterable[Port]
) -> Iterator[Branch]:
    """Branches of the parts in the power path; `aside` names those that are not in it."""
    stated = {frozenset(p.nets) for p in ports if p.stated_in == "sheet"}
    for part in layout.parts.parts:
        if part.name in aside or part.name in layout.wires or part.name in layout.coupled:
            continue
        kind = branch_kind(part)
        if kind is None or len(part.nets) < 2:
            continue
        start, end = layout.ends(part)
        if start == end or not {start, end} <= live:
            continue
        if part.kind in SOURCES and frozenset((start, end)) in stated:
            continue
        value = None if isinstance(part.value, Unknown) else part.value
        yield Branch(part.name, kind, start, end, value, part.name, "", _given(layout, part))


def branch_kind(part: Part) -> BranchKind | None:
    if part.kind in (Kind.VOLTAGE_SOURCE, Kind.CAPACITOR):
        return BranchKind.VOLTAGE
    if part.kind in (Kind.CURRENT_SOURCE, Kind.INDUCTOR):
        return BranchKind.CURRENT
    if part.kind in (Kind.RESISTOR, Kind.NTC):
        senses = not isinstance(part.value, Unknown) and part.value >= LOAD_RESISTANCE
        return None if senses else BranchKind.RESISTOR
    return None


def _given(layout: Layout, part: Part) -> Interval | None:
    override = layout.sheet.overrides.get(part.name.lower())
    if override is not None and part.kind in (Kind.CAPACITOR, Kind.VOLTAGE_SOURCE):
        return override.voltage
    if override is not None and part.kind in (Kind.INDUCTOR, Kind.CURRENT_SOURCE):
        return override.current
    return source_range(part) if part.kind in SOURCES else None


def source_range(part: Part) -> Interval | None:
    """The values a source of the netlist takes over time; None where they cannot be read."""
    if part.waveform is not None:
        return _waveform_range(part.waveform)
    return None if isinstance(part.value, Unknown) else point(part.value)


def _waveform_range(waveform: Waveform) -> Interval | None:
    values = waveform.values
    if waveform.kind == "sin" and len(values) >= 2:
        return Interval(values[0] - abs(values[1]), values[0] + abs(values[1]))
    if waveform.kind == "pulse" and len(values) >= 2:
        return Interval(min(values[:2]), max(values[:2]))
    if waveform.kind == "pwl" and len(values) >= 2:
        return Interval(min(values[1::2]), max(values[1::2]))
    if waveform.kind == "dc" and values:
        return point(values[0])
    return None


def build_transformers(
    layout: Layout, live: frozenset[str], gate_cores: frozenset[str]
) -> tuple[Transformer, ...]:
    by_name = {part.name: part for part in layout.parts.parts}
    made = []
    for core in layout.parts.cores:
        windings = [by_name[name] for name in core.windings]
        ends = [layout.ends(winding) for winding in windings]
        kept = [i for i, pair in enumerate(ends) if set(pair) <= live and pair[0] != pair[1]]
        if core.name in gate_cores or not kept:
            continue
        first = windings[kept[0]].value
        made.append(
            Transformer(
                core.name,
                tuple(ends[i] for i in kept),
                tuple(core.turns[i] for i in kept),
                tuple(core.windings[i] for i in kept),
                None if isinstance(first, Unknown) else first,
            )
        )
    return tuple(made)
