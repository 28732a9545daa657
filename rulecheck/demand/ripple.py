"""Ripple of an inductor's current from the states that it sees.

di = v1 d / (L f), with d from volt-second balance of the two neighbouring levels v1 > 0 > -v2:
di = v1 v2 / ((v1 + v2) L f). Mohan, Undeland and Robbins, Power Electronics, ch. 7 (from
memory). For a two-level leg its maximum is V / (4 L f).
"""

import math
from collections.abc import Mapping, Sequence
from itertools import product

import numpy as np
import numpy.typing as npt

from rulecheck.demand.readings import Reading, feasible
from rulecheck.demand.routes import Route, Step
from rulecheck.demand.stiff import Box
from rulecheck.values import AffineForm, total_of, variable
from rulecheck.values.record import Record

_MOST_COMBINATIONS = 64
_MOST_POINTS = 20000
Grid = npt.NDArray[np.float64]


class Level(Record):
    """A voltage that the inductor can see, and the gates that make it."""

    form: AffineForm
    gates: tuple[str, ...]


def swing(
    reading: Reading, route: Route, boxes: Sequence[Box], slow: frozenset[int] = frozenset()
) -> float:
    """The largest v1 v2 / (v1 + v2), in volts, over the boxes; di is this over L f.

    Through several groups every mixture of their states is taken to follow every other, which
    bounds all modulations; through one group neighbouring levels follow each other. `slow` are
    the steps of the route that keep their state within a switching period.
    """
    if route.floating:
        return max((_own_leg_swing(reading, route, box) for box in boxes), default=0.0)
    return max((_swing_in(reading, route, box, slow) for box in boxes), default=0.0)


def open_voltages(reading: Reading, route: Route, boxes: Sequence[Box]) -> tuple[str, ...]:
    """The variables in the levels that the carrier sees whose magnitude nobody knows."""
    return tuple(sorted({name for box in boxes for name in _open_in(reading, route, box)}))


def _open_in(reading: Reading, route: Route, box: Box) -> set[str]:
    names = {n for form in levels_seen(reading, route, box) for n in form.names}
    return {name for name in names if not box.range_of(variable(name)).bounded}


def levels_seen(reading: Reading, route: Route, box: Box) -> frozenset[AffineForm]:
    """The different voltages that the carrier sees over the states that the box leaves."""
    choices = [_levels(reading, step, box) for step in route.steps]
    return frozenset(level.form for level in _combined(route.fixed, choices))


def _own_leg_swing(reading: Reading, route: Route, box: Box) -> float:
    """With a floating star each carrier's own leg moves it by the leg's span: span / 4 at most."""
    own = max(route.steps, key=lambda step: abs(step.weight), default=None)
    if own is None:
        return 0.0
    ends: list[float] = []
    for state, narrowed in feasible(reading, own.cluster, box):
        potentials = state.solution.potentials
        span = narrowed.range_of(potentials[own.enter] - potentials[own.leave])
        ends += [span.low, span.high]
    return (max(ends) - min(ends)) / 4 if ends and np.isfinite(ends).all() else 0.0


def _swing_in(reading: Reading, route: Route, box: Box, slow: frozenset[int]) -> float:
    choices = [_levels(reading, step, box) for step in route.steps]
    if not choices or not all(choices):
        return 0.0
    fast = [levels for k, levels in enumerate(choices) if k not in slow]
    still = [levels for k, levels in enumerate(choices) if k in slow]
    largest = 0.0
    for held in product(*still):
        base = total_of([route.fixed, *(level.form for level in held)])
        combined = _combined(base, fast)
        largest = max(largest, _largest(combined, box, neighbours=len(fast) == 1))
    return largest


def _levels(reading: Reading, step: Step, box: Box) -> list[Level]:
    gated = reading.clusters[step.cluster].gated
    levels = []
    for state, _ in feasible(reading, step.cluster, box):
        potentials = state.solution.potentials
        form = (potentials[step.enter] - potentials[step.leave]).scaled(step.weight)
        levels.append(Level(form, tuple(n for n in state.on if n in gated)))
    return levels


def _combined(base: AffineForm, choices: Sequence[Sequence[Level]]) -> list[Level]:
    count = math.prod(len(levels) for levels in choices)
    if count > _MOST_COMBINATIONS:
        choices = [[levels[0], levels[-1]] for levels in choices[:6]]
    return [
        Level(
            total_of([base, *(level.form for level in mixture)]),
            tuple(gate for level in mixture for gate in level.gates),
        )
        for mixture in product(*choices)
    ]


def _largest(levels: Sequence[Level], box: Box, neighbours: bool) -> float:
    grid = _grid(levels, box)
    if grid is None:
        return 0.0
    names, points = grid
    volts = (
        np.array([[dict(level.form.terms).get(n, 0.0) for n in names] for level in levels]) @ points
    )
    tolerance = 1e-9 * max(1.0, float(np.abs(volts).max(initial=0.0)))
    above = np.where(volts > tolerance, volts, np.inf if neighbours else -np.inf)
    below = np.where(volts < -tolerance, -volts, np.inf if neighbours else -np.inf)
    up = above.min(axis=0) if neighbours else above.max(axis=0)
    down = below.min(axis=0) if neighbours else below.max(axis=0)
    usable = np.isfinite(up) & np.isfinite(down)
    if not usable.any():
        return 0.0
    up, down = up[usable], down[usable]
    swings = up * down / (up + down)
    if neighbours:
        swings = swings / _repeats(levels, volts[:, usable], up)
    return float(swings.max())


def _repeats(levels: Sequence[Level], volts: Grid, up: Grid) -> Grid:
    """How many different gate patterns make the upper level: each comes once a period."""
    close = np.abs(volts - up) < 1e-6 * np.maximum(1.0, up)
    first: Mapping[tuple[str, ...], int] = {level.gates: i for i, level in enumerate(levels)}
    total = np.zeros(up.shape)
    for gates in first:
        mine = [i for i, level in enumerate(levels) if level.gates == gates]
        total += close[mine].any(axis=0)
    return np.maximum(total, 1.0)


def _grid(levels: Sequence[Level], box: Box) -> tuple[tuple[str, ...], Grid] | None:
    """Sample points of the variables: ends and an even spread between them."""
    names = tuple(sorted({n for level in levels for n in level.form.names}))
    spans = {name: box.range_of(variable(name)) for name in names}
    if not all(span.bounded for span in spans.values()):
        return None
    spread = [name for name, span in spans.items() if span.high > span.low]
    each = 129 if len(spread) == 1 else max(2, int(_MOST_POINTS ** (1 / max(1, len(spread)))))
    each = min(each, 129)
    axes = [
        np.linspace(span.low, span.high, each if name in spread else 1)
        for name, span in spans.items()
    ]
    if not axes:
        return names, np.zeros((0, 1))
    return names, np.array([axis.ravel() for axis in np.meshgrid(*axes, indexing="ij")])
