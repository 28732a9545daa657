"""Legs that a sine modulates: duty and current at instants of the fundamental cycle.

    three phases      D = (1 + M cos(wt - k 120 deg)) / 2, M = amplitude of a phase / (bus / 2)
    H-bridge          one leg D = (1 + M cos wt) / 2, the other with -M (unipolar) or always in the
                      opposite state (bipolar); M = amplitude / bus
    split bus         one leg, M = amplitude / (bus / 2)

Pulses lie symmetrically in the period, as a triangular carrier makes them. Holmes and Lipo, Pulse
Width Modulation for Power Converters (from memory). Between its nodes the cycle is integrated
by Gauss and Legendre, sector by sector, since the order of the edges changes at sector ends.
"""

import math
from collections.abc import Mapping, Sequence

import numpy as np

from rulecheck.demand.means import current_names
from rulecheck.demand.sign_cases import voltage_names
from rulecheck.demand.stiff import Box
from rulecheck.demand.waveforms.operating import Values
from rulecheck.demand.waveforms.pieces import Array
from rulecheck.demand.waveforms.timing import Pair, Timeline
from rulecheck.stage import Port, PortKind
from rulecheck.values import AffineForm, Interval, Unknown
from rulecheck.values.record import Record

_SECTORS, _NODES = 12, 3
LEVELS = {"modulation": 6, "power": 3}
"""How many values are tried: squares of currents are linear in cos phi or in its square."""
UNIPOLAR, BIPOLAR = "unipolar", "bipolar"


def _angles() -> tuple[Array, Array]:
    nodes, weights = np.polynomial.legendre.leggauss(_NODES)
    width = 2 * math.pi / _SECTORS
    starts = np.arange(_SECTORS)[:, None] * width
    return (starts + (nodes + 1) / 2 * width).ravel(), np.tile(weights / 2 / _SECTORS, _SECTORS)


ANGLES, ANGLE_WEIGHTS = _angles()
_ORDERS = np.arange(1, 5)
_FINE = np.linspace(0.0, 2 * math.pi, 361)
_WAVES = np.concatenate([np.cos(np.outer(ANGLES, _ORDERS)), np.sin(np.outer(ANGLES, _ORDERS))], 1)
_INTEGRALS = (
    np.concatenate([np.sin(np.outer(_ORDERS, _FINE)), -np.cos(np.outer(_ORDERS, _FINE))])
    / np.concatenate([_ORDERS, _ORDERS])[:, None]
)


def swing_over_a_cycle(current: Array) -> Array:
    """Peak to peak of the integral over a cycle, in current times cycle, by its harmonics."""
    spectrum = 2.0 * (current * ANGLE_WEIGHTS) @ _WAVES
    charge = spectrum @ _INTEGRALS / (2 * math.pi)
    return np.asarray(charge.max(axis=-1) - charge.min(axis=-1))


class Sines(Record):
    """One AC port and the legs that make its waveform."""

    port: Port
    legs: Mapping[int, tuple[int, float]]
    """By group: the phase that it drives, and the sign with which its current leaves."""
    ranges: Mapping[str, Interval]
    """Of modulation index and power factor, the widest possible where nobody states them."""
    missing: tuple[Unknown, ...]
    patterns: tuple[str, ...]

    @property
    def names(self) -> tuple[str, ...]:
        return (*current_names(self.port), *voltage_names(self.port))


def find_sines(ports: Sequence[Port], pairs: Mapping[int, Pair], box: Box) -> list[Sines]:
    """AC ports of known amplitude each of whose phases a leg drives."""
    found = []
    for port in ports:
        if port.kind is PortKind.DC or port.current is None:
            continue
        legs = _legs(port, pairs, box.means)
        wanted = [(k, 1.0) for k in range(len(port.nets))]
        single = [(0, 1.0), (0, -1.0)]
        driven = sorted(legs.values(), key=lambda leg: (leg[0], -leg[1]))
        if port.kind is PortKind.PHASES:
            whole = driven == wanted
        else:
            whole = driven == single or len(legs) == 1
        if whole:
            found.append(_sines(port, legs, pairs, box))
    return found


def _legs(
    port: Port, pairs: Mapping[int, Pair], means: Mapping[str, AffineForm]
) -> dict[int, tuple[int, float]]:
    names = current_names(port)
    legs = {}
    for index, pair in pairs.items():
        gated = pair.cluster.gated
        upper = [n for n in pair.first.on if n in gated]
        if len(upper) != 1 or not set(pair.second.on) & gated:
            continue
        form = pair.first.solution.on_currents[upper[0]].substitute(means)
        if len(form.terms) == 1 and form.names[0] in names and not form.constant:
            sign = form.terms[0][1]
            if math.isclose(abs(sign), 1.0, rel_tol=1e-6):
                legs[index] = (names.index(form.names[0]), -math.copysign(1.0, sign))
    return legs


def _sines(
    port: Port, legs: Mapping[int, tuple[int, float]], pairs: Mapping[int, Pair], box: Box
) -> Sines:
    where = f"ports: {{{port.name}: "
    missing = []
    ranges = {}
    limit = 2.0 / math.sqrt(3.0) if port.kind is PortKind.PHASES else 1.0
    index = port.modulation_index or _by_voltage(port, legs, pairs, box, limit)
    given = (
        (index, modulation_of(port), "modulation-index", Interval(0.0, limit)),
        (port.power_factor, power_factor_of(port), "power-factor", Interval(-1.0, 1.0)),
    )
    for stated, name, key, widest in given:
        ranges[name] = widest if stated is None else stated
        if stated is None:
            missing.append(
                Unknown(f"{key} of port {port.name}", f"{where}{{{key}: [LOW, HIGH]}}}}")
            )
    sign = 1.0 if port.draws else -1.0
    if port.power_factor is not None:
        ranges[power_factor_of(port)] = port.power_factor.scaled(sign)
    patterns = (port.modulation,) if port.modulation else (UNIPOLAR, BIPOLAR)
    if len(legs) != 2:
        patterns = (UNIPOLAR,)
    elif not port.modulation:
        settle = f"{where}{{modulation: unipolar}}}} or bipolar"
        missing.append(Unknown(f"modulation of port {port.name}", settle))
    return Sines(port, legs, ranges, tuple(missing), patterns)


def _by_voltage(
    port: Port, legs: Mapping[int, tuple[int, float]], pairs: Mapping[int, Pair], box: Box,
    limit: float,
) -> Interval | None:  # fmt: skip
    """The port's stated amplitude over what the rails can give; drops in between left out."""
    pair = pairs[min(legs)]
    upper = next(n for n in pair.first.on if n in pair.cluster.gated)
    rails = box.range_of(pair.second.solution.off_voltages[upper])
    if port.voltage is None or not rails.bounded or rails.low <= 0.0:
        return None
    full = 1.0 if len(legs) == 2 else 0.5
    low, high = port.least_amplitude / rails.high / full, port.voltage.magnitude / rails.low / full
    return Interval(min(low, limit), min(high, limit))


def modulation_of(port: Port) -> str:
    return f"modulation index of {port.name}"


def power_factor_of(port: Port) -> str:
    return f"power factor of {port.name}"


def sine_values(sines: Sines, values: Values) -> Values:
    """The port's currents and voltages at every angle; what is drawn is negative."""
    port = sines.port
    lag = np.arccos(np.clip(values[power_factor_of(port)], -1.0, 1.0))[..., None]
    count = len(port.nets) if port.kind is PortKind.PHASES else 1
    found = {name: np.asarray(value)[..., None] for name, value in values.items()}
    current = port.current.magnitude if port.current else 0.0
    voltage = port.voltage.magnitude if port.voltage else 0.0
    for k in range(count):
        angle = ANGLES - 2.0 * math.pi * k / count
        found[current_names(port)[k]] = -current * np.cos(angle - lag)
        found[voltage_names(port)[k]] = voltage * np.cos(angle) + 0.0 * lag
    return found


def sine_timelines(sines: Sines, pattern: str, values: Values) -> dict[int, Timeline]:
    """Each leg's duty at every angle, its pulse in the middle of the period."""
    index = np.asarray(values[modulation_of(sines.port)])[..., None]
    count = len(sines.port.nets) if sines.port.kind is PortKind.PHASES else 1
    waves = [index * np.cos(ANGLES - 2.0 * math.pi * k / count) for k in range(count)]
    if count > 1:
        highest, lowest = np.max(waves, axis=0), np.min(waves, axis=0)
        common = np.where(index > 1.0, (highest + lowest) / 2, 0.0)
        waves = [wave - common for wave in waves]
    found = {}
    for leg, (phase, sign) in sines.legs.items():
        opposite = pattern == BIPOLAR and sign < 0.0
        duty = (1.0 + (1.0 if opposite else sign) * waves[phase]) / 2
        segments = ((1, duty), (0, 1.0 - duty)) if opposite else ((0, duty), (1, 1.0 - duty))
        found[leg] = Timeline(segments, 0.5 - duty / 2)
    return found
