"""Tell the devices in the power path from those of supplies, signals and indicators.

Two tests decide, and both must pass. Live: both ends are reached from a port through what
carries power, never through ground. Cycle: taking the device away would not cut the power
graph in two, so a current can come back (a lone transistor on a sense net has no way back).
"""

from collections.abc import Iterable
from itertools import pairwise

import networkx as nx

from rulecheck.parts import Kind, Part
from rulecheck.stage.layout import SOURCES, Layout, is_semiconductor, main_nets
from rulecheck.stage.sheet import SheetPort
from rulecheck.values import Unknown

_STRING = frozenset({Kind.CAPACITOR, Kind.RESISTOR})
LOAD_RESISTANCE = 10e3
"""Ohm; from here on a resistor senses or bleeds (common practice)."""
ISOLATION_CAPACITANCE = 22e-9
"""Farad; common practice: capacitors across an isolation barrier are smaller."""
FEED_RESISTANCE = 1e3
"""Ohm; a larger resistor does not carry power from one part of the stage to another."""
_RESISTORS = frozenset({Kind.RESISTOR, Kind.NTC})


def find_live_nets(layout: Layout, aside: frozenset[str]) -> frozenset[str]:
    """Nets reached from the ports (or, without a sheet, from sources and inductors).

    `aside` names the parts that are known to be no part of the power path.
    """
    graph: nx.Graph[object] = nx.Graph()
    graph.add_nodes_from(layout.touches)
    cores: dict[str, str] = {n: core.name for core in layout.parts.cores for n in core.windings}
    for part in layout.parts.parts:
        if part.name in aside or part.name in layout.wires:
            continue
        ends = _feeding_ends(layout, part, aside)
        for first, second in pairwise(ends):
            graph.add_edge(first, second)
        if part.name in cores and not set(ends) <= layout.grounds:
            graph.add_edge(("core", cores[part.name]), next(e for e in ends))
            graph.add_edge(("core", cores[part.name]), ends[-1])
    graph.remove_nodes_from(layout.grounds)
    seeds = [net for net in _seeds(layout, aside) if net in graph]
    reached = set().union(*(nx.node_connected_component(graph, net) for net in seeds), set())
    live = frozenset(net for net in reached if isinstance(net, str)) | layout.grounds
    return live | _between_capacitors(layout, aside, live)


def _between_capacitors(
    layout: Layout, aside: frozenset[str], live: frozenset[str]
) -> frozenset[str]:
    """Nets inside strings of capacitors in series: nothing else but resistors touches them."""
    inside: dict[str, set[str]] = {}
    for net, touches in layout.touches.items():
        parts = [touch.part for touch in touches]
        kinds = [part.kind for part in parts]
        strung = kinds.count(Kind.CAPACITOR) >= 2 and set(kinds) <= _STRING
        if net not in live and strung and not {part.name for part in parts} & aside:
            caps = [part for part in parts if part.kind is Kind.CAPACITOR]
            inside[net] = {other for part in caps for other in layout.others(part, net)}
    while any(not ends <= live | inside.keys() for ends in inside.values()):
        inside = {net: ends for net, ends in inside.items() if ends <= live | inside.keys()}
    return frozenset(inside)


def _feeding_ends(layout: Layout, part: Part, aside: frozenset[str]) -> tuple[str, ...]:
    if is_semiconductor(part):
        return main_nets(layout, part)
    if part.kind is Kind.INDUCTOR:
        return layout.ends(part)
    if part.kind in _RESISTORS and not isinstance(part.value, Unknown):
        return layout.ends(part) if _feeds(layout, part, part.value, aside) else ()
    return ()


def _feeds(layout: Layout, part: Part, ohm: float, aside: frozenset[str]) -> bool:
    """A small resistor feeds on what lies behind it only where a device or an inductor does."""
    return ohm < FEED_RESISTANCE and all(
        net in layout.port_nets
        or net in layout.grounds
        or any(
            t.part.name not in aside and (t.part.kind is Kind.INDUCTOR or is_semiconductor(t.part))
            for t in layout.touches[net]
        )
        for net in layout.ends(part)
    )


def _seeds(layout: Layout, aside: frozenset[str]) -> Iterable[str]:
    if layout.sheet.ports:
        return sorted(layout.port_nets)
    kinds = {*SOURCES, Kind.INDUCTOR}
    chosen = [
        net
        for part in layout.parts.parts
        if part.kind in kinds and part.name not in aside and part.name not in layout.wires
        for net in layout.ends(part)
    ]
    return chosen or sorted(layout.touches)


def find_isolation_capacitors(
    layout: Layout, aside: frozenset[str], live: frozenset[str]
) -> frozenset[str]:
    """Small capacitors that alone join two otherwise separate parts of the power path.

    Their voltage is that of the isolation barrier, which the stage does not fix.
    """
    capacitors = [part for part in layout.parts.parts if part.kind is Kind.CAPACITOR]
    small = [part for part in capacitors if part.name not in aside and _isolates(part)]
    small = [part for part in small if set(layout.ends(part)) <= live]
    bulk = frozenset(part.name for part in capacitors) - {part.name for part in small} - aside
    graph = _power_graph(layout, aside, live, bulk)
    graph.add_nodes_from(net for part in small for net in layout.ends(part))
    side = {net: index for index, nets in enumerate(nx.connected_components(graph)) for net in nets}
    ends = {part.name: layout.ends(part) for part in small}
    return frozenset(name for name, (a, b) in ends.items() if side[a] != side[b])


def _isolates(part: Part) -> bool:
    return not isinstance(part.value, Unknown) and part.value <= ISOLATION_CAPACITANCE


def find_power_devices(
    layout: Layout, aside: frozenset[str], live: frozenset[str], bulk: frozenset[str]
) -> frozenset[str]:
    """Names of the semiconductors through which power current can flow and come back.

    `bulk` names the capacitors that count as a way back.
    """
    graph = _power_graph(layout, aside, live, bulk)
    cut = {frozenset(pair) for pair in nx.bridges(graph)} if graph else set()
    semiconductors = _semiconductors(layout)
    return frozenset(
        name
        for first, second, name in graph.edges(keys=True)
        if frozenset((first, second)) not in cut and name in semiconductors
    )


def _power_graph(
    layout: Layout, aside: frozenset[str], live: frozenset[str], bulk: frozenset[str]
) -> "nx.MultiGraph[str]":
    graph: nx.MultiGraph[str] = nx.MultiGraph()
    for part in layout.parts.parts:
        if part.name in aside or part.name in layout.wires:
            continue
        ends = _carrying_ends(layout, part, bulk)
        if ends and set(ends) <= live:
            for first, second in pairwise(ends):
                graph.add_edge(first, second, key=part.name)
    for port in layout.sheet.ports:
        _add_port(graph, layout, port)
    return graph


def _semiconductors(layout: Layout) -> frozenset[str]:
    return frozenset(part.name for part in layout.parts.parts if is_semiconductor(part))


def _carrying_ends(layout: Layout, part: Part, bulk: frozenset[str]) -> tuple[str, ...]:
    if is_semiconductor(part):
        return main_nets(layout, part)
    if part.kind is Kind.INDUCTOR or part.kind in SOURCES or part.name in bulk:
        return layout.ends(part)
    if part.kind in _RESISTORS:
        known = not isinstance(part.value, Unknown)
        return layout.ends(part) if not known or _carries(part) else ()
    if part.kind is Kind.CONNECTOR:
        return tuple(dict.fromkeys(layout.net(net) for net in part.nets))
    return ()


def _carries(part: Part) -> bool:
    """In series with a device a kilohm lets only signals through."""
    return not isinstance(part.value, Unknown) and part.value < FEED_RESISTANCE


def _add_port(graph: "nx.MultiGraph[str]", layout: Layout, port: SheetPort) -> None:
    by_lower = {net.lower(): merged for net, merged in layout.merged.items()}
    nets = [by_lower[n.lower()] for n in (*port.nets, port.neutral) if n.lower() in by_lower]
    for first, second in pairwise(nets):
        graph.add_edge(first, second, key=f"port/{port.name}")
