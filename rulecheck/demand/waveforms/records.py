"""The product: mean, rms, peak and ripple of inductors, capacitors and positions."""

from collections.abc import Mapping
from dataclasses import dataclass, field

from rulecheck.values import Interval, Unknown

Corner = tuple[tuple[str, float], ...]
"""Values of the stiff quantities at which an end is met."""


@dataclass(frozen=True, slots=True)
class Derived:
    """One derived quantity over all operating points, with the corners that gave its ends."""

    range: Interval | Unknown
    low_at: Corner = ()
    high_at: Corner = ()
    missing: tuple[Unknown, ...] = ()
    """Where something is: the true range lies within this one, and this would narrow it."""


@dataclass(frozen=True, slots=True)
class InductorWaves:
    """Ampere; `ripple` is peak to peak, `peak` the largest magnitude."""

    mean: Derived
    rms: Derived
    ripple: Derived
    peak: Derived


@dataclass(frozen=True, slots=True)
class CapacitorWaves:
    """`rms` in ampere, `ripple` in volt peak to peak, `share` of what its bank carries."""

    rms: Derived
    ripple: Derived
    share: float | Unknown


@dataclass(frozen=True, slots=True)
class PositionWaves:
    """Ampere over the whole period: of the current, and of its two directions apart."""

    mean: Derived
    rms: Derived
    forward_mean: Derived
    forward_rms: Derived
    reverse_mean: Derived
    reverse_rms: Derived


@dataclass(frozen=True, slots=True)
class Waveforms:
    """By part or position name."""

    inductors: Mapping[str, InductorWaves] = field(default_factory=dict)
    capacitors: Mapping[str, CapacitorWaves] = field(default_factory=dict)
    positions: Mapping[str, PositionWaves] = field(default_factory=dict)
    assumed: tuple[str, ...] = ()
