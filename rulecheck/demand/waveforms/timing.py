"""When a group is in which of its states: shares of the period from volt-second balance.

    buck      D v(in) - v(out) = 0, so M1 is on for D = v(out) / v(in), then D1 for 1 - D
    the same with little current, where D1 stops it: s D, s (1 - D), then nothing flows, with
              s = sqrt(2 i / ripple), ripple being that of continuous conduction

Erickson and Maksimovic, Fundamentals of Power Electronics, chapters 2 and 5 (from memory).
"""

from collections.abc import Mapping, Sequence

import numpy as np

from rulecheck.demand.analysis import Worked
from rulecheck.demand.groups import forms_of
from rulecheck.demand.readings import across, feasible
from rulecheck.demand.routes import Carrier, Route
from rulecheck.demand.states import RawState
from rulecheck.demand.topology import Cluster
from rulecheck.demand.waveforms.operating import Values, value_of
from rulecheck.demand.waveforms.pieces import Array
from rulecheck.values import AffineForm
from rulecheck.values.record import Record

IDLE = -1
_TOUCHES = 1e-9
_MOST_STATES = 12


class Pair(Record):
    """A group with two states: `first` has its upper, or only, gate on."""

    index: int
    cluster: Cluster
    first: RawState
    second: RawState
    midpoint: str

    @property
    def states(self) -> tuple[RawState, RawState]:
        return self.first, self.second


class Timeline(Record):
    """Segments of a period in order; arrays of one value an operating point (and angle)."""

    segments: Sequence[tuple[int, Array]]
    """Which state of the pair (0, 1 or IDLE), and its share of the period."""
    start: Array
    """When the first one begins, as a share of the period."""


def pair_of(worked: Worked, index: int) -> Pair | None:
    """The group as two states, or None where it has more, fewer, or resistors in it."""
    cluster = worked.topology.clusters[index]
    failed = {k for failure in worked.failures for k in failure.clusters}
    if index in failed or index in worked.connecting or any(link.ohm for link in cluster.links):
        return None
    if not cluster.gated or len(worked.reading.states[index]) > _MOST_STATES:
        return None
    names = {n for s in worked.reading.states[index] for f in forms_of(s) for n in f.names}
    box = worked.box.only(names)
    states = [s for s, _ in feasible(worked.reading, index, box) if s.on]
    if len(states) != 2:
        return None
    gates = [frozenset(s.on) & cluster.gated for s in states]
    if gates[0] == gates[1]:
        return None
    midpoint = _midpoint(cluster)
    order = sorted(range(2), key=lambda k: (not gates[k], not _upper(cluster, gates[k], midpoint)))
    return Pair(index, cluster, states[order[0]], states[order[1]], midpoint)


def _midpoint(cluster: Cluster) -> str:
    """The net that most positions meet at; of several the one that a current leaves."""
    count: dict[str, int] = {}
    for link in cluster.positions:
        for net in link.nets:
            count[net] = count.get(net, 0) + 1
    return max(sorted(count), key=lambda net: (count[net], net in cluster.into))


def _upper(cluster: Cluster, gates: frozenset[str], midpoint: str) -> bool:
    return any(link.name in gates and link.nets[1] == midpoint for link in cluster.positions)


def duty_of(pair: Pair, carriers: Sequence[tuple[Carrier, Route]], values: Values) -> Array | None:
    """The first state's share from the balance of a carrier that sees this group alone.

    NaN at points where no share balances it; None where no carrier decides.
    """
    for carrier, route in carriers:
        alone = {step.cluster for step in route.steps} == {pair.index}
        if not carrier.part or route.floating or not alone:
            continue
        up, down = (value_of(voltage_in(route, pair, s), values) for s in pair.states)
        span = up - down
        with np.errstate(divide="ignore", invalid="ignore"):
            share = np.where(np.abs(span) > _TOUCHES, -down / span, np.nan)
        within = (share > -_TOUCHES) & (share < 1.0 + _TOUCHES)
        if within.any():
            return np.where(within, np.clip(share, 0.0, 1.0), np.nan)
    return None


def voltage_in(route: Route, pair: Pair, state: RawState) -> AffineForm:
    """What a carrier that sees this group alone has across it."""
    total = route.fixed
    for step in route.steps:
        if step.cluster == pair.index:
            total += across(step, state)
    return total


def merged(
    timelines: Mapping[int, Timeline], shape: tuple[int, ...]
) -> tuple[Array, dict[int, Array]]:
    """The intervals between all edges: their shares, and by group the state in each."""
    edges = [np.zeros((*shape, 1))]
    for timeline in timelines.values():
        at = np.broadcast_to(timeline.start, shape)
        for _, share in timeline.segments:
            edges.append((at % 1.0)[..., None])
            at = at + np.broadcast_to(share, shape)
    times = np.sort(np.concatenate([*edges, np.ones((*shape, 1))], axis=-1), axis=-1)
    middles = (times[..., :-1] + times[..., 1:]) / 2
    return np.diff(times, axis=-1), {k: _at(t, middles) for k, t in timelines.items()}


def _at(timeline: Timeline, times: Array) -> Array:
    since = (times - np.asarray(timeline.start)[..., None]) % 1.0
    found = np.full(times.shape, timeline.segments[-1][0])
    passed = np.zeros(times.shape[:-1])
    choices, conditions = [], []
    for state, share in timeline.segments:
        passed = passed + share
        conditions.append(since < passed[..., None])
        choices.append(np.full(times.shape, state))
    return np.asarray(np.select(conditions, choices, found))
