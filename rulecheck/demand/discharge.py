"""How capacitors lose their charge through resistors once everything is switched off.

    v(t) = V exp(-t / RC), so t = RC ln(V / 60 V)

Capacitors that hang together and all resistors between their nets are one linear network, so
series strings with balancing resistors, and several buses on one ground, come out exactly:
C dv/dt = -G v, with G reduced to the capacitors' nets.
"""

import math
from collections.abc import Mapping, Sequence

import numpy as np
import numpy.typing as npt

from rulecheck.demand.bank_records import Discharge
from rulecheck.parts import Kind
from rulecheck.stage import Stage
from rulecheck.values import Unknown
from rulecheck.values.record import Record

Pair = tuple[str, str]
Matrix = npt.NDArray[np.float64]
_MOST_NETS = 200
_WINDING = 1e-3
"""Ohm; of an inductor, for want of its own."""
_NEVER = 1e-9
"""1/s; slower than this nothing discharges."""
_HOLDS = 1e-9


class Network(Record):
    """Nets of capacitors that hang together, and the resistors' conductance between them."""

    nets: tuple[str, ...]
    conductance: Matrix
    inner: Mapping[str, Sequence[float]]
    """By net between resistors: its potential as a mixture of those of `nets`."""


def resistor_network(stage: Stage, nets: Sequence[str]) -> Network | Unknown:
    """The resistors reached from the nets, reduced to them; dangling ones have no say."""
    ends = _resistors(stage)
    by_net: dict[str, list[tuple[str, str, float]]] = {}
    for a, b, ohm in ends:
        by_net.setdefault(a, []).append((a, b, ohm))
        by_net.setdefault(b, []).append((a, b, ohm))
    outer, order = set(nets), list(nets)
    for net in order:
        for a, b, _ in by_net.get(net, ()):
            order += [n for n in (a, b) if n not in outer and n not in order]
        if len(order) > _MOST_NETS:
            return Unknown("the resistors between the capacitors", "a smaller network")
    index = {net: k for k, net in enumerate(order)}
    whole = np.zeros((len(order), len(order)))
    for a, b, ohm in ends:
        if a in index and b in index and a != b:
            i, j = index[a], index[b]
            for x, y, sign in ((i, i, 1), (j, j, 1), (i, j, -1), (j, i, -1)):
                whole[x, y] += sign / ohm
    count = len(nets)
    inside = whole[count:, count:]
    mixture = -np.linalg.pinv(inside, hermitian=True) @ whole[count:, :count]
    reduced = whole[:count, :count] + whole[:count, count:] @ mixture
    inner = {net: mixture[k].tolist() for k, net in enumerate(order[count:])}
    return Network(tuple(nets), reduced, inner)


def _resistors(stage: Stage) -> list[tuple[str, str, float]]:
    """Resistors of known value, and inductors and windings, which let DC pass."""
    found = []
    for part in stage.parts.parts:
        ohm = _WINDING if part.kind is Kind.INDUCTOR else part.value
        conducts = part.kind in (Kind.RESISTOR, Kind.INDUCTOR) and len(part.nets) == 2
        if conducts and not isinstance(ohm, Unknown) and ohm > 0.0:
            found.append((stage.merged[part.nets[0]], stage.merged[part.nets[1]], ohm))
    return found


def discharges(
    network: Network, farads: Mapping[Pair, float], volts: Mapping[Pair, float]
) -> dict[Pair, Discharge]:
    """By pair of nets with capacitors: how long they take from their largest voltages."""
    index = {net: k for k, net in enumerate(network.nets)}
    size = len(network.nets)
    incidence = np.zeros((len(farads), size))
    for row, (start, end) in enumerate(farads):
        incidence[row, index[start]], incidence[row, index[end]] = 1.0, -1.0
    capacitance = incidence.T @ np.diag(list(farads.values())) @ incidence
    start_at = np.linalg.pinv(incidence) @ np.array([volts[pair] for pair in farads])
    rates, modes = _decay(capacitance, network.conductance)
    amounts = modes.T @ capacitance @ start_at
    found = {}
    for row, pair in enumerate(farads):
        parts = (incidence[row] @ modes) * amounts
        ohm = -network.conductance[index[pair[0]], index[pair[1]]]
        first = abs(volts[pair])
        limits = (60.0, 34.0, first / math.e)
        times = [_time_to(parts, rates, limit) for limit in limits]
        found[pair] = Discharge(
            times[0], times[1], times[2], 1.0 / ohm if ohm > _HOLDS else math.inf
        )
    return found


def _decay(capacitance: Matrix, conductance: Matrix) -> tuple[Matrix, Matrix]:
    """Rates and modes of C dv/dt = -G v, the modes normed to C."""
    sizes, vectors = np.linalg.eigh(capacitance)
    kept = sizes > sizes.max(initial=0.0) * 1e-12
    root = vectors[:, kept] / np.sqrt(sizes[kept])
    rates, turned = np.linalg.eigh(root.T @ conductance @ root)
    return np.maximum(rates, 0.0), root @ turned


def _time_to(parts: Matrix, rates: Matrix, limit: float) -> float:
    """When the sum of decays falls to the limit; infinite where it never does."""

    def volts(time: float) -> float:
        return abs(float(parts @ np.exp(-rates * time)))

    if volts(0.0) <= limit * (1.0 + 1e-9):
        return 0.0
    decaying = rates[rates >= _NEVER]
    stays = abs(float(parts[rates < _NEVER].sum()))
    if stays > limit or not decaying.size:
        return math.inf
    low, high = 0.0, 60.0 / float(decaying.min())
    if volts(high) > limit:
        return math.inf
    for _ in range(80):
        middle = (low + high) / 2
        low, high = (middle, high) if volts(middle) > limit else (low, middle)
    return high


def voltage_of_resistor(
    network: Network, nets: Sequence[str], volts: Mapping[str, float]
) -> float | None:
    """Across a resistor of the network while the capacitors' nets have these potentials; None
    where it hangs on none of them."""
    ends = [_potential(network, net, volts) for net in nets]
    known = [end for end in ends if end is not None]
    return abs(known[0] - known[1]) if len(known) == 2 else None


def _potential(network: Network, net: str, volts: Mapping[str, float]) -> float | None:
    if net in network.inner:
        pairs = zip(network.nets, network.inner[net], strict=True)
        return sum(volts.get(outer, 0.0) * share for outer, share in pairs)
    return volts.get(net)
