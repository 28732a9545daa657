"""All currents of some groups at some operating points, as straight pieces within a period."""

from collections.abc import Mapping, Sequence

import numpy as np

from rulecheck.demand.routes import Carrier, Route
from rulecheck.demand.waveforms.operating import Values, value_of
from rulecheck.demand.waveforms.pieces import Array
from rulecheck.demand.waveforms.timing import IDLE, Pair, Timeline, merged, voltage_in
from rulecheck.values import AffineForm, Interval
from rulecheck.values.record import Record

Pieces = tuple[Array, Array]
"""A current at the first and the last instant of each interval."""


class Coil(Record):
    """An inductor or magnetising branch with what fixes its mean."""

    carrier: Carrier
    route: Route
    mean: AffineForm | None
    within: Interval
    """Its whole range, where nobody states the mean."""


class Scene(Record):
    values: Values
    """Of one shape, or broadcast to it: operating point, angle."""
    shape: tuple[int, ...]
    weights: Array
    """Of the angles; they sum to one."""
    frequency: float
    shares: Array
    chosen: Mapping[int, Array]
    """By group: the state of its pair in each interval, or IDLE."""
    pairs: Mapping[int, Pair]
    coils: Mapping[str, Pieces]

    def through(self, form: AffineForm) -> Pieces:
        """A form over coil currents and stiff quantities, with the ripple of the coils."""
        steady = {n: c for n, c in form.terms if n not in self.coils}
        base = value_of(AffineForm.of(steady, form.constant), self.values)
        level = np.broadcast_to(base, self.shape)[..., None] + np.zeros(self.shares.shape)
        first, last = level, level
        for name, coefficient in form.terms:
            if name in self.coils:
                first = first + coefficient * self.coils[name][0]
                last = last + coefficient * self.coils[name][1]
        return first, last

    def position(self, name: str) -> Pieces:
        """The current of a position; nothing while it is off."""
        first = last = np.zeros(self.shares.shape)
        for index, pair in self.pairs.items():
            for k, state in enumerate(pair.states):
                if name in state.on:
                    here = self.chosen[index] == k
                    begin, end = self.through(state.solution.on_currents[name])
                    first = first + np.where(here, begin, 0.0)
                    last = last + np.where(here, end, 0.0)
        return first, last


def set_scene(
    values: Values,
    pairs: Mapping[int, Pair],
    timelines: Mapping[int, Timeline],
    coils: Sequence[Coil],
    frequency: float,
    weights: Array,
) -> Scene:
    sizes = [np.shape(v) for v in values.values()]
    sizes += [np.shape(share) for t in timelines.values() for _, share in t.segments]
    shape = np.broadcast_shapes((1, len(weights)), *sizes)
    shares, chosen = merged(timelines, shape)
    bare = Scene(values, shape, weights, frequency, shares, chosen, pairs, {})
    return Scene(
        values, shape, weights, frequency, shares, chosen, pairs,
        {coil.carrier.name: _pieces(coil, bare) for coil in coils},
    )  # fmt: skip


def _pieces(coil: Coil, scene: Scene) -> Pieces:
    """Mean and ripple; a mean that nobody states keeps the whole within the stated range."""
    first, last = _ripple(coil, scene)
    if coil.mean is not None:
        mean = value_of(coil.mean, scene.values)
    else:
        top = np.maximum(first, last).max(axis=-1)
        bottom = np.minimum(first, last).min(axis=-1)
        low, high = coil.within.low - bottom, coil.within.high - top
        middle = (low + high) / 2
        low, high = np.minimum(low, middle), np.maximum(high, middle)
        mean = np.clip(scene.values[coil.carrier.name], low, high)
    level = np.broadcast_to(mean, scene.shape)[..., None]
    return first + level, last + level


def _ripple(coil: Coil, scene: Scene) -> Pieces:
    """The integral of the voltage over L, without its mean; zero where no group moves it."""
    if not coil.route.steps or not coil.carrier.inductance:
        return np.zeros(scene.shares.shape), np.zeros(scene.shares.shape)
    volts = np.zeros(scene.shares.shape)
    for step_index in sorted({step.cluster for step in coil.route.steps}):
        volts = volts + _switched(coil.route, step_index, scene)
    drift = (volts * scene.shares).sum(axis=-1, keepdims=True)
    steps = (volts - drift) * scene.shares / (coil.carrier.inductance * scene.frequency)
    last = np.cumsum(steps, axis=-1)
    first = last - steps
    offset = (scene.shares * (first + last) / 2).sum(axis=-1, keepdims=True)
    return first - offset, last - offset


def _switched(route: Route, index: int, scene: Scene) -> Array:
    """The part of a coil's voltage that one group makes; while it idles the coil has none."""
    pair, chosen = scene.pairs[index], scene.chosen[index]
    bare = Route(AffineForm(), route.steps, route.floating)
    fixed = np.broadcast_to(value_of(route.fixed, scene.values), scene.shape)[..., None]
    total = np.where(chosen == IDLE, -fixed, 0.0) + np.zeros(chosen.shape)
    for k, state in enumerate(pair.states):
        level = np.broadcast_to(value_of(voltage_in(bare, pair, state), scene.values), scene.shape)
        total = total + np.where(chosen == k, level[..., None], 0.0)
    return total
