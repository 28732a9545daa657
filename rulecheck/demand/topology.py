"""Cut the network into independent groups of positions, and say what flows into each.

Nets tied by voltage branches are one rigid island. Positions, resistors and windings join
islands; their biconnected components, united where windings share a core, are the groups. The
groups and islands form a forest, so the current into each group at each island follows from
Kirchhoff's law on the branches of that side.
"""

from collections.abc import Iterable, Mapping, Sequence
from itertools import pairwise
from typing import cast

import networkx as nx

from rulecheck.demand.offsets import Offsets
from rulecheck.demand.ties import Ties, build_ties
from rulecheck.demand.unions import Unions
from rulecheck.demand.voltages import name_of
from rulecheck.stage import Branch, BranchKind, Position, Transformer
from rulecheck.values import AffineForm, natural_key, total_of, variable
from rulecheck.values.record import Record

Node = str | int
"""An island by its root net, or a cluster by its index."""


class Link(Record):
    """Something between two islands: a position, a resistor or a winding."""

    name: str
    start: str
    end: str
    """Islands, by the root net."""
    step: AffineForm
    """Voltage between the ends beyond that of their islands' roots."""
    position: Position | None = None
    ohm: float = 0.0
    core: str = ""
    turns: float = 0.0
    nets: tuple[str, str] = ("", "")
    """The nets themselves, which voltage branches may tie to others of their island."""


class Cluster(Record):
    """One independent group: its links and the current that the rest drives into its islands."""

    links: tuple[Link, ...]
    islands: tuple[str, ...]
    into: Mapping[str, AffineForm]

    @property
    def positions(self) -> tuple[Link, ...]:
        return tuple(link for link in self.links if link.position is not None)

    @property
    def gated(self) -> frozenset[str]:
        return frozenset(p.name for p in self.positions if p.position and p.position.gated)


class Topology(Record):
    clusters: tuple[Cluster, ...]
    ties: Ties
    tie_positions: tuple[Position, ...]
    """Positions whose ends stand on one rigid island."""
    forest: "nx.Graph[Node]"
    """Islands (by name) and clusters (by index) that touch."""
    rigid: Offsets


def build_topology(
    positions: Sequence[Position],
    branches: Sequence[Branch],
    transformers: Sequence[Transformer],
    rigid: Offsets,
) -> Topology:
    links = tuple(_links(positions, branches, transformers, rigid))
    injected = _injections(branches, transformers, rigid)
    joined = [link for link in links if link.start != link.end or link.core]
    groups = _group(joined)
    forest = _forest(groups, injected)
    into = _flows(groups, forest, injected)
    clusters = tuple(
        Cluster(tuple(group), tuple(sorted(_islands(group))), into[i])
        for i, group in enumerate(groups)
    )
    loops = tuple(link.position for link in links if link.position and link.start == link.end)
    return Topology(clusters, build_ties(_balances(forest, injected)), loops, forest, rigid)


def _links(
    positions: Sequence[Position],
    branches: Sequence[Branch],
    transformers: Sequence[Transformer],
    rigid: Offsets,
) -> Iterable[Link]:
    def step(start: str, end: str) -> AffineForm:
        return rigid.offset(start) - rigid.offset(end)

    for position in positions:
        a, b = position.start, position.end
        roots = rigid.root(a), rigid.root(b)
        yield Link(position.name, *roots, step(a, b), position, nets=(a, b))
    for branch in branches:
        if branch.kind is BranchKind.RESISTOR and branch.value:
            a, b = branch.start, branch.end
            yield Link(
                branch.name, rigid.root(a), rigid.root(b), step(a, b), ohm=branch.value, nets=(a, b)
            )
    for core in transformers:
        for index, ((a, b), turns) in enumerate(zip(core.windings, core.turns, strict=True)):
            name = core.parts[index]
            yield Link(
                name,
                rigid.root(a),
                rigid.root(b),
                step(a, b),
                core=core.name,
                turns=turns / core.turns[0],
                nets=(a, b),
            )


def magnetising_name(core: Transformer) -> str:
    return f"i(magnetising {core.name})"


def loop_name(core: str) -> str:
    """A current that may run through windings of a core without magnetising it."""
    return f"i(loop through {core})"


def _injections(
    branches: Sequence[Branch], transformers: Sequence[Transformer], rigid: Offsets
) -> dict[str, AffineForm]:
    """Current that current branches and magnetising inductances drive into each island."""
    driven: dict[str, list[AffineForm]] = {}

    def drive(name: str, start: str, end: str) -> None:
        form = variable(name)
        driven.setdefault(rigid.root(start), []).append(-form)
        driven.setdefault(rigid.root(end), []).append(form)

    for branch in branches:
        if branch.kind is BranchKind.CURRENT:
            drive(name_of(branch), branch.start, branch.end)
    for core in transformers:
        if not core.ideal:
            drive(magnetising_name(core), *core.windings[0])
    return {root: total_of(forms) for root, forms in driven.items()}


def _islands(links: Iterable[Link]) -> set[str]:
    return {island for link in links for island in (link.start, link.end)}


def _group(links: Sequence[Link]) -> list[list[Link]]:
    """Biconnected components of links, united by cores and until they form a forest."""
    graph: nx.Graph[str] = nx.Graph()
    for link in links:
        graph.add_edge(link.start, link.end)
    block_of: dict[frozenset[str], object] = {}
    for index, edges in enumerate(nx.biconnected_component_edges(graph)):
        block_of |= {frozenset(edge): index for edge in edges}
    united = Unions(link.name for link in links)
    for link in links:
        block = block_of.get(frozenset((link.start, link.end)), link.name)
        united.join(link.name, ("block", block))
        if link.core:
            united.join(link.name, ("core", link.core))
    _close_rings(united, links)
    order = {link.name: i for i, link in enumerate(links)}
    groups = [
        [links[i] for i in sorted(order[name] for name in names)] for names in united.classes()
    ]
    return sorted(groups, key=lambda group: natural_key(group[0].name))


def _close_rings(united: Unions, links: Sequence[Link]) -> None:
    """Unite groups that touch each other at two islands; a core may have closed such a ring."""
    while True:
        meeting: nx.Graph[tuple[str, object]] = nx.Graph()
        for link in links:
            group = ("group", united.root(link.name))
            meeting.add_edge(group, ("island", link.start))
            meeting.add_edge(group, ("island", link.end))
        closed = False
        rings = cast("Iterable[set[tuple[str, object]]]", nx.biconnected_components(meeting))
        for ring in rings:
            groups = sorted(str(node[1]) for node in ring if node[0] == "group")
            for first, second in pairwise(groups):
                united.join(first, second)
                closed = True
        if not closed:
            return


def _forest(
    groups: Sequence[Sequence[Link]], injected: Mapping[str, AffineForm]
) -> "nx.Graph[Node]":
    forest: nx.Graph[Node] = nx.Graph()
    forest.add_nodes_from(injected)
    for index, group in enumerate(groups):
        for island in sorted(_islands(group)):
            forest.add_edge(index, island)
    return forest


def _balances(forest: "nx.Graph[Node]", injected: Mapping[str, AffineForm]) -> Iterable[AffineForm]:
    """The current driven into a whole connected part of the network sums to zero."""
    for component in nx.connected_components(forest):
        yield total_of(injected[net] for net in sorted(injected.keys() & component))


def _flows(
    groups: Sequence[Sequence[Link]], forest: "nx.Graph[Node]", injected: Mapping[str, AffineForm]
) -> dict[int, dict[str, AffineForm]]:
    """What the network behind each island of a group drives into the group there.

    Sums over subtrees of the forest, rooted at the island that most groups touch; the side
    towards the root gets what all other sides leave.
    """
    into: dict[int, dict[str, AffineForm]] = {index: {} for index in range(len(groups))}
    for component in nx.connected_components(forest):
        islands = [node for node in component if isinstance(node, str)]
        root = max(sorted(islands), key=forest.degree)
        order = list(nx.dfs_preorder_nodes(forest, root))
        parent = dict(nx.dfs_predecessors(forest, root))
        below: dict[Node, AffineForm] = {}
        for node in reversed(order):
            mine = below.get(node, AffineForm())
            if isinstance(node, str):
                mine += injected.get(node, AffineForm())
            above = parent.get(node)
            if isinstance(above, int) and isinstance(node, str):
                into[above][node] = mine
            elif isinstance(above, str) and isinstance(node, int):
                into[node][above] = -mine
            if above is not None and above != root:
                below[above] = below.get(above, AffineForm()) + mine
    return into
