"""The product: mean, rms, peak and ripple of inductors, capacitors and positions."""

from collections.abc import Mapping

from rulecheck.values import Interval, Unknown
from rulecheck.values.record import Record, field

Corner = tuple[tuple[str, float], ...]
"""Values of the stiff quantities at which an end is met."""


class Derived(Record):
    """One derived quantity over all operating points, with the corners that gave its ends."""

    range: Interval | Unknown
    low_at: Corner = ()
    high_at: Corner = ()
    missing: tuple[Unknown, ...] = ()
    """Where something is: the true range lies within this one, and this would narrow it."""


class InductorWaves(Record):
    """Ampere; `ripple` is peak to peak, `peak` the largest magnitude."""

    mean: Derived
    rms: Derived
    ripple: Derived
    peak: Derived


class CapacitorWaves(Record):
    """`rms` in ampere, `ripple` in volt peak to peak, `share` of what its bank carries."""

    rms: Derived
    ripple: Derived
    share: float | Unknown


class PositionWaves(Record):
    """Ampere over the whole period: of the current, and of its two directions apart."""

    mean: Derived
    rms: Derived
    forward_mean: Derived
    forward_rms: Derived
    reverse_mean: Derived
    reverse_rms: Derived


class Waveforms(Record):
    """By part or position name."""

    inductors: Mapping[str, InductorWaves] = field(default_factory=dict)
    capacitors: Mapping[str, CapacitorWaves] = field(default_factory=dict)
    positions: Mapping[str, PositionWaves] = field(default_factory=dict)
    assumed: tuple[str, ...] = ()
