"""A small time-domain simulation that knows nothing of the analysis, to check it from outside.

A converter is a cycle of intervals, each with its own linear equations x' = A x + b. The state
transition is the matrix exponential of the augmented system, so there is no integration error,
and the periodic steady state is the fixed point of one cycle. What each switch sees is a linear
function of the state: a voltage while it is off, a current while it is on.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.linalg import expm

Array = NDArray[np.float64]
STEPS = 40


@dataclass(frozen=True)
class Interval:
    """One state of the switches; rows end with the constant term."""

    seconds: float
    rates: Sequence[Sequence[float]]
    """x' as rows over (x, 1)."""
    off: Mapping[str, Sequence[float]]
    """By switch that is off: its voltage as a row over (x, 1)."""
    on: Mapping[str, Sequence[float]]
    """By switch that is on: its current."""


@dataclass(frozen=True)
class Waveforms:
    states: Array
    off: dict[str, Array]
    on: dict[str, Array]


def steady_state(cycle: Sequence[Interval]) -> Waveforms:
    """Sample the periodic steady state, ends of every interval included."""
    size = len(cycle[0].rates)
    whole = np.eye(size + 1)
    for interval in cycle:
        whole = _transition(interval, interval.seconds) @ whole
    start = np.linalg.solve(np.eye(size) - whole[:size, :size], whole[:size, size])
    state = np.append(start, 1.0)
    states: list[Array] = []
    off: dict[str, list[float]] = {}
    on: dict[str, list[float]] = {}
    for interval in cycle:
        step = _transition(interval, interval.seconds / STEPS)
        for _ in range(STEPS):
            _see(interval, state, off, on)
            states.append(state)
            state = step @ state
        _see(interval, state, off, on)
    return Waveforms(np.array(states), _arrays(off), _arrays(on))


def mean(waves: Waveforms, cycle: Sequence[Interval], row: int) -> float:
    """The time average of one state, by the trapezoid inside each interval."""
    total = 0.0
    for index, interval in enumerate(cycle):
        part = waves.states[index * STEPS : (index + 1) * STEPS + 1, row]
        if len(part) == STEPS:
            part = np.append(part, waves.states[0, row])
        total += float(np.trapezoid(part)) * interval.seconds / STEPS
    return total / sum(interval.seconds for interval in cycle)


def _transition(interval: Interval, seconds: float) -> Array:
    rates = np.array(interval.rates)
    augmented = np.vstack([rates, np.zeros(rates.shape[1])])
    return np.asarray(expm(augmented * seconds))


def _see(
    interval: Interval, state: Array, off: dict[str, list[float]], on: dict[str, list[float]]
) -> None:
    for rows, seen in ((interval.off, off), (interval.on, on)):
        for name, row in rows.items():
            seen.setdefault(name, []).append(float(np.dot(row, state)))


def _arrays(seen: dict[str, list[float]]) -> dict[str, Array]:
    return {name: np.array(values) for name, values in seen.items()}
