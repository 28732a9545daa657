"""Means of currents that run straight within each interval, as arrays.

Axes: operating point, angle of the line period, interval. `first` and `last` are the values at
the ends of each interval, `shares` the parts of the switching period that the intervals take.
"""

import numpy as np
import numpy.typing as npt

Array = npt.NDArray[np.float64]


def mean(first: Array, last: Array, shares: Array, weights: Array) -> Array:
    """By point: the mean over intervals and, weighted, over angles."""
    return _over(shares * (first + last) / 2, weights)


def mean_square(first: Array, last: Array, shares: Array, weights: Array) -> Array:
    """By point: of a straight piece (a2 + ab + b2) / 3."""
    return _over(shares * (first**2 + first * last + last**2) / 3, weights)


def of_sign(first: Array, last: Array, shares: Array) -> tuple[Array, Array, Array]:
    """The same pieces with what is negative cut off: a piece that crosses zero is shortened."""
    span = np.abs(first) + np.abs(last)
    crosses = first * last < 0.0
    part = np.where(first > 0.0, first, last) / np.where(span > 0.0, span, 1.0)
    kept = np.where(crosses, shares * part, shares)
    return np.maximum(first, 0.0), np.maximum(last, 0.0), kept


def swing_of_integral(first: Array, last: Array, shares: Array) -> Array:
    """Peak to peak, within a period, of the integral of a current without mean; one value a
    point and angle, in units of current times period."""
    step = shares * (first + last) / 2
    ends = np.cumsum(step, axis=-1)
    before = ends - step
    slope = last - first
    crosses = first * last < 0.0
    where = np.where(crosses, -first / np.where(slope != 0.0, slope, 1.0), 0.0)
    inner = before + shares * first * where / 2
    inner = np.where(crosses, inner, before)
    highest = np.maximum(ends.max(axis=-1), np.maximum(before.max(axis=-1), inner.max(axis=-1)))
    lowest = np.minimum(ends.min(axis=-1), np.minimum(before.min(axis=-1), inner.min(axis=-1)))
    return np.asarray(highest - lowest)


def _over(pieces: Array, weights: Array) -> Array:
    return np.asarray(pieces.sum(axis=-1) @ weights)
