"""Compare sibling legs by graph isomorphism, and say in what the odd one out differs.

U: R31 10, C30 680p      V: R39 10, C33 680p      W: R47 22, C36 680p      W differs in R47
"""

from collections import Counter
from collections.abc import Sequence

import networkx as nx

from rulecheck.demand.demands import Bridge, Leg
from rulecheck.demand.neighbourhood import Neighbourhood, Node, neighbourhoods, survey
from rulecheck.demand.siblings import find_sibling_sets
from rulecheck.stage import Stage
from rulecheck.values import natural_key
from rulecheck.values.record import Record

_ROUNDS = 6
_CERTAIN = 400
"""Nodes up to which equal signatures are confirmed by an isomorphism; larger graphs with labels
this rich do not share one by chance."""


class Likeness(Record):
    """How a leg compares with its siblings."""

    leg: Leg
    siblings: tuple[str, ...]
    """Names of the others of its set."""
    alike: bool
    """Power parts and drives are the same in the same places as with most of them."""
    measured_alike: bool
    """So is all else that belongs to it."""
    compared_with: str
    own: tuple[str, ...] = ()
    """Its parts that have no equal in the sibling that it was compared with."""
    theirs: tuple[str, ...] = ()
    """Parts of that sibling that have no equal here."""


def compare_legs(
    stage: Stage, legs: Sequence[Leg], bridges: Sequence[Bridge]
) -> tuple[Likeness, ...]:
    """One record for each leg that has siblings."""
    around = survey(stage, legs)
    sets = find_sibling_sets(stage, legs, bridges)
    compared = [_signed(neighbourhoods(stage, around, siblings)) for siblings in sets]
    seen = Counter(signed.main for group in compared for signed in group)
    return tuple(
        likeness
        for siblings, group in zip(sets, compared, strict=True)
        for likeness in _compared(siblings.legs, group, seen)
    )


class _Signed(Record):
    """A neighbourhood with the signatures of its graphs."""

    around: Neighbourhood
    main: str
    whole: str


def _signed(found: Sequence[Neighbourhood]) -> list[_Signed]:
    return [_Signed(a, _signature(a.main), _signature(a.whole)) for a in found]


def _signature(graph: "nx.Graph[Node]") -> str:
    """Equal for graphs that are isomorphic with all labels (Weisfeiler and Leman)."""
    return str(nx.weisfeiler_lehman_graph_hash(graph, node_attr="label", iterations=_ROUNDS))


def _compared(legs: Sequence[Leg], signed: Sequence[_Signed], seen: Counter[str]) -> list[Likeness]:
    mains, wholes = [a.around.main for a in signed], [a.around.whole for a in signed]
    kinds = _classes(mains, [a.main for a in signed])
    whole_kinds = _classes(wholes, [a.whole for a in signed])
    elsewhere = [seen[a.main] for a in signed]
    typical = _typical(legs, kinds, elsewhere)
    measured = _typical(legs, whole_kinds, elsewhere)
    found = []
    for index, leg in enumerate(legs):
        others = tuple(other.name for k, other in enumerate(legs) if k != index)
        alike = kinds[index] == kinds[typical]
        all_alike = alike and whole_kinds[index] == whole_kinds[measured]
        graphs, like = (wholes, measured) if alike else (mains, typical)
        own, theirs = ((), ()) if all_alike else _differences(graphs[index], graphs[like])
        found.append(Likeness(leg, others, alike, all_alike, legs[like].name, own, theirs))
    return found


def _typical(legs: Sequence[Leg], kinds: Sequence[int], elsewhere: Sequence[int]) -> int:
    """Most of the set decide; of equally many what is built so elsewhere in the stage, too; and
    where nothing tells which of two is meant, the first leg in natural order is the measure."""
    counts = Counter(kinds)

    def rank(index: int) -> tuple[object, ...]:
        return -counts[kinds[index]], -elsewhere[index], natural_key(legs[index].name)

    return min(range(len(legs)), key=rank)


def _classes(graphs: "Sequence[nx.Graph[Node]]", signatures: Sequence[str]) -> list[int]:
    """The same number for graphs that are isomorphic with all labels."""
    classes: list[int] = []
    for index, graph in enumerate(graphs):
        same = (
            classes[k]
            for k in range(index)
            if signatures[k] == signatures[index] and _isomorphic(graphs[k], graph)
        )
        classes.append(next(same, index))
    return classes


def _isomorphic(first: "nx.Graph[Node]", second: "nx.Graph[Node]") -> bool:
    if len(first) > _CERTAIN:
        return True
    return bool(nx.vf2pp_is_isomorphic(first, second, node_label="label"))


def _differences(
    odd: "nx.Graph[Node]", typical: "nx.Graph[Node]"
) -> tuple[tuple[str, ...], tuple[str, ...]]:
    """Parts without an equal, by their own label first, then by ever wider surroundings."""
    wider = [
        nx.weisfeiler_lehman_subgraph_hashes(
            graph, node_attr="label", iterations=_ROUNDS, include_initial_labels=True
        )
        for graph in (odd, typical)
    ]
    for depth in range(_ROUNDS + 1):
        at = [
            {node[1]: hashes[node][depth] for node in hashes if node[0] == "part"}
            for hashes in wider
        ]
        own, theirs = _unmatched(at[0], at[1]), _unmatched(at[1], at[0])
        if own or theirs:
            return own, theirs
    return (), ()


def _unmatched(here: dict[str, str], there: dict[str, str]) -> tuple[str, ...]:
    left = Counter(there.values())
    found = []
    for name in sorted(here, key=natural_key):
        if left[here[name]] > 0:
            left[here[name]] -= 1
        else:
            found.append(name)
    return tuple(found)
