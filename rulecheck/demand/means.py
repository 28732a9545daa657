"""Mean currents by Kirchhoff's law, capacitors open and the positions' currents unknown.

    buck: at the output only the inductor's current is unknown, so i(L) = i(out)

A mean is fixed exactly where its branch is a bridge of the graph of unknown branches: then the
known currents of either side must flow through it.
"""

from collections.abc import Callable, Hashable, Mapping, Sequence

import networkx as nx

from rulecheck.demand.topology import magnetising_name
from rulecheck.demand.unions import Unions
from rulecheck.demand.voltages import Voltages, name_of
from rulecheck.stage import Branch, BranchKind, Port, PortKind, Position, Transformer
from rulecheck.values import AffineForm, total_of, variable
from rulecheck.values.record import Record, replace


class Unknowns(Record):
    """The branches whose means Kirchhoff's law is asked for, and what is known to flow."""

    edges: tuple[tuple[str, str, str], ...]
    """Name, start, end: positive from start to end."""
    known: tuple[tuple[str, str, AffineForm], ...]
    """Start, end and the current that flows from start to end."""
    capacitors: tuple[tuple[str, str, str], ...] = ()
    """Open, unless nothing else can carry a known current on."""


def collect_unknowns(
    branches: Sequence[Branch],
    transformers: Sequence[Transformer],
    positions: Sequence[Position],
    ports: Sequence[Port],
    known_ports: Mapping[str, object],
    voltages: Voltages,
) -> Unknowns:
    edges = [(p.name, p.start, p.end) for p in positions]
    known: list[tuple[str, str, AffineForm]] = []
    capacitors: list[tuple[str, str, str]] = []
    by_port = {port.name: port for port in ports}
    for branch in branches:
        form = _known_current(branch, known_ports, voltages, by_port)
        if form is not None:
            known.append((branch.start, branch.end, form))
        elif branch.kind is not BranchKind.VOLTAGE or not branch.value or branch.port:
            edges.append((branch.name, branch.start, branch.end))
        else:
            capacitors.append((branch.name, branch.start, branch.end))
    for core in transformers:
        edges += [(n, a, b) for n, (a, b) in zip(core.parts, core.windings, strict=True)]
    return Unknowns(tuple(edges), tuple(known), tuple(capacitors))


def _known_current(
    branch: Branch,
    known_ports: Mapping[str, object],
    voltages: Voltages,
    ports: Mapping[str, Port],
) -> AffineForm | None:
    """The branch's mean current from start to end, where it is a variable or follows from one."""
    if branch.kind is BranchKind.RESISTOR:
        form = voltages.averages.difference(branch.start, branch.end)
        return None if form is None or not branch.value else form.scaled(1.0 / branch.value)
    if branch.port and branch.port in known_ports:
        name = port_current_name(branch)
        # a voltage branch runs from plus to minus, its current out of plus is negative there
        return variable(name) if branch.kind is BranchKind.CURRENT else -variable(name)
    if branch.kind is BranchKind.CURRENT and branch.given is not None:
        return variable(name_of(branch))
    if branch.kind is BranchKind.VOLTAGE and branch.part in known_ports and branch.part in ports:
        return -variable(f"i({branch.part})")
    return None


def port_current_name(branch: Branch) -> str:
    return f"i({branch.name.removeprefix('port/')})"


def current_names(port: Port) -> tuple[str, ...]:
    """The variables of a port's currents, one or one a phase."""
    if port.kind is PortKind.PHASES:
        return tuple(f"i({port.name}/{net})" for net in port.nets)
    return (f"i({port.name})",)


def find_means(unknowns: Unknowns) -> Mapping[str, AffineForm]:
    """The mean current of every branch that Kirchhoff's law fixes.

    Linear in the size of the graph: bridges, then sums over the tree of what they part.
    """
    unknowns = _with_coupling(unknowns)
    graph: nx.MultiGraph[str] = nx.MultiGraph()
    for name, start, end in unknowns.edges:
        graph.add_edge(start, end, key=name)
    for start, end, _ in unknowns.known:
        graph.add_nodes_from((start, end))
    cut = {frozenset(pair) for pair in nx.bridges(graph)}
    solid: nx.Graph[str] = nx.Graph()
    solid.add_nodes_from(graph)
    solid.add_edges_from(
        (a, b) for a, b in graph.edges() if frozenset((a, b)) not in cut and a != b
    )
    block_of = {
        net: index
        for index, block in enumerate(nx.connected_components(solid))
        for net in sorted(block)
    }
    into: dict[int, list[AffineForm]] = {}
    for start, end, form in unknowns.known:
        into.setdefault(block_of[start], []).append(-form)
        into.setdefault(block_of[end], []).append(form)
    tree: nx.Graph[int] = nx.Graph()
    tree.add_nodes_from(block_of.values())
    bridges = [edge for edge in unknowns.edges if frozenset(edge[1:]) in cut]
    tree.add_edges_from((block_of[start], block_of[end]) for _, start, end in bridges)
    return _through_bridges(tree, bridges, block_of.__getitem__, into)


def _with_coupling(unknowns: Unknowns) -> Unknowns:
    """Let a coupling capacitor carry what it alone can, such as an AC load's current.

    Over a switching period a capacitor in series with an AC port passes its current on.
    """
    parts = Unions([])
    for _, start, end in unknowns.edges:
        parts.join(start, end)
    into: dict[Hashable, list[AffineForm]] = {}
    for start, end, form in unknowns.known:
        into.setdefault(parts.root(start), []).append(-form)
        into.setdefault(parts.root(end), []).append(form)
    stuck = {root for root, forms in into.items() if not total_of(forms).is_zero}
    around: dict[Hashable, list[tuple[str, str, str]]] = {root: [] for root in stuck}
    for edge in unknowns.capacitors:
        ends = {parts.root(edge[1]), parts.root(edge[2])}
        for root in ends & stuck if len(ends) == 2 else ():
            around[root].append(edge)
    passing = sorted({edges[0] for edges in around.values() if len(edges) == 1})
    return replace(unknowns, edges=(*unknowns.edges, *passing), capacitors=())


def _through_bridges(
    tree: "nx.Graph[int]",
    bridges: Sequence[tuple[str, str, str]],
    block: Callable[[str], int],
    into: Mapping[int, Sequence[AffineForm]],
) -> dict[str, AffineForm]:
    below: dict[int, AffineForm] = {}
    parent: dict[int, int] = {}
    for component in nx.connected_components(tree):
        root = max(sorted(component), key=tree.degree)
        above = dict(nx.dfs_predecessors(tree, root))
        parent |= above
        for node in reversed(list(nx.dfs_preorder_nodes(tree, root))):
            below[node] = total_of([below.get(node, AffineForm()), *into.get(node, ())])
            if node in above and above[node] != root:
                up = above[node]
                below[up] = below.get(up, AffineForm()) + below[node]
    means: dict[str, AffineForm] = {}
    for name, start, end in bridges:
        if parent.get(block(start)) == block(end):
            means[name] = below[block(start)]
        else:
            means[name] = -below[block(end)]
    return means


def magnetising_means(
    transformers: Sequence[Transformer], means: Mapping[str, AffineForm]
) -> dict[str, AffineForm]:
    """i_m = sum(turns . winding current) / first turns, where every winding's mean is fixed."""
    found = {}
    for core in transformers:
        if all(part in means for part in core.parts):
            forms = [
                means[part].scaled(turns / core.turns[0])
                for part, turns in zip(core.parts, core.turns, strict=True)
            ]
            found[magnetising_name(core)] = total_of(forms)
    return found
