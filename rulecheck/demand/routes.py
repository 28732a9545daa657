"""How a current branch's voltage is made up: the groups between its ends, in order.

L1 from SW to BAT        v(L1) = [SW over PGND, from leg SW] - v(battery)
"""

from collections.abc import Mapping, Sequence

import networkx as nx

from rulecheck.demand.topology import Node, Topology, magnetising_name
from rulecheck.demand.voltages import name_of
from rulecheck.stage import Branch, BranchKind, Port, PortKind, Transformer
from rulecheck.values import AffineForm
from rulecheck.values.record import Record, replace


class Carrier(Record):
    """A stiff current whose voltage the states decide."""

    name: str
    """Its variable."""
    start: str
    end: str
    inductance: float | None
    part: str
    port: str
    feeds: str = ""
    """Of a DC port: `draws` or `supplies`, the way in which it handles power."""


class Step(Record):
    """Through one cluster, from island `enter` to island `leave`."""

    cluster: int
    enter: str
    leave: str
    weight: float = 1.0


class Route(Record):
    """The carrier's voltage: a fixed form and the potential steps of clusters."""

    fixed: AffineForm
    steps: tuple[Step, ...]
    floating: bool = False
    """True where only other carriers tie the two sides, so that the offset is their mean."""


def find_carriers(
    branches: Sequence[Branch], transformers: Sequence[Transformer], ports: Sequence[Port]
) -> tuple[Carrier, ...]:
    feeds = {
        port.name: "draws" if port.draws else "supplies"
        for port in ports
        if port.kind is PortKind.DC
    }
    found = [
        Carrier(name_of(b), b.start, b.end, b.value, b.part, b.port, feeds.get(b.port, ""))
        for b in branches
        if b.kind is BranchKind.CURRENT
    ]
    for core in transformers:
        if core.ideal:
            continue
        start, end = core.windings[0]
        found.append(
            Carrier(magnetising_name(core), start, end, core.magnetising, core.parts[0], "")
        )
    return tuple(found)


class _Forest:
    """Parents and depths of the forest of islands and clusters, so that paths cost their length."""

    def __init__(self, forest: "nx.Graph[Node]") -> None:
        self.parent: dict[object, object] = {}
        self.depth: dict[object, int] = {}
        self.tree: dict[object, object] = {}
        for component in nx.connected_components(forest):
            root = max(sorted(n for n in component if isinstance(n, str)), key=forest.degree)
            self.depth[root], self.tree[root] = 0, root
            for above, node in nx.dfs_edges(forest, root):
                self.parent[node] = above
                self.depth[node] = self.depth[above] + 1
                self.tree[node] = root

    def path(self, first: object, second: object) -> list[object]:
        head, tail = [first], [second]
        while head[-1] != tail[-1]:
            longer = head if self.depth[head[-1]] >= self.depth[tail[-1]] else tail
            longer.append(self.parent[longer[-1]])
        return head + tail[-2::-1]


def find_routes(
    carriers: Sequence[Carrier], topology: Topology
) -> tuple[tuple[Carrier, Route], ...]:
    forest = _Forest(topology.forest)
    rigid = topology.rigid
    routes: dict[str, Route] = {}
    apart: dict[tuple[str, str], list[Carrier]] = {}
    for carrier in carriers:
        start, end = rigid.root(carrier.start), rigid.root(carrier.end)
        sides = (str(forest.tree.get(start, start)), str(forest.tree.get(end, end)))
        if sides[0] == sides[1]:
            fixed = rigid.offset(carrier.start) - rigid.offset(carrier.end)
            routes[carrier.name] = Route(fixed, _steps(forest, start, end))
        elif sides[0] < sides[1]:
            apart.setdefault(sides, []).append(carrier)
        else:
            apart.setdefault((sides[1], sides[0]), []).append(_turned(carrier))
    turned = {c.name for bundle in apart.values() for c in bundle if c not in carriers}
    for bundle in apart.values():
        if _settles(bundle):
            routes |= _floating_routes(bundle, forest, topology)
    return tuple(
        (c, _negated(routes[c.name]) if c.name in turned else routes[c.name])
        for c in carriers
        if c.name in routes
    )


def _settles(bundle: Sequence[Carrier]) -> bool:
    """False where a current port takes part with others: its own voltage gives way freely."""
    ports = {carrier.port for carrier in bundle}
    return ports == {""} or len(ports) == 1


def _turned(carrier: Carrier) -> Carrier:
    return replace(carrier, start=carrier.end, end=carrier.start)


def _negated(route: Route) -> Route:
    steps = tuple(replace(step, weight=-step.weight) for step in route.steps)
    return replace(route, fixed=-route.fixed, steps=steps)


def _steps(forest: _Forest, start: str, end: str, weight: float = 1.0) -> tuple[Step, ...]:
    path = forest.path(start, end)
    return tuple(
        Step(node, str(path[i - 1]), str(path[i + 1]), weight)
        for i, node in enumerate(path)
        if isinstance(node, int)
    )


def _floating_routes(
    bundle: Sequence[Carrier], forest: _Forest, topology: Topology
) -> Mapping[str, Route]:
    """Carriers that alone tie two sides: the floating side settles so that their voltages sum to
    zero, so each sees its own difference less the mean of all."""
    rigid = topology.rigid
    count = len(bundle)
    fixed: dict[str, AffineForm] = {}
    steps: dict[str, tuple[Step, ...]] = {}
    first = bundle[0]
    for carrier in bundle:
        fixed[carrier.name] = (
            rigid.offset(carrier.start)
            - rigid.offset(carrier.end)
            - rigid.offset(first.start)
            + rigid.offset(first.end)
        )
        near = _steps(forest, rigid.root(carrier.start), rigid.root(first.start))
        far = _steps(forest, rigid.root(first.end), rigid.root(carrier.end))
        steps[carrier.name] = near + far
    routes = {}
    for carrier in bundle:
        total, parts = AffineForm(), []
        for other in bundle:
            weight = (1.0 if other is carrier else 0.0) - 1.0 / count
            total += fixed[other.name].scaled(weight)
            parts += [
                Step(s.cluster, s.enter, s.leave, s.weight * weight) for s in steps[other.name]
            ]
        routes[carrier.name] = Route(total, _summed(parts), floating=True)
    return routes


def _summed(steps: Sequence[Step]) -> tuple[Step, ...]:
    weights: dict[tuple[int, str, str], float] = {}
    for step in steps:
        turned = step.enter > step.leave
        ends = (step.leave, step.enter) if turned else (step.enter, step.leave)
        key = (step.cluster, *ends)
        weights[key] = weights.get(key, 0.0) + (-step.weight if turned else step.weight)
    return tuple(
        Step(cluster, enter, leave, weight)
        for (cluster, enter, leave), weight in weights.items()
        if abs(weight) > 1e-12
    )
