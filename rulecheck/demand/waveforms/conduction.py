"""Whether current flows all through a period, or a diode stops it at zero."""

import math
from collections.abc import Sequence

import numpy as np

from rulecheck.demand.waveforms.operating import Values, value_of
from rulecheck.demand.waveforms.pieces import Array
from rulecheck.demand.waveforms.scene import Coil
from rulecheck.demand.waveforms.timing import Pair, voltage_in


def flowing(
    pair: Pair, coils: Sequence[Coil], frequency: float, duty: Array, values: Values
) -> Array:
    """The share of a period in which current flows: less than 1 where a diode stops it.

    NaN at points where the diode would have to carry its current backwards. With several coils
    in the group conduction is taken as continuous, which puts the ripple too high, never too low.
    """
    diodes = [
        (state, link)
        for state in pair.states
        for link in pair.cluster.positions
        if link.name in state.on and link.position and not link.position.gated
    ]
    if not diodes:
        return np.ones(np.shape(duty))
    known = {c.carrier.name: c for c in coils if c.mean is not None}
    forward = np.ones(np.shape(duty), dtype=bool)
    part = np.ones(np.shape(duty))
    for state, link in diodes:
        form = state.solution.on_currents[link.name]
        ways = 1.0 if link.position and link.position.free_forward else -1.0
        means = {name: coil.mean for name, coil in known.items() if coil.mean is not None}
        mean = ways * value_of(form.substitute(means), values)
        forward &= mean >= -1e-9
        if len(form.names) == 1 and form.names[0] in known:
            coil = known[form.names[0]]
            ripple = abs(form.terms[0][1]) * _full_ripple(coil, pair, frequency, duty, values)
            with np.errstate(divide="ignore", invalid="ignore"):
                stopped = np.sqrt(2.0 * np.maximum(mean, 0.0) / ripple)
            part = np.where(mean < ripple / 2, stopped, part)
    return np.where(forward, part, np.nan)


def _full_ripple(coil: Coil, pair: Pair, frequency: float, duty: Array, values: Values) -> Array:
    """Peak to peak, ampere, in continuous conduction."""
    rising = value_of(voltage_in(coil.route, pair, pair.first), values)
    henry = coil.carrier.inductance or math.inf
    return np.asarray(np.abs(rising) * duty / (henry * frequency))
