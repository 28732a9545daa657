"""Name what the states show: legs by their midpoints, bridges by legs that share rails.

Names come last, as labels; nothing before this step knows one.
"""

from collections.abc import Iterable, Mapping, Sequence
from itertools import pairwise, product

import networkx as nx

from rulecheck.demand.analysis import Worked
from rulecheck.demand.demands import Bridge, Leg
from rulecheck.demand.readings import feasible
from rulecheck.demand.topology import Cluster
from rulecheck.stage import Position
from rulecheck.values import Interval, natural_key
from rulecheck.values.record import Record


def find_legs(worked: Worked) -> tuple[Leg, ...]:
    legs: list[Leg] = []
    for index, cluster in enumerate(worked.topology.clusters):
        for midpoint in _midpoints(cluster, worked):
            leg = _leg(worked, index, cluster, midpoint)
            if leg is not None:
                legs.append(leg)
    outer = _outer_pairs(worked)
    nested = [_nested(leg, outer) for leg in _line_legs(worked, legs)]
    return tuple(sorted(nested, key=lambda leg: natural_key(leg.name)))


def _line_legs(worked: Worked, legs: Sequence[Leg]) -> list[Leg]:
    """A rectifier of AC lines is named by its lines: each line's two diodes are a leg.

    The states show the dual, two rails that select among the lines.
    """
    selecting = [
        leg for leg in legs if leg.kind == "rectifier leg" and _alternate(worked, leg.rails)
    ]
    if len(selecting) != 2 or selecting[0].rails != selecting[1].rails:
        return [*legs]
    by_name = {p.name: p for p in worked.stage.positions}
    first, second = selecting
    at_first = by_name[first.high[0]]
    if first.midpoint != at_first.end:
        first, second = second, first
    named = []
    for line in first.rails:
        ends = {}
        for rail in (first, second):
            names = (*rail.high, *rail.low, *rail.others)
            ends[rail.midpoint] = tuple(
                n for n in names if line in (by_name[n].start, by_name[n].end)
            )
        rails = (first.midpoint, second.midpoint)
        high, low = ends[rails[0]], ends[rails[1]]
        named.append(Leg(line, "rectifier leg", line, rails, high, low, (), 2))
    return [leg for leg in legs if leg not in selecting] + named


class _OuterPair(Record):
    """Two positions that join a pair of nets, by net, each to a further net."""

    joining: Mapping[str, str]
    further: Mapping[str, str]


def _outer_pairs(worked: Worked) -> Mapping[frozenset[str], _OuterPair]:
    """By the two nets inside: groups of two positions that meet at none of their nets."""
    pairs: dict[frozenset[str], _OuterPair] = {}
    for cluster in worked.topology.clusters:
        positions = [link.position for link in cluster.positions if link.position]
        if len(positions) != 2:
            continue
        first, second = (((p.start, p.end), (p.end, p.start)) for p in positions)
        for (near, far), (other_near, other_far) in product(first, second):
            if len({near, far, other_near, other_far}) == 4:
                pairs[frozenset((near, other_near))] = _OuterPair(
                    {near: positions[0].name, other_near: positions[1].name},
                    {near: far, other_near: other_far},
                )
    return pairs


def _nested(leg: Leg, outer: Mapping[frozenset[str], _OuterPair]) -> Leg:
    """Flying capacitors: a leg whose rails are themselves switched, each by one of a pair."""
    levels = 2
    while True:
        pair = outer.get(frozenset(leg.rails))
        if pair is None or {*leg.high, *leg.low} & set(pair.joining.values()):
            return leg
        top, bottom = leg.rails[0], leg.rails[-1]
        levels += 1
        high = tuple(sorted((*leg.high, pair.joining[top]), key=natural_key))
        low = tuple(sorted((*leg.low, pair.joining[bottom]), key=natural_key))
        rails = (pair.further[top], pair.further[bottom])
        kind = "multilevel leg"
        leg = Leg(leg.name, kind, leg.midpoint, rails, high, low, leg.others, levels)


def _midpoints(cluster: Cluster, worked: Worked) -> list[str]:
    """Nets where positions meet and a stiff current or a winding leaves."""
    at_net: dict[str, int] = {}
    for link in cluster.positions:
        if link.position:
            for net in (link.position.start, link.position.end):
                at_net[net] = at_net.get(net, 0) + 1
    leaving = {island for island, form in cluster.into.items() if form.terms}
    leaving |= {
        end for link in cluster.links if link.core or link.ohm for end in (link.start, link.end)
    }
    rigid = worked.voltages.potentials
    return [
        net
        for net in sorted(at_net, key=natural_key)
        if at_net[net] >= 2 and rigid.root(net) in leaving
    ]


def _leg(worked: Worked, index: int, cluster: Cluster, midpoint: str) -> Leg | None:
    graph: nx.MultiGraph[str] = nx.MultiGraph()
    for link in cluster.positions:
        if link.position:
            graph.add_edge(link.position.start, link.position.end, key=link.name)
    rails = _rails(worked, graph, midpoint)
    if len(rails) < 2:
        return None
    top, bottom = rails[0], rails[-1]
    high, low = _chain(graph, top, midpoint, rails), _chain(graph, bottom, midpoint, rails)
    names = [link.name for link in cluster.positions]
    others = tuple(n for n in names if n not in high and n not in low)
    positions = {link.name: link.position for link in cluster.positions if link.position}
    reachable = _exclusive(graph, midpoint, rails)
    others = tuple(n for n in others if n in reachable)
    levels = _levels(worked, index, midpoint, rails)
    kind = _kind(worked, [positions[n] for n in (*high, *low)], rails, others)
    if len(rails) == 2 and not others and not _takes_turns(worked, index, kind, (*high, *low)):
        return None
    return Leg(midpoint, kind, midpoint, rails_named(rails, kind), high, low, others, levels)


def _takes_turns(worked: Worked, index: int, kind: str, names: Sequence[str]) -> bool:
    """Two positions of which one is a diode are a cell only where exactly one is always on."""
    if len(names) != 2 or kind not in ("chopper cell", "rectifier leg"):
        return True
    two = set(names)
    return all(len(two & set(s.on)) == 1 for s in worked.reading.states[index])


def rails_named(rails: Sequence[str], kind: str) -> tuple[str, ...]:
    """A leg among lines has all of them as rails, other legs the outer two."""
    lines = kind in ("selector leg", "rectifier leg")
    return tuple(rails) if lines else (rails[0], rails[-1])


def _rails(worked: Worked, graph: "nx.MultiGraph[str]", midpoint: str) -> list[str]:
    """Nets on one rigid island that positions lead to, highest mean potential first."""
    rigid = worked.voltages.potentials
    component = nx.node_connected_component(graph, midpoint)
    by_root: dict[str, list[str]] = {}
    for net in sorted(component, key=natural_key):
        if rigid.root(net) != rigid.root(midpoint):
            by_root.setdefault(rigid.root(net), []).append(net)
    ground = rigid.root(worked.stage.ground)
    best = max(by_root, key=lambda root: (root == ground, len(by_root[root])), default="")
    most = by_root.get(best, [])
    if len(most) < 2:
        return []
    reference = most[0]

    def mean(net: str) -> float:
        form = rigid.difference(net, reference)
        span = worked.box.range_of(form) if form is not None else Interval(0.0, 0.0)
        return span.middle if span.bounded else 0.0

    return sorted(most, key=lambda net: -mean(net))


def _chain(
    graph: "nx.MultiGraph[str]", rail: str, midpoint: str, rails: Sequence[str]
) -> tuple[str, ...]:
    """Positions between a rail and the midpoint that pass no other rail."""
    kept = graph.subgraph(set(graph.nodes) - (set(rails) - {rail}))
    if rail not in kept or not nx.has_path(kept, rail, midpoint):
        return ()
    path = nx.shortest_path(kept, rail, midpoint)
    names = [name for a, b in pairwise(path) for name in sorted(graph[a][b])]
    return tuple(sorted(names, key=natural_key))


def _exclusive(graph: "nx.MultiGraph[str]", midpoint: str, rails: Sequence[str]) -> set[str]:
    """Positions of this midpoint: reached without passing a rail."""
    kept = graph.subgraph(set(graph.nodes) - set(rails))
    inner = nx.node_connected_component(kept, midpoint)
    return {name for net in inner for _, _, name in graph.edges(net, keys=True)}


def _levels(worked: Worked, index: int, midpoint: str, rails: Sequence[str]) -> int:
    """How many different potentials the midpoint takes over the states."""
    rigid = worked.voltages.potentials
    reference = rails[-1]
    seen: list[float] = []
    for state, box in feasible(worked.reading, index, worked.box):
        potentials = state.solution.potentials
        root, base = rigid.root(midpoint), rigid.root(reference)
        form = potentials[root] - potentials[base]
        form += rigid.offset(midpoint) - rigid.offset(reference)
        span = box.range_of(form)
        middle = span.middle if span.bounded else 0.0
        size = max(1.0, 0.02 * span.magnitude) if span.bounded else 1.0
        if all(abs(middle - other) > size for other in seen):
            seen.append(middle)
    return max(2, len(seen))


def _kind(
    worked: Worked, ends: Sequence[Position], rails: Sequence[str], others: Sequence[str]
) -> str:
    gated = sum(position.gated for position in ends)
    if _alternate(worked, rails):
        return "selector leg" if gated else "rectifier leg"
    if others or len(rails) > 2 or len(ends) > 2:
        return "multilevel leg"
    return {2: "half-bridge leg", 1: "chopper cell"}.get(gated, "rectifier leg")


def _alternate(worked: Worked, rails: Sequence[str]) -> bool:
    form = worked.voltages.potentials.difference(rails[0], rails[-1])
    if form is None:
        return False
    span = worked.box.range_of(form)
    return span.low < 0.0 < span.high


def find_bridges(worked: Worked, legs: Sequence[Leg]) -> tuple[Bridge, ...]:
    """Two or three two-level legs on the same rails whose midpoints meet in one load."""
    by_rails: dict[tuple[str, ...], list[Leg]] = {}
    for leg in legs:
        if leg.kind in ("half-bridge leg", "chopper cell", "rectifier leg"):
            by_rails.setdefault(leg.rails, []).append(leg)
    bridges = []
    for rails, on_rails in sorted(by_rails.items()):
        if len(on_rails) < 2:
            continue
        for names in _meeting(worked, rails, [leg.midpoint for leg in on_rails]):
            if len(names) in (2, 3):
                kinds = frozenset(leg.kind for leg in on_rails if leg.midpoint in names)
                bridges.append(Bridge("/".join(names), _bridge_kind(kinds, len(names)), names))
    return tuple(bridges)


def _bridge_kind(kinds: frozenset[str], count: int) -> str:
    if kinds == {"rectifier leg"}:
        return "diode bridge" if count == 2 else "three-phase diode bridge"
    if kinds == {"chopper cell"}:
        return "asymmetric half bridge" if count == 2 else "three-phase half-controlled bridge"
    return "H-bridge" if count == 2 else "three-phase bridge"


def _meeting(
    worked: Worked, rails: Sequence[str], midpoints: Iterable[str]
) -> list[tuple[str, ...]]:
    rigid = worked.voltages.potentials
    barred = {rigid.root(net) for net in rails}
    graph: nx.Graph[str] = nx.Graph()
    graph.add_nodes_from(midpoints)
    stage = worked.stage
    pairs = [(b.start, b.end) for b in stage.branches]
    pairs += [pair for core in stage.transformers for pair in core.windings]
    for a, b in pairs:
        if rigid.root(a) not in barred and rigid.root(b) not in barred:
            graph.add_edge(a, b)
    wanted = set(midpoints)
    groups = [sorted(c & wanted, key=natural_key) for c in nx.connected_components(graph)]
    return [tuple(group) for group in sorted(groups) if len(group) > 1]
