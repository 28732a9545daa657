"""The ends of quantities over all operating points: a grid, then closer around the ends."""

from collections.abc import Callable, Mapping, Sequence

import numpy as np

from rulecheck.demand.waveforms.operating import Space, Values
from rulecheck.demand.waveforms.pieces import Array
from rulecheck.demand.waveforms.records import Corner, Derived
from rulecheck.values import Interval, Unknown

Measure = Callable[[Values], Sequence[Mapping[str, Array]]]
"""Quantities by name at every point; several of them where a pattern is not known."""
_MOST_AROUND = 6
_MOST_SPREAD = 4
"""Corners looked at closer, and with how many quantities that have a range."""
NOWHERE = Unknown(
    "its current", "port voltages and currents that some duty between 0 and 1 balances"
)


def explore(
    space: Space, measure: Measure, missing: tuple[Unknown, ...] = ()
) -> dict[str, Derived]:
    """Every quantity's range and the corners at its ends; points without a balance are left out."""
    ends: dict[tuple[str, bool], tuple[float, Corner]] = {}
    names = _look(space, space.grid(), measure, ends)
    highest = [corner for (_, high), (_, corner) in ends.items() if high]
    corners = list(dict.fromkeys(c for c in highest if space.inside(c)))[:_MOST_AROUND]
    if corners and len(space.spread) <= _MOST_SPREAD:
        _look(space, space.around(corners), measure, ends)
    return {name: _derived(name, ends, missing) for name in names}


def _look(
    space: Space,
    values: Values,
    measure: Measure,
    ends: dict[tuple[str, bool], tuple[float, Corner]],
) -> tuple[str, ...]:
    found = measure(values)
    for name, array in [item for one in found for item in one.items()]:
        count = max((len(values[n]) for n in space.ranges), default=1)
        here = np.broadcast_to(array, (count,))
        if np.isnan(here).all():
            continue
        for high in (False, True):
            index = int(np.nanargmax(here) if high else np.nanargmin(here))
            value = float(here[index])
            best = ends.get((name, high))
            if best is None or (value > best[0] if high else value < best[0]):
                ends[name, high] = value, space.corner(values, index)
    return tuple(dict.fromkeys(name for one in found for name in one))


def _derived(
    name: str, ends: Mapping[tuple[str, bool], tuple[float, Corner]], missing: tuple[Unknown, ...]
) -> Derived:
    if (name, True) not in ends:
        return Derived(NOWHERE, missing=missing)
    low, low_at = ends[name, False]
    high, high_at = ends[name, True]
    return Derived(Interval(low, high), low_at, high_at, missing)
