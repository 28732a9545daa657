"""The voltage that a position withstands: the shortest path through its edges.

    P -Q1- A -Q2- N, both 100 V and the same way round      200 V from P to N, 0 V from N to P
    the same with nobody stating the rating of Q2           at least 100 V, `blocking of Q2` missing

An edge weighs 0 where it conducts freely and its blocking rating otherwise. Ratings in series
add, which assumes that the devices share the voltage.
"""

import heapq
from collections.abc import Iterable, Sequence

from rulecheck.parts import Conduction, Edge
from rulecheck.values import Unknown, natural_key
from rulecheck.values.record import Record

LABELS_PER_NET = 64
"""Chains kept for each net; past it only further names of missing ratings would be found."""


class Chain(Record):
    """A way through the position: known volts, and edges (by index) that have no rating yet."""

    volts: float
    unrated: frozenset[int]
    path: tuple[int, ...]

    def outweighs(self, other: "Chain") -> bool:
        """True where no value of the missing ratings could make the other chain the weaker."""
        return self.volts <= other.volts and self.unrated <= other.unrated


class Blocking(Record):
    holds_off: bool
    volts: float | Unknown
    at_least: float
    missing: tuple[Unknown, ...]
    weakest: tuple[str, ...]


def find_blocking(edges: Sequence[Edge], start: str, end: str) -> Blocking:
    """What the edges withstand of `start` over `end`, in volts.

    Shortest path in which missing ratings stay symbols: of the chains to a net all are kept
    that some value of the missing ratings makes the shortest. The number is known where no
    chain with a missing rating is among those at `end`.
    """
    chains = _weakest_chains(edges, start, end)
    if not chains:
        nothing = Unknown(f"a path from {start} to {end}", "the devices between these nets")
        return Blocking(True, nothing, 0.0, (nothing,), ())
    first = chains[0]
    missing = _missing(edges, chains)
    return Blocking(
        holds_off=all(chain.volts > 0.0 or chain.unrated for chain in chains),
        volts=missing[0] if missing else first.volts,
        at_least=first.volts,
        missing=missing,
        weakest=_names(edges, first),
    )


def _weakest_chains(edges: Sequence[Edge], start: str, end: str) -> list[Chain]:
    """The chains from start to end that may be the weakest, lowest known volts first."""
    leaving: dict[str, list[int]] = {}
    for index, edge in enumerate(edges):
        leaving.setdefault(edge.tail, []).append(index)
    settled: dict[str, list[Chain]] = {}
    waiting = [_entry(Chain(0.0, frozenset(), ()), start)]
    while waiting:
        *_, net, chain = heapq.heappop(waiting)
        known = settled.setdefault(net, [])
        if any(other.outweighs(chain) for other in known):
            continue
        if chain.unrated and len(known) >= LABELS_PER_NET:
            continue
        known.append(chain)
        for index in leaving.get(net, ()) if net != end else ():
            heapq.heappush(waiting, _entry(_longer(chain, index, edges[index]), edges[index].head))
    return settled.get(end, [])


def _entry(chain: Chain, net: str) -> tuple[float, int, int, tuple[int, ...], str, Chain]:
    return (chain.volts, len(chain.unrated), len(chain.path), chain.path, net, chain)


def _longer(chain: Chain, index: int, edge: Edge) -> Chain:
    path = (*chain.path, index)
    if edge.conduction is Conduction.FREE:
        return Chain(chain.volts, chain.unrated, path)
    if isinstance(edge.blocks, Unknown):
        return Chain(chain.volts, chain.unrated | {index}, path)
    return Chain(chain.volts + edge.blocks, chain.unrated, path)


def _missing(edges: Sequence[Edge], chains: Iterable[Chain]) -> tuple[Unknown, ...]:
    ratings = {edges[index].blocks for chain in chains for index in chain.unrated}
    unknown = (rating for rating in ratings if isinstance(rating, Unknown))
    return tuple(sorted(unknown, key=lambda rating: natural_key(rating.what)))


def _names(edges: Sequence[Edge], chain: Chain) -> tuple[str, ...]:
    """The parts that hold the chain's voltage; all of its parts where none holds any."""
    holding = [i for i in chain.path if i in chain.unrated or edges[i].blocks != 0.0]
    holding = [i for i in holding if edges[i].conduction is not Conduction.FREE]
    return tuple(dict.fromkeys(edges[i].part for i in holding or chain.path))
