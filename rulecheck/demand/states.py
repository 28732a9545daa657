"""Find the legal states of a group: which combinations of on positions the network allows.

    half-bridge leg, current into its midpoint         {Q1 on}, {Q2 on}
    both on would short the bus, both off would interrupt the inductor

Search is depth-first; a branch is left as soon as the on positions short a voltage.
"""

from collections.abc import Iterator, Sequence
from itertools import combinations

from rulecheck.demand.equations import Solution, solve_state
from rulecheck.demand.offsets import Offsets
from rulecheck.demand.stiff import Box
from rulecheck.demand.ties import Ties
from rulecheck.demand.topology import Cluster, Link
from rulecheck.values import AffineForm
from rulecheck.values.record import Record

MOST_POSITIONS = 20
"""A group with more positions is reported as not analysed."""


class Laws(Record):
    """What decides whether a form is zero: the relations of the network and the symmetric sets."""

    ties: Ties
    box: Box

    def vanishes(self, form: AffineForm) -> bool:
        return self.box.is_zero(form) or self.box.is_zero(self.ties.reduced(form))


class RawState(Record):
    """A legal combination with its forms, before the variables' ranges are looked at."""

    on: tuple[str, ...]
    solution: Solution
    equal: tuple[AffineForm, ...] = ()
    """Forms that must be zero in this state: voltages that it connects."""


def find_states(
    cluster: Cluster, laws: Laws, never_on: frozenset[str] = frozenset()
) -> tuple[RawState, ...]:
    """All legal, not idle states, in the order of the positions.

    `never_on` names diodes that only carry charging pulses, which no state shows.
    """
    candidates = [link for link in cluster.positions if link.name not in never_on]
    found = []
    for on in _worth_solving(candidates, cluster, laws):
        solution = solve_state(cluster, frozenset(on), laws.vanishes)
        if not solution.contradictions and not _idle(on, solution, laws):
            found.append(RawState(on, solution))
    return tuple(found)


def find_connecting_states(cluster: Cluster, laws: Laws) -> tuple[RawState, ...]:
    """States that connect voltages, legal only while these are equal.

    For groups without a stiff current, such as diodes between an AC source and a capacitor; at
    most two positions conduct at a time.
    """
    found = []
    names = [link.name for link in cluster.positions]
    for count in range(3):
        for on in combinations(names, count):
            solution = solve_state(cluster, frozenset(on), laws.vanishes)
            if not solution.current_contradictions:
                found.append(RawState(on, solution, solution.voltage_contradictions))
    return tuple(found)


def _idle(on: Sequence[str], solution: Solution, laws: Laws) -> bool:
    return any(laws.vanishes(solution.on_currents[name]) for name in on)


def _worth_solving(
    candidates: Sequence[Link], cluster: Cluster, laws: Laws
) -> Iterator[tuple[str, ...]]:
    """Depth-first over on and off, left where a voltage is shorted or a current cut off."""
    cuts = _current_nodes(candidates, cluster, laws)
    open_ends: list[tuple[int, tuple[Link, ...]]] = [(0, ())]
    while open_ends:
        index, chosen = open_ends.pop()
        if index == len(candidates):
            yield tuple(link.name for link in chosen)
            continue
        on = {link.name for link in chosen}
        if not any(last == index and not around & on for last, around in cuts):
            open_ends.append((index + 1, chosen))
        more = (*chosen, candidates[index])
        if _closes_no_short(more, laws):
            open_ends.append((index + 1, more))


def _current_nodes(
    candidates: Sequence[Link], cluster: Cluster, laws: Laws
) -> list[tuple[int, frozenset[str]]]:
    """For islands that a stiff current enters and only positions leave: the last of these in the
    order of the search, and all of them; one must be on."""
    order = {link.name: k for k, link in enumerate(candidates)}
    found = []
    for island, form in cluster.into.items():
        around = [link for link in cluster.links if island in (link.start, link.end)]
        if laws.vanishes(form) or not all(link.position is not None for link in around):
            continue
        names = frozenset(link.name for link in around if link.name in order)
        if names:
            found.append((max(order[name] for name in names), names))
    return found


def _closes_no_short(chosen: Sequence[Link], laws: Laws) -> bool:
    ties = Offsets()
    for link in chosen:
        around = ties.difference(link.start, link.end)
        if around is None:
            ties.tie(link.start, link.end, -link.step)
        elif not laws.vanishes(around + link.step):
            return False
    return True
