"""Find the legal states of a group: which combinations of on positions the network allows.

    half-bridge leg, current into its midpoint         {Q1 on}, {Q2 on}
    both on would short the bus, both off would interrupt the inductor

Search is depth-first; a branch is left as soon as the on positions short a voltage.
"""

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass

from rulecheck.demand.equations import Solution, solve_state
from rulecheck.demand.offsets import Offsets
from rulecheck.demand.stiff import Box
from rulecheck.demand.ties import Ties
from rulecheck.demand.topology import Cluster, Link
from rulecheck.values import AffineForm

MOST_POSITIONS = 20
"""A group with more positions is reported as not analysed."""


@dataclass(frozen=True, slots=True)
class Laws:
    """What decides whether a form is zero: the relations of the network and the symmetric sets."""

    ties: Ties
    box: Box

    def vanishes(self, form: AffineForm) -> bool:
        return self.box.is_zero(form) or self.box.is_zero(self.ties.reduced(form))


@dataclass(frozen=True, slots=True)
class RawState:
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
    found = []
    candidates = [link for link in cluster.positions if link.name not in never_on]
    for on in _without_shorts(candidates, laws):
        solution = solve_state(cluster, frozenset(on))
        legal = all(laws.vanishes(form) for form in solution.contradictions)
        if legal and not _idle(on, solution, laws):
            found.append(RawState(on, solution))
    return tuple(found)


def find_connecting_states(cluster: Cluster, laws: Laws) -> tuple[RawState, ...]:
    """States that connect voltages, legal only while these are equal.

    For groups without a stiff current, such as diodes between an AC source and a capacitor.
    """
    found = []
    positions = cluster.positions
    for on in _combinations(positions, lambda chosen: True):
        solution = solve_state(cluster, frozenset(on))
        if any(not laws.vanishes(form) for form in solution.current_contradictions):
            continue
        equal = tuple(f for f in solution.voltage_contradictions if not laws.vanishes(f))
        if len(on) <= 2:
            found.append(RawState(on, solution, equal))
    return tuple(found)


def _idle(on: Sequence[str], solution: Solution, laws: Laws) -> bool:
    return any(laws.vanishes(solution.on_currents[name]) for name in on)


def _without_shorts(candidates: Sequence[Link], laws: Laws) -> Iterator[tuple[str, ...]]:
    def closes_no_short(chosen: Sequence[Link]) -> bool:
        ties = Offsets()
        for link in chosen:
            around = ties.difference(link.start, link.end)
            if around is None:
                ties.tie(link.start, link.end, -link.step)
            elif not laws.vanishes(around + link.step):
                return False
        return True

    return _combinations(candidates, closes_no_short)


def _combinations(
    positions: Sequence[Link], allowed: Callable[[Sequence[Link]], bool]
) -> Iterator[tuple[str, ...]]:
    """Depth-first over on and off; what `allowed` refuses is not followed further."""
    open_ends: list[tuple[int, tuple[Link, ...]]] = [(0, ())]
    while open_ends:
        index, chosen = open_ends.pop()
        if index == len(positions):
            yield tuple(link.name for link in chosen)
            continue
        open_ends.append((index + 1, chosen))
        more = (*chosen, positions[index])
        if allowed(more):
            open_ends.append((index + 1, more))
