"""Where two domains of the sheet meet: at insulation, or at a part that joins them.

domains: {battery: [PGND], signal: [SG]}
XU2 A K C E OC-1       an optocoupler between them insulates
R99 PGND SG 1k         a resistor between them joins what is to be separate
"""

from collections.abc import Iterable, Iterator, Mapping

import networkx as nx

from rulecheck.parts import Core, Kind, Part, PartList, is_barrier, joined_nets
from rulecheck.stage.power_path import ISOLATION_CAPACITANCE
from rulecheck.stage.stage import Barrier, Crossing
from rulecheck.values import Unknown, natural_key
from rulecheck.values.record import Record

_Node = tuple[str, str]
"""(`net` or `part` or `domain`, name); a part with two sides has a node for each."""


class _Joints(Record):
    """Nets and the parts that join them, with what surely joins and what may."""

    sure: "nx.Graph[_Node]"
    perhaps: "nx.Graph[_Node]"


def find_crossings(
    parts: PartList, domains: Mapping[str, tuple[str, ...]], barriers: Iterable[Barrier]
) -> tuple[Crossing, ...]:
    """Every part at which two domains meet, the insulating ones included. Linear in the pins."""
    if len(domains) < 2:
        return ()
    joints = _joints(parts, domains)
    found: dict[tuple[str, Barrier], Crossing] = {}
    joining: set[str] = set()
    for barrier in barriers:
        for crossing in _joined(parts, joints, barrier):
            found.setdefault((crossing.name, barrier), crossing)
            joining.add(crossing.name)
    apart = joints.sure.copy()
    apart.remove_nodes_from([node for node in joints.sure if _is_part(node, joining)])
    sides = _sides(apart)
    for barrier in barriers:
        for crossing in _insulating(parts, sides, barrier):
            found.setdefault((crossing.name, barrier), crossing)
    ordered = sorted(found.values(), key=lambda crossing: natural_key(crossing.name))
    return tuple(ordered)


def _is_part(node: _Node, names: set[str]) -> bool:
    return node[0] == "part" and node[1].partition("/")[0] in names


def _joints(parts: PartList, domains: Mapping[str, tuple[str, ...]]) -> _Joints:
    wound = {name for core in parts.cores for name in core.windings}
    sure: nx.Graph[_Node] = nx.Graph()
    for name, nets in domains.items():
        sure.add_edges_from((("domain", name), ("net", net)) for net in nets)
    doubtful: list[tuple[_Node, _Node]] = []
    for part in parts.parts:
        sure.add_nodes_from(("net", net) for net in part.nets)
        if may_insulate(part):
            continue
        joined = joined_nets(part, wound)
        for index, nets in enumerate(joined.groups):
            edges = [(("part", f"{part.name}/{index}"), ("net", net)) for net in nets]
            if joined.sure:
                sure.add_edges_from(edges)
            else:
                doubtful += edges
    perhaps = sure.copy()
    perhaps.add_edges_from(doubtful)
    return _Joints(sure, perhaps)


def may_insulate(part: Part) -> bool:
    """A capacitor small enough to stand across an insulation."""
    small = not isinstance(part.value, Unknown) and part.value <= ISOLATION_CAPACITANCE
    return part.kind is Kind.CAPACITOR and small


def _joined(parts: PartList, joints: _Joints, barrier: Barrier) -> Iterator[Crossing]:
    """The part without which the domains would be separate; of several the middle one."""
    first, second = (("domain", name) for name in barrier.domains)
    for graph, sure in ((joints.sure, True), (joints.perhaps, False)):
        if graph.has_node(first) and graph.has_node(second) and nx.has_path(graph, first, second):
            path = [n for n in nx.shortest_path(graph, first, second) if n[0] == "part"]
            at = _narrowest(graph, path, first, second)
            name = at[1].rpartition("/")[0]
            missing = None if sure else parts.by_name[name].missing("kind")
            chain = tuple(dict.fromkeys(node[1].rpartition("/")[0] for node in path))
            yield Crossing(name, barrier, False if missing is None else missing, (name,), chain)
            return


def _narrowest(graph: "nx.Graph[_Node]", path: list[_Node], first: _Node, second: _Node) -> _Node:
    """Of the parts on the path that alone join the two sides, that with most on either side."""
    cut = set(nx.articulation_points(graph))
    alone = [node for node in path if node in cut] or path

    def balance(node: _Node) -> int:
        rest = graph.subgraph(n for n in graph if n != node)
        reached = [len(nx.node_connected_component(rest, end)) for end in (first, second)]
        return min(reached)

    return max(alone, key=balance)


def _sides(graph: "nx.Graph[_Node]") -> dict[str, int]:
    """Net -> the component that it is in."""
    return {
        name: index
        for index, nodes in enumerate(nx.connected_components(graph))
        for kind, name in nodes
        if kind in ("net", "domain")
    }


def _insulating(parts: PartList, sides: Mapping[str, int], barrier: Barrier) -> Iterator[Crossing]:
    wanted = {sides.get(name, -1) for name in barrier.domains}
    if len(wanted) != 2:
        return
    for part in parts.parts:
        if may_insulate(part) or is_barrier(part):
            met = {sides[net] for net in part.nets}
            if wanted <= met:
                yield Crossing(part.name, barrier, True, (part.name,), (part.name,))
    for core in parts.cores:
        if wanted <= {sides[net] for net in _core_nets(parts, core)}:
            yield Crossing(core.name, barrier, True, core.windings, core.windings)


def _core_nets(parts: PartList, core: Core) -> Iterator[str]:
    for name in core.windings:
        yield from parts.by_name[name].nets
