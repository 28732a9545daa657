"""Volt-second balance of all inductances of a group at once.

Each carrier alone may see both signs of voltage, and yet no sharing of the period among the
states may bring all means to zero together: a rectifier transistor drawn drain for source leaves
a transformer polarity that cannot feed the coil. The means can be zero exactly where zero lies in
the convex hull of the states' voltage vectors; by Caratheodory's theorem one state more than
there are carriers is enough to show it.
"""

import math
from collections.abc import Hashable, Iterator, Mapping, Sequence
from itertools import combinations, product

import numpy as np
import numpy.typing as npt

from rulecheck.demand.readings import Failure, Reading, across, feasible
from rulecheck.demand.routes import Carrier, Route
from rulecheck.demand.sign_cases import Case
from rulecheck.demand.states import RawState
from rulecheck.demand.stiff import Box
from rulecheck.demand.unions import Unions
from rulecheck.values import AffineForm, total_of

Vectors = npt.NDArray[np.float64]
_MOST_MIXTURES = 300
_MOST_VECTORS = 16
_MOST_CARRIERS = 4
_SHARE = 1e-6


def unbalanced(
    reading: Reading,
    routes: Sequence[tuple[Carrier, Route]],
    box: Box,
    cases: Mapping[str, Sequence[Case]],
) -> list[Failure]:
    """Groups of which no sharing of the period balances all carriers, in some required case."""
    switched = [(c, r) for c, r in routes if c.part and r.steps and not r.floating]
    sets = [frozenset(step.cluster for step in route.steps) for _, route in switched]
    found = []
    for clusters in _united(sets):
        mine = [item for item, own in zip(switched, sets, strict=True) if own <= clusters]
        if 2 <= len(mine) <= _MOST_CARRIERS:
            found += _unbalanced_in(reading, sorted(clusters), mine, box, cases[mine[0][0].name])
    return found


def _united(sets: Sequence[frozenset[int]]) -> list[frozenset[int]]:
    """The sets, those that share a member made one."""
    parent = Unions([])
    for own in sets:
        first, *others = sorted(own)
        for other in others:
            parent.join(first, other)
    classes: dict[Hashable, set[int]] = {}
    for index in sorted(frozenset().union(*sets)):
        classes.setdefault(parent.root(index), set()).add(index)
    return [frozenset(members) for members in classes.values()]


def _unbalanced_in(
    reading: Reading,
    clusters: Sequence[int],
    mine: Sequence[tuple[Carrier, Route]],
    box: Box,
    cases: Sequence[Case],
) -> list[Failure]:
    failing = []
    for case in cases:
        narrow = case.narrow(box)
        options = [[state for state, _ in feasible(reading, k, narrow)] for k in clusters]
        if math.prod(len(states) for states in options) > _MOST_MIXTURES:
            return []
        forms = [
            [_voltage(route, dict(zip(clusters, mixture, strict=True))) for _, route in mine]
            for mixture in product(*options)
        ]
        if forms and not _can_balance(forms, narrow):
            failing.append(case)
    if not failing:
        return []
    together = " and ".join(carrier.name for carrier, _ in mine)
    why = f"no sharing of the period among the states balances {together} together"
    always = len(failing) == len(cases)
    return [Failure(mine[0][0], failing[0], tuple(clusters), why, always)]


def _voltage(route: Route, states: Mapping[int, RawState]) -> AffineForm:
    return total_of([route.fixed, *(across(step, states[step.cluster]) for step in route.steps)])


def _can_balance(forms: Sequence[Sequence[AffineForm]], box: Box) -> bool:
    names = sorted({n for row in forms for form in row for n in form.names})
    if any(not box.ranges[name].bounded for name in names):
        return True
    weights = np.array([[[dict(f.terms).get(n, 0.0) for n in names] for f in row] for row in forms])
    return any(_holds_zero(weights @ point) for point in _samples(box, names))


def _samples(box: Box, names: Sequence[str]) -> Iterator[Vectors]:
    """Points of the box: its middle, then its ends in every mixture of the first few variables."""
    low = np.array([box.ranges[n].low for n in names])
    high = np.array([box.ranges[n].high for n in names])
    yield (low + high) / 2
    count = min(len(names), 4)
    for mixture in range(2**count):
        ends = np.array([(mixture >> min(k, count - 1)) & 1 for k in range(len(names))])
        yield low + (high - low) * ends
    yield low + (high - low) * 0.25
    yield low + (high - low) * 0.75


def _holds_zero(vectors: Vectors) -> bool:
    """True where zero is a mean of the vectors with shares that are not negative.

    Of very many different vectors it is taken for true.
    """
    scale = float(np.abs(vectors).max(initial=0.0)) or 1.0
    vectors = np.unique(np.round(vectors / scale, 9), axis=0)
    count, carriers = vectors.shape
    if count > _MOST_VECTORS:
        return True
    goal = np.zeros(carriers + 1)
    goal[-1] = 1.0
    for size in range(1, min(carriers + 1, count) + 1):
        for chosen in combinations(range(count), size):
            rows = np.vstack([vectors[list(chosen)].T, np.ones(size)])
            shares, *_ = np.linalg.lstsq(rows, goal, rcond=None)
            if (shares > -_SHARE).all() and np.abs(rows @ shares - goal).max() < _SHARE:
                return True
    return False
