"""Which legs do the same job side by side: phases, interleaved legs, cells in series.

L1 BAT1 SW1, L2 BAT2 SW2 from one bank, rails BUS and PGND       SW1 and SW2 are siblings
a bridge of three legs                                           its three legs are
a chain of cells, one's midpoint on the next one's rail          all its cells are
"""

from collections.abc import Iterator, Mapping, Sequence
from itertools import combinations

import networkx as nx

from rulecheck.demand.demands import Bridge, Leg
from rulecheck.parts import Kind
from rulecheck.stage import BranchKind, Stage
from rulecheck.values.record import Record


class SiblingSet(Record):
    """Legs that should be built alike; `onward` says whether what follows their midpoints should.

    The two legs of an H-bridge and the cells of a chain are alike in themselves, but what is
    connected to their midpoints need not be.
    """

    legs: tuple[Leg, ...]
    onward: bool
    own_rails: bool
    """Each has rails of its own, so that what stands across them belongs to it."""


def find_sibling_sets(
    stage: Stage, legs: Sequence[Leg], bridges: Sequence[Bridge]
) -> tuple[SiblingSet, ...]:
    """Sets of two legs or more; each leg is in at most one. Linear in the legs of one net."""
    found = [*_phases(legs, bridges), *_side_by_side(stage, legs), *_cells(legs)]
    found += _halves(stage, legs, bridges)
    taken: set[int] = set()
    kept = []
    for siblings in found:
        if len(siblings.legs) > 1 and not taken & {id(leg) for leg in siblings.legs}:
            taken |= {id(leg) for leg in siblings.legs}
            kept.append(siblings)
    return tuple(kept)


def _phases(legs: Sequence[Leg], bridges: Sequence[Bridge]) -> Iterator[SiblingSet]:
    for bridge in bridges:
        if len(bridge.legs) > 2:
            rails = [leg.rails for leg in legs if leg.name in bridge.legs]
            mine = tuple(leg for leg in legs if leg.name in bridge.legs and leg.rails == rails[0])
            yield SiblingSet(mine, onward=True, own_rails=False)


def _side_by_side(stage: Stage, legs: Sequence[Leg]) -> Iterator[SiblingSet]:
    """Legs on the same rails whose inductors meet at one net."""
    behind: dict[str, set[str]] = {}
    for branch in stage.branches:
        if branch.kind is BranchKind.CURRENT and branch.part:
            behind.setdefault(branch.start, set()).add(branch.end)
            behind.setdefault(branch.end, set()).add(branch.start)
    groups: dict[tuple[str, tuple[str, ...], str], list[Leg]] = {}
    for leg in legs:
        for net in sorted(behind.get(leg.midpoint, ())):
            groups.setdefault((leg.kind, leg.rails, net), []).append(leg)
    for group in groups.values():
        yield SiblingSet(tuple(group), onward=True, own_rails=False)


def _cells(legs: Sequence[Leg]) -> Iterator[SiblingSet]:
    """Legs of one kind, linked where a midpoint is another's midpoint or rail; rails differ."""
    links: nx.Graph[int] = nx.Graph()
    links.add_nodes_from(range(len(legs)))
    at: dict[str, list[int]] = {}
    for index, leg in enumerate(legs):
        for net in (leg.midpoint, *leg.rails):
            at.setdefault(net, []).append(index)
    for index, leg in enumerate(legs):
        links.add_edges_from(
            (index, other) for other in at[leg.midpoint] if _series(leg, legs[other])
        )
    for indexes in nx.connected_components(links):
        group = tuple(legs[index] for index in sorted(indexes))
        if len({leg.rails for leg in group}) > 1:
            yield SiblingSet(group, onward=False, own_rails=True)


def _series(first: Leg, second: Leg) -> bool:
    return first.kind == second.kind and first.rails != second.rails


def _halves(stage: Stage, legs: Sequence[Leg], bridges: Sequence[Bridge]) -> Iterator[SiblingSet]:
    """The two legs of an H-bridge, unless it has a slow and a fast one on purpose."""
    models = _models(stage)
    for bridge in bridges:
        mine = tuple(leg for leg in legs if leg.name in bridge.legs)
        alike = all(_of(models, a) == _of(models, b) for a, b in combinations(mine, 2))
        if len(bridge.legs) == 2 and alike and len({leg.kind for leg in mine}) == 1:
            yield SiblingSet(mine, onward=False, own_rails=False)


def _models(stage: Stage) -> Mapping[str, frozenset[str]]:
    parts = stage.parts.by_name
    return {
        position.name: frozenset(parts[n].text.casefold() for n in position.parts if parts[n].gated)
        for position in stage.positions
    }


def _of(models: Mapping[str, frozenset[str]], leg: Leg) -> frozenset[str]:
    return frozenset().union(*(models[name] for name in (*leg.high, *leg.low, *leg.others)))


SHARED_KINDS = frozenset({Kind.CONTROLLER, Kind.CONNECTOR, Kind.UNKNOWN, Kind.WINDING_SET})
"""Kinds that serve several legs at once, so that their pins say nothing of one."""
