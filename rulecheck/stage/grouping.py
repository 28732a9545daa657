"""Gather power devices into switch positions: two-terminal pieces of the device graph.

    BUS -Q1- A -Q2- SW      with nothing else on A       one position Q1 (parts Q1, Q2)
    BUS -Q1- A -Q2- SW,  O -D5- A                        three positions Q1, Q2, D5

Nets where something else carries power current are joints; no position reaches past one. A
piece with more than two joints is split again at its separation pairs.
"""

from collections.abc import Iterable, Mapping
from itertools import combinations

import networkx as nx

from rulecheck.values import natural_key
from rulecheck.values.record import Record


class Piece(Record):
    """Devices between two nets; the nets in no particular direction."""

    terminals: tuple[str, str]
    parts: tuple[str, ...]


class Grouping(Record):
    pieces: tuple[Piece, ...]
    dangling: tuple[str, ...]
    """Devices with fewer than two ends in the stage."""


def group_devices(ends: Mapping[str, tuple[str, str]], joints: frozenset[str]) -> Grouping:
    """Group devices, given each one's two nets, so that no joint lies inside a group."""
    pieces: list[Piece] = []
    dangling: list[str] = []
    for names in _between_joints(ends, joints):
        outer = sorted({net for name in names for net in ends[name]} & joints)
        if len(outer) < 2:
            dangling += names
        elif len(outer) == 2:
            pieces.append(Piece((outer[0], outer[1]), names))
        else:
            pieces += _split(names, ends, frozenset(outer))
    return Grouping(_in_parallel(pieces), tuple(sorted(dangling, key=natural_key)))


def _in_parallel(pieces: Iterable[Piece]) -> tuple[Piece, ...]:
    """Pieces between the same two nets act as one switch."""
    by_pair: dict[tuple[str, ...], list[str]] = {}
    for piece in pieces:
        by_pair.setdefault(tuple(sorted(piece.terminals)), []).extend(piece.parts)
    merged = [
        Piece((pair[0], pair[1]), tuple(sorted(parts, key=natural_key)))
        for pair, parts in by_pair.items()
    ]
    return tuple(sorted(merged, key=lambda piece: natural_key(piece.parts[0])))


def _between_joints(
    ends: Mapping[str, tuple[str, str]], joints: frozenset[str]
) -> Iterable[tuple[str, ...]]:
    """Devices connected through interior nets; devices straight between two joints by pair."""
    graph: nx.Graph[tuple[str, ...]] = nx.Graph()
    for name, (first, second) in ends.items():
        interior = [net for net in (first, second) if net not in joints]
        anchors = [("net", net) for net in interior]
        graph.add_edges_from((("device", name), anchor) for anchor in anchors)
        if not interior:
            graph.add_edge(("device", name), ("pair", *sorted((first, second))))
    for component in nx.connected_components(graph):
        names = sorted((n[1] for n in component if n[0] == "device"), key=natural_key)
        yield tuple(names)


def _split(
    names: tuple[str, ...], ends: Mapping[str, tuple[str, str]], outer: frozenset[str]
) -> list[Piece]:
    """Cut a piece with three or more outer nets into maximal two-terminal pieces."""
    rest = list(names)
    pieces: list[Piece] = []
    for candidate in _two_terminal_candidates(names, ends, outer):
        if set(candidate.parts) <= set(rest):
            pieces.append(candidate)
            rest = [name for name in rest if name not in candidate.parts]
    by_pair: dict[tuple[str, ...], list[str]] = {}
    for name in rest:
        by_pair.setdefault(tuple(sorted(ends[name])), []).append(name)
    return pieces + [Piece((p[0], p[1]), tuple(parts)) for p, parts in by_pair.items()]


def _two_terminal_candidates(
    names: tuple[str, ...], ends: Mapping[str, tuple[str, str]], outer: frozenset[str]
) -> list[Piece]:
    graph: nx.MultiGraph[str] = nx.MultiGraph()
    for name in names:
        graph.add_edge(*ends[name], key=name)
    found: list[Piece] = []
    for pair in combinations(sorted(graph.nodes), 2):
        rest = graph.subgraph(graph.nodes - set(pair))
        inner = [c for c in nx.connected_components(rest) if not c & outer]
        inside: set[str] = set().union(*inner, set())
        if not inside:
            continue
        parts = [n for n in names if set(ends[n]) <= inside | set(pair)]
        if all(any(end in pair for n in parts for end in ends[n] if end == t) for t in pair):
            found.append(Piece(pair, tuple(parts)))
    return sorted(found, key=lambda piece: (-len(piece.parts), piece.terminals))
