"""What belongs to each of several sibling legs: its devices and all that only it leads to.

From each leg's devices the search goes outwards, part by part, all legs in step; what two legs
reach at once, and nets that serve all, are shared and belong to none. The result is a labelled
graph of parts, pins and nets, in which shared nets keep their names and own ones have none.
"""

import re
from collections.abc import Iterable, Mapping, Sequence

import networkx as nx

from rulecheck.demand.demands import Leg
from rulecheck.demand.siblings import SHARED_KINDS, SiblingSet
from rulecheck.parts import Kind, Part
from rulecheck.stage import Role, Stage
from rulecheck.values import Interval, Unknown
from rulecheck.values.record import Record

_CROWDED = 12
"""Pins from which a net is taken to serve all: a supply or a ground."""
_EITHER_WAY = frozenset({Kind.RESISTOR, Kind.CAPACITOR, Kind.INDUCTOR, Kind.FUSE, Kind.NTC})
_DRIVES = frozenset({Kind.DRIVER, Kind.ISOLATOR})
_WORKING = frozenset(
    {Role.SWITCH, Role.SNUBBER, Role.CLAMP, Role.BULK_CAPACITOR, Role.INDUCTOR, Role.WINDING}
    | {Role.SOURCE, Role.LOAD, Role.GATE_DRIVE, Role.BOOTSTRAP, Role.SHARING}
)
_LABEL = "label"
_CHANNEL = re.compile(r"(?:\d+|-[a-d])$")
Node = tuple[str, str]


class Surroundings(Record):
    """Indexes of the whole circuit that every search uses."""

    parts: Mapping[str, Part]
    at: Mapping[str, tuple[str, ...]]
    """By net as written: the parts on it."""
    hubs: frozenset[str]
    """Nets that serve all."""
    midpoints: frozenset[str]
    """Those of all legs, as written."""


def survey(stage: Stage, legs: Sequence[Leg]) -> Surroundings:
    at: dict[str, dict[str, None]] = {}
    supplied: dict[str, int] = {}
    for part in stage.parts.parts:
        for pin in part.pins:
            at.setdefault(pin.net, {})[part.name] = None
            if pin.role.startswith(("supply", "ground")):
                supplied[pin.net] = supplied.get(pin.net, 0) + 1
    rails = {net for leg in legs for net in leg.rails}
    ports = {net for port in stage.ports for net in (*port.nets, *port.named_nets)}
    crowded = {net for net, names in at.items() if len(names) >= _CROWDED}
    hubs = rails | ports | crowded | {net for net, count in supplied.items() if count > 1}
    hubs |= {stage.parts.ground, *stage.parts.grounds}
    named = {net: tuple(names) for net, names in at.items()}
    middles = {leg.midpoint for leg in legs}
    midpoints = frozenset(net for net in at if stage.merged.get(net, net) in middles)
    parts = {part.name: part for part in stage.parts.parts}
    return Surroundings(parts, named, frozenset(hubs), midpoints)


class Neighbourhood(Record):
    """What belongs to one leg: its power and drive parts, and all with what measures as well."""

    main: "nx.Graph[Node]"
    whole: "nx.Graph[Node]"


def neighbourhoods(
    stage: Stage, around: Surroundings, siblings: SiblingSet
) -> tuple[Neighbourhood, ...]:
    """One for each leg, in the order of the set."""
    owned = _owned_parts(stage, around, siblings)
    reached = [{net for name in names for net in around.parts[name].nets} for names in owned]
    common = set.intersection(*reached) if reached else set()
    found = []
    for leg, names in zip(siblings.legs, owned, strict=True):
        main = [name for name in names if _does_the_work(stage, around.parts[name])]
        graphs = (_graph(stage, around, leg, chosen, common) for chosen in (main, names))
        found.append(Neighbourhood(*graphs))
    return tuple(found)


def _does_the_work(stage: Stage, part: Part) -> bool:
    """It carries or guards power, or drives a gate; what is left measures or feeds a circuit."""
    return part.kind in _DRIVES or stage.roles.get(part.name) in _WORKING


def _owned_parts(stage: Stage, around: Surroundings, siblings: SiblingSet) -> list[list[str]]:
    positions = {position.name: position.parts for position in stage.positions}
    owner: dict[Node, int | None] = {}
    frontier: list[list[Node]] = []
    for number, leg in enumerate(siblings.legs):
        names = [n for p in (*leg.high, *leg.low, *leg.others) for n in positions.get(p, ())]
        start: list[Node] = [("part", name) for name in dict.fromkeys(names)]
        owner.update((node, number) for node in start)
        frontier.append(start)
    midpoints = {net for leg in siblings.legs for net in _written(stage, around, leg.midpoint)}
    closed = around.hubs | around.midpoints
    closed -= midpoints if siblings.onward else set()
    while any(frontier):
        frontier = _step(around, closed, owner, frontier)
    owned: list[list[str]] = [[] for _ in siblings.legs]
    for (what, name), index in owner.items():
        if what == "part" and index is not None:
            owned[index].append(name)
    if siblings.own_rails:
        _add_across(stage, around, siblings.legs, owned)
    return [sorted(names) for names in owned]


def _written(stage: Stage, around: Surroundings, merged: str) -> list[str]:
    return [net for net in around.at if stage.merged.get(net, net) == merged]


def _step(
    around: Surroundings,
    closed: frozenset[str],
    owner: dict[Node, int | None],
    frontier: Sequence[Sequence[Node]],
) -> list[list[Node]]:
    """All legs go one step on; what two of them reach in this step belongs to none."""
    wanted: dict[Node, set[int]] = {}
    for index, nodes in enumerate(frontier):
        for node in nodes:
            for other in _next_to(around, closed, node):
                if other not in owner:
                    wanted.setdefault(other, set()).add(index)
    following: list[list[Node]] = [[] for _ in frontier]
    for node, indexes in wanted.items():
        owner[node] = next(iter(indexes)) if len(indexes) == 1 else None
        if len(indexes) == 1:
            following[next(iter(indexes))].append(node)
    return following


def _next_to(around: Surroundings, closed: frozenset[str], node: Node) -> Iterable[Node]:
    what, name = node
    if what == "part":
        return [("net", net) for net in around.parts[name].nets if net not in closed]
    at = around.at.get(name, ())
    return [("part", part) for part in at if around.parts[part].kind not in SHARED_KINDS]


def _add_across(
    stage: Stage, around: Surroundings, legs: Sequence[Leg], owned: list[list[str]]
) -> None:
    """What stands between a leg's own rails and midpoint."""
    for leg, names in zip(legs, owned, strict=True):
        own = {leg.midpoint, *leg.rails}
        near = {p for net in own for n in _written(stage, around, net) for p in around.at[n]}
        for name in sorted(near - set(names)):
            part = around.parts[name]
            ends = {stage.merged.get(net, net) for net in part.nets}
            if len(ends) > 1 and ends <= own and part.kind not in SHARED_KINDS:
                names.append(name)


def _graph(
    stage: Stage, around: Surroundings, leg: Leg, names: Sequence[str], common: set[str]
) -> "nx.Graph[Node]":
    graph: nx.Graph[Node] = nx.Graph()
    for name in names:
        part = around.parts[name]
        graph.add_node(("part", name), **{_LABEL: label_of(part)})
        for index, pin in enumerate(part.pins):
            pin_node = ("pin", f"{name}/{index}")
            graph.add_node(pin_node, **{_LABEL: _pin_label(part, pin.role)})
            label = _net_label(stage, around, leg, pin.net, common)
            graph.add_node(("net", pin.net), **{_LABEL: label})
            graph.add_edge(("part", name), pin_node)
            graph.add_edge(pin_node, ("net", pin.net))
    return graph


def _pin_label(part: Part, role: str) -> str:
    """Channels of one circuit, `in1` and `in2` or `output-a` and `output-b`, are alike."""
    return "pin" if part.kind in _EITHER_WAY else _CHANNEL.sub("", role)


def label_of(part: Part) -> str:
    """Kind, value or model, and what is stated: what makes two parts the same in a parts list."""
    behind = part.text.partition(" ")[2].casefold()
    value = (
        part.text.casefold() if isinstance(part.value, Unknown) else f"{part.value:.6g} {behind}"
    )
    stated = ",".join(f"{path}={_number(d.value)}" for path, d in sorted(part.data.items()))
    return f"{part.kind} {value} {stated} {part.multiplicity:g}"


def _number(value: float | Interval) -> str:
    return f"{value.low:.6g}~{value.high:.6g}" if isinstance(value, Interval) else f"{value:.6g}"


def _net_label(stage: Stage, around: Surroundings, leg: Leg, net: str, common: set[str]) -> str:
    """A rail by its place, a shared net by its name, an own net by nothing."""
    merged = stage.merged.get(net, net)
    if net == leg.rails[0] or net == leg.rails[-1]:
        return "high rail" if net == leg.rails[0] else "low rail"
    if merged == leg.midpoint:
        return "midpoint"
    return f"shared {net}" if net in common else "net"
