"""The current that a position can carry: directed reach, and the maximum flow through its edges.

    Q1 and Q2 in parallel, 30 A each                60 A
    Q1 with 30 A in series with a diode of 20 A     20 A

Capacities are the edges' current ratings; the narrowest cut decides, parallel ratings add,
which assumes that parallel devices share the current.
"""

from collections.abc import Iterator, Mapping, Sequence
from itertools import islice, pairwise

import networkx as nx

from rulecheck.parts import Conduction, Edge
from rulecheck.values import Unknown, natural_key
from rulecheck.values.record import Mutable, Record, field

PATHS_TRIED = 64
"""Paths looked at for the names of missing ratings; the numbers do not depend on it."""

Pair = tuple[str, str]


class Carrying(Record):
    carries: bool
    freewheels: bool
    amperes: float | Unknown
    at_least: float
    missing: tuple[Unknown, ...]
    carried_by: tuple[str, ...]


class _Lane(Mutable):
    """All edges from one net to another: parallel ratings add."""

    amperes: float = 0.0
    missing: list[Unknown] = field(default_factory=list)


def find_carrying(edges: Sequence[Edge], start: str, end: str) -> Carrying:
    """What can flow from `start` to `end`: with all gates on, and with none on; in amperes."""
    onward = [edge for edge in edges if edge.head != start and edge.tail != end]
    conducting = [edge for edge in onward if edge.conduction is not Conduction.NEVER]
    free = [edge for edge in onward if edge.conduction is Conduction.FREE]
    carried_by = _path(conducting, start, end)
    if not carried_by:
        return Carrying(False, False, 0.0, 0.0, (), ())
    lanes = _lanes(conducting)
    open_lanes = frozenset(pair for pair, lane in lanes.items() if lane.missing)
    least = _flow(lanes, start, end, frozenset())
    most = _flow(lanes, start, end, open_lanes)
    missing = _missing(lanes, start, end) if most > least else ()
    return Carrying(
        carries=True,
        freewheels=bool(_path(free, start, end)),
        amperes=missing[0] if missing else least,
        at_least=least,
        missing=missing,
        carried_by=carried_by,
    )


def _path(edges: Sequence[Edge], start: str, end: str) -> tuple[str, ...]:
    """The parts of the path with the fewest gated edges, then the fewest edges; or none."""
    graph: nx.DiGraph[str] = nx.DiGraph()
    for edge in sorted(edges, key=lambda e: natural_key(e.part), reverse=True):
        weight = 1 if edge.conduction is Conduction.FREE else 1 + len(edges)
        present = graph.get_edge_data(edge.tail, edge.head)
        if present is None or weight <= present["weight"]:
            graph.add_edge(edge.tail, edge.head, weight=weight, part=edge.part)
    if start == end or start not in graph or end not in graph:
        return ()
    if not nx.has_path(graph, start, end):
        return ()
    nets = nx.shortest_path(graph, start, end, weight="weight")
    return tuple(graph.edges[pair]["part"] for pair in pairwise(nets))


def _lanes(edges: Sequence[Edge]) -> dict[Pair, _Lane]:
    lanes: dict[Pair, _Lane] = {}
    for edge in edges:
        lane = lanes.setdefault((edge.tail, edge.head), _Lane())
        if isinstance(edge.current, Unknown):
            lane.missing.append(edge.current)
        else:
            lane.amperes += edge.current
    return lanes


def _flow(lanes: Mapping[Pair, _Lane], start: str, end: str, wide: frozenset[Pair]) -> float:
    """The maximum flow with the missing ratings of `wide` lanes without limit, all others 0.

    "Without limit" is one ampere more than all known ratings together: no cut of known ratings
    reaches it.
    """
    limit = 1.0 + sum(lane.amperes for lane in lanes.values())
    if list(lanes) == [(start, end)]:
        return limit if wide else lanes[start, end].amperes
    graph: nx.DiGraph[str] = nx.DiGraph()
    for pair, lane in lanes.items():
        graph.add_edge(*pair, capacity=limit if pair in wide else lane.amperes)
    return float(nx.maximum_flow_value(graph, start, end))


def _missing(lanes: Mapping[Pair, _Lane], start: str, end: str) -> tuple[Unknown, ...]:
    """The ratings without which the flow is not known.

    A missing rating counts where, with the other ratings on some path taken as ample and all
    others as 0, its own value changes the flow; all count where that singles out none.
    """
    decisive: set[Pair] = set()
    for path in _paths(lanes, start, end):
        ample = frozenset(pair for pair in path if lanes[pair].missing)
        flow = _flow(lanes, start, end, ample)
        decisive |= {
            pair for pair in ample - decisive if flow > _flow(lanes, start, end, ample - {pair})
        }
    found = {rating for pair in decisive or lanes for rating in lanes[pair].missing}
    return tuple(sorted(found, key=lambda rating: natural_key(rating.what)))


def _paths(lanes: Mapping[Pair, _Lane], start: str, end: str) -> Iterator[list[Pair]]:
    graph = nx.DiGraph(list(lanes))
    for nets in islice(nx.all_simple_paths(graph, start, end), PATHS_TRIED):
        yield list(pairwise(nets))
