"""Capacitors that hang together, and the currents that switches and coils drive into their nets.

Ports and sources with a voltage supply a steady current; what is left alternates and flows in the
capacitors, which share it by capacitance (equal voltages): common practice where the resistance
of none of them is known.
"""

from collections.abc import Hashable, Iterable, Mapping, Sequence

import numpy as np

from rulecheck.demand.unions import Unions
from rulecheck.demand.voltages import name_of
from rulecheck.demand.waveforms.scene import Pieces, Scene
from rulecheck.demand.waveforms.windings import WindingShares
from rulecheck.parts import Kind
from rulecheck.stage import Branch, BranchKind, Stage
from rulecheck.values.record import Record

_SLACK = 1e-6


class Bundle(Record):
    """Capacitors between the same two nets, which carry their current as one."""

    start: str
    end: str
    farad: float
    members: tuple[Branch, ...]

    @property
    def name(self) -> str:
        return self.members[0].name

    def share(self, branch: Branch) -> float:
        return (branch.value or 0.0) / self.farad if self.farad else 1.0


class Bank(Record):
    nets: tuple[str, ...]
    bundles: tuple[Bundle, ...]

    @property
    def capacitors(self) -> tuple[Branch, ...]:
        return tuple(branch for bundle in self.bundles for branch in bundle.members)


class Feed(Record):
    """Something that drives a current out of one net and into another."""

    name: str
    start: str
    end: str


def find_banks(stage: Stage) -> list[Bank]:
    kinds = {part.name: part.kind for part in stage.parts.parts}
    capacitors = [b for b in stage.branches if kinds.get(b.part) is Kind.CAPACITOR]
    joined = Unions([])
    for branch in capacitors:
        joined.join(branch.start, branch.end)
    members: dict[Hashable, list[Branch]] = {}
    for branch in capacitors:
        members.setdefault(joined.root(branch.start), []).append(branch)
    return [
        Bank(tuple(sorted({n for b in found for n in (b.start, b.end)})), _bundled(found))
        for found in members.values()
    ]


def _bundled(branches: Sequence[Branch]) -> tuple[Bundle, ...]:
    between: dict[frozenset[str], list[Branch]] = {}
    for branch in branches:
        between.setdefault(frozenset((branch.start, branch.end)), []).append(branch)
    return tuple(
        Bundle(own[0].start, own[0].end, sum(b.value or 0.0 for b in own), tuple(own))
        for own in between.values()
    )


class Feeds:
    """Feeds by the nets at their ends, so that each bank looks at its own alone."""

    def __init__(self, feeds: Iterable[Feed]) -> None:
        self._feeds = tuple(feeds)
        self._at: dict[str, list[int]] = {}
        for index, feed in enumerate(self._feeds):
            for net in {feed.start, feed.end}:
                self._at.setdefault(net, []).append(index)

    def at(self, nets: Iterable[str]) -> list[Feed]:
        """Those with an end in the nets, in their order."""
        return [self._feeds[k] for k in sorted({k for n in nets for k in self._at.get(n, ())})]


def position_feeds(stage: Stage) -> Feeds:
    return Feeds(Feed(p.name, p.start, p.end) for p in stage.positions)


def branch_feeds(stage: Stage, alternating: frozenset[str]) -> tuple[Feeds, Feeds]:
    """Current branches, and AC ports with a voltage, which drive their current out of minus and
    into plus."""
    currents = Feeds(
        Feed(name_of(b), b.start, b.end) for b in stage.branches if b.kind is BranchKind.CURRENT
    )
    ports = Feeds(
        Feed(f"i({b.name.removeprefix('port/')})", b.end, b.start)
        for b in stage.branches
        if b.kind is BranchKind.VOLTAGE
        and b.port
        and f"i({b.name.removeprefix('port/')})" in alternating
    )
    return currents, ports


def into_nets(
    bank: Bank, scene: Scene, positions: Sequence[Feed], branches: Sequence[Feed],
    windings: WindingShares,
) -> Mapping[str, Pieces]:  # fmt: skip
    """The current into each net of the bank; branches are forms of the same name."""
    zero = np.zeros(scene.shares.shape)
    found: dict[str, Pieces] = dict.fromkeys(bank.nets, (zero, zero))

    def drive(start: str, end: str, pieces: Pieces) -> None:
        for net, sign in ((start, -1.0), (end, 1.0)):
            if net in found:
                first, last = found[net]
                found[net] = (first + sign * pieces[0], last + sign * pieces[1])

    for feed in positions:
        drive(feed.start, feed.end, scene.position(feed.name))
    for feed in branches:
        drive(feed.start, feed.end, _branch(scene, feed.name))
    for start, end, pieces in windings.currents(scene):
        drive(start, end, pieces)
    return found


def _branch(scene: Scene, name: str) -> Pieces:
    if name in scene.coils:
        return scene.coils[name]
    if name not in scene.values:
        zero = np.zeros(scene.shares.shape)
        return zero, zero
    level = np.broadcast_to(scene.values[name], scene.shape)[..., None]
    return (level + np.zeros(scene.shares.shape),) * 2


def without_mean(pieces: Pieces, scene: Scene) -> Pieces:
    """What alternates: the steady part is the ports'."""
    mean = (scene.shares * (pieces[0] + pieces[1]) / 2).sum(axis=-1) @ scene.weights
    level = mean[:, None, None]
    return pieces[0] - level, pieces[1] - level


def closed(bank: Bank, stage: Stage, into: Mapping[str, Pieces]) -> Mapping[str, Pieces] | None:
    """The nets' currents made to sum to zero: what is left returns through the one net at which a
    port or source leaves the bank; None where there are several, or none."""
    first = np.sum([pieces[0] for pieces in into.values()], axis=0)
    last = np.sum([pieces[1] for pieces in into.values()], axis=0)
    largest = max(float(np.nanmax(np.abs(p[0]), initial=0.0)) for p in into.values())
    if float(np.nanmax(np.abs(first), initial=0.0)) <= _SLACK * max(1.0, largest):
        return into
    capacitors = {branch.name for branch in bank.capacitors}
    ways = {
        net
        for b in stage.branches
        if b.kind is BranchKind.VOLTAGE and b.name not in capacitors
        for net, other in ((b.start, b.end), (b.end, b.start))
        if net in into and other not in into
    }
    if len(ways) != 1:
        return None
    (way,) = ways
    return {**into, way: (into[way][0] - first, into[way][1] - last)}


def shares_of(bank: Bank, into: Mapping[str, Pieces]) -> dict[str, Pieces]:
    """By bundle: its current, the nets' currents summing to zero.

    C dv/dt into every net: the voltages of the nets' slopes solve the Laplacian of the bank.
    """
    index = {net: k for k, net in enumerate(bank.nets)}
    incidence = np.zeros((len(bank.bundles), len(bank.nets)))
    farads = np.array([bundle.farad for bundle in bank.bundles])
    for row, bundle in enumerate(bank.bundles):
        incidence[row, index[bundle.start]] += 1.0
        incidence[row, index[bundle.end]] -= 1.0
    weights = farads / farads.max()
    laplacian = incidence.T @ (weights[:, None] * incidence)
    inverse = np.linalg.pinv(laplacian, rcond=1e-12, hermitian=True)
    matrix = weights[:, None] * (incidence @ inverse)
    ends = [np.stack([into[net][k] for net in bank.nets]) for k in (0, 1)]
    return {
        bundle.name: (np.tensordot(matrix[row], ends[0], 1), np.tensordot(matrix[row], ends[1], 1))
        for row, bundle in enumerate(bank.bundles)
    }
