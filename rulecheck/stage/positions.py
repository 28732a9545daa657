"""Give every two-terminal piece its direction and its name: the switch positions.

The first net is the one that gated forward current enters (drain or collector side, the anode
of a diode); of a symmetric piece it is the net with the higher average potential.
"""

from collections.abc import Iterable, Mapping, Sequence

import networkx as nx

from rulecheck.parts import Conduction, Edge, Part
from rulecheck.stage.grouping import Piece
from rulecheck.stage.position import Position
from rulecheck.values import natural_key
from rulecheck.values.record import replace

_CONDUCTING = frozenset({Conduction.FREE, Conduction.GATED})
_FREE = frozenset({Conduction.FREE})


def build_positions(
    pieces: Iterable[Piece],
    parts: Mapping[str, Part],
    merged: Mapping[str, str],
    potentials: Mapping[str, float],
) -> tuple[Position, ...]:
    made = [
        _position(piece, [parts[name] for name in piece.parts], merged, potentials)
        for piece in pieces
    ]
    return tuple(sorted(made, key=lambda position: natural_key(position.name)))


def _position(
    piece: Piece,
    devices: Sequence[Part],
    merged: Mapping[str, str],
    potentials: Mapping[str, float],
) -> Position:
    named = next((part for part in devices if part.gated), devices[0])
    edges = tuple(
        replace(edge, tail=merged[edge.tail], head=merged[edge.head])
        for part in devices
        for edge in part.edges
    )
    start, end = _direction(piece.terminals, edges, named, merged, potentials)
    return Position(
        named.name,
        tuple(part.name for part in devices),
        start,
        end,
        edges,
        any(part.gated for part in devices),
        _reaches(edges, start, end, _FREE),
        _reaches(edges, end, start, _FREE),
        named.span,
    )


def _direction(
    terminals: tuple[str, str],
    edges: Sequence[Edge],
    named: Part,
    merged: Mapping[str, str],
    potentials: Mapping[str, float],
) -> tuple[str, str]:
    first, second = terminals
    ways = ((first, second), (second, first))
    gated = [_follows_gate(edges, a, b) for a, b in ways]
    if gated[0] != gated[1]:
        return ways[0] if gated[0] else ways[1]
    carries = [_reaches(edges, a, b, _CONDUCTING) for a, b in ways]
    if carries[0] != carries[1]:
        return ways[0] if carries[0] else ways[1]
    return _by_potential(first, second, named, merged, potentials)


def _by_potential(
    first: str,
    second: str,
    named: Part,
    merged: Mapping[str, str],
    potentials: Mapping[str, float],
) -> tuple[str, str]:
    difference = potentials.get(first, 0.0) - potentials.get(second, 0.0)
    if first in potentials and second in potentials and abs(difference) > 1e-6:
        return (first, second) if difference > 0 else (second, first)
    own = [merged[edge.tail] for edge in named.edges]
    return (second, first) if second in own and first not in own[:1] else (first, second)


def _follows_gate(edges: Sequence[Edge], start: str, end: str) -> bool:
    """True where a current from start to end can flow through some gated edge."""
    inward = [edge for edge in edges if end not in (edge.tail, edge.head)]
    outward = [edge for edge in edges if start not in (edge.tail, edge.head)]
    return any(
        edge.conduction is Conduction.GATED
        and edge.tail != end
        and edge.head != start
        and _reaches(inward, start, edge.tail, _CONDUCTING)
        and _reaches(outward, edge.head, end, _CONDUCTING)
        for edge in edges
    )


def _reaches(edges: Sequence[Edge], start: str, end: str, how: frozenset[Conduction]) -> bool:
    graph: nx.DiGraph[str] = nx.DiGraph()
    graph.add_nodes_from((start, end))
    graph.add_edges_from((e.tail, e.head) for e in edges if e.conduction in how)
    return bool(nx.has_path(graph, start, end))
