"""Resolve the sheet's ports against the nets of the circuit, or take the netlist's own sources."""

import difflib
from collections.abc import Iterator, Mapping, Sequence

from rulecheck.parts import Kind, Part
from rulecheck.stage.branches import source_range
from rulecheck.stage.layout import SOURCES, Layout, is_semiconductor, main_nets
from rulecheck.stage.sheet import Sheet, SheetPort
from rulecheck.stage.stage import Port, PortKind
from rulecheck.values import Interval, Problem, Span, error
from rulecheck.values.record import Record


class Ports(Record):
    ports: tuple[Port, ...]
    problems: tuple[Problem, ...]


def resolve_ports(sheet: Sheet, merged: Mapping[str, str]) -> Ports:
    """Ports of the sheet on merged nets; an unknown net is an error with the nearest name."""
    problems: list[Problem] = []
    ports: list[Port] = []
    for entry in sheet.ports:
        nets = [_resolve(net, merged, entry.span, problems) for net in entry.nets]
        neutral = _resolve(entry.neutral, merged, entry.span, problems) if entry.neutral else ""
        if not nets or None in nets or neutral is None:
            continue
        found = tuple(net for net in nets if net is not None)
        problem = _flaw(entry, found)
        if problem is not None:
            problems.append(problem)
            continue
        ports.append(_port(entry, found, neutral))
    problems += _contradictions(ports)
    return Ports(tuple(ports), tuple(problems))


def _contradictions(ports: Sequence[Port]) -> Iterator[Problem]:
    """Two voltages on one pair of nets whose ranges have nothing in common."""
    first: dict[frozenset[str], Port] = {}
    for port in ports:
        if port.voltage is None or port.kind is not PortKind.DC:
            continue
        other = first.setdefault(frozenset(port.nets), port)
        if other is port or other.voltage is None:
            continue
        voltage = port.voltage if port.nets == other.nets else -port.voltage
        if voltage.meet(other.voltage) is None:
            yield error(
                port.span,
                f"ports '{other.name}' and '{port.name}' stand on the same nets "
                f"({' and '.join(port.nets)}, wires merged) with voltages that never agree",
                "correct the ranges or the nets, or find the wire that joins them",
            )


def _port(entry: SheetPort, nets: tuple[str, ...], neutral: str) -> Port:
    return Port(
        entry.name,
        entry.kind,
        nets,
        neutral,
        entry.voltage,
        entry.current,
        entry.power,
        entry.frequency,
        "sheet",
        entry.span,
        entry.least_amplitude,
        entry.draws,
        entry.source,
        entry.fused_elsewhere,
        entry.withstands,
        (*entry.nets, *((entry.neutral,) if entry.neutral else ())),
        entry.modulation,
        entry.modulation_index,
        entry.power_factor,
        entry.ripple,
    )


def _flaw(entry: SheetPort, nets: tuple[str, ...]) -> Problem | None:
    if len(set(nets)) < len(nets):
        return error(
            entry.span,
            f"port '{entry.name}' has one net twice ({', '.join(nets)}), after wires are merged",
            "name two different nets, or give the part between them a role under `set:`",
        )
    if entry.voltage is None and entry.current is None and entry.power is None:
        return error(
            entry.span,
            f"port '{entry.name}' states no voltage, current or power",
            "write `voltage:`, `supplies:`, `draws:` or `power:`",
        )
    return None


def _resolve(
    net: str, merged: Mapping[str, str], span: Span, problems: list[Problem]
) -> str | None:
    by_lower = {name.lower(): name for name in merged}
    if net.lower() in by_lower:
        return merged[by_lower[net.lower()]]
    close = difflib.get_close_matches(net.lower(), by_lower, n=1, cutoff=0.6)
    hint = f"did you mean '{by_lower[close[0]]}'?" if close else "use a net of the netlist"
    problems.append(error(span, f"net '{net}' is not in the netlist", hint))
    return None


def source_ports(layout: Layout, aside: frozenset[str]) -> tuple[Port, ...]:
    """Without a sheet, the sources of the netlist that stand on the power path serve as ports."""
    ports = []
    for part in layout.parts.parts:
        if part.kind not in SOURCES or part.name in aside or part.name in layout.wires:
            continue
        nets = layout.ends(part)
        if nets[0] != nets[1] and any(_on_power_path(layout, net, aside) for net in nets):
            ports.append(_source_port(part, nets))
    return tuple(ports)


def _on_power_path(layout: Layout, net: str, aside: frozenset[str]) -> bool:
    if net in layout.grounds:
        return False
    around = [t.part for t in layout.touches[net] if t.part.name not in aside]
    return any(
        part.kind is Kind.INDUCTOR or (is_semiconductor(part) and net in main_nets(layout, part))
        for part in around
    )


def _source_port(part: Part, nets: tuple[str, str]) -> Port:
    span = source_range(part)
    sinusoidal = part.waveform is not None and part.waveform.kind == "sin"
    kind = PortKind.AC if sinusoidal else PortKind.DC
    volts = span if part.kind is Kind.VOLTAGE_SOURCE else None
    # a current source drives its current through itself from the first net to the second
    amperes = -span if span is not None and part.kind is Kind.CURRENT_SOURCE else None
    frequency = None
    if sinusoidal and part.waveform is not None and len(part.waveform.values) > 2:
        frequency = Interval(part.waveform.values[2], part.waveform.values[2])
    return Port(part.name, kind, nets, "", volts, amperes, None, frequency, part.name, part.span)
