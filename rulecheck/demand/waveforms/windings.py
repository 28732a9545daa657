"""Winding currents at every instant, from Kirchhoff's law where only they and switches meet."""

from collections.abc import Mapping, Sequence

import numpy as np

from rulecheck.demand.topology import magnetising_name
from rulecheck.demand.voltages import name_of
from rulecheck.demand.waveforms.scene import Pieces, Scene
from rulecheck.stage import BranchKind, Stage, Transformer
from rulecheck.values.record import Record


class WindingShares(Record):
    """Each winding's current as a linear function of switch and coil currents."""

    windings: tuple[tuple[str, str], ...]
    sources: tuple[str, ...]
    """Positions by name, coils and ports by variable."""
    matrix: Sequence[Sequence[float]]
    magnetising: Mapping[int, str]
    """By winding: the magnetising current that flows beside its own."""
    determined: bool
    positions: frozenset[str]

    def currents(self, scene: Scene) -> list[tuple[str, str, Pieces]]:
        zero = np.zeros(scene.shares.shape)
        found = []
        for row, (start, end) in enumerate(self.windings):
            first, last = zero, zero
            terms = [(n, c) for n, c in zip(self.sources, self.matrix[row], strict=True) if c]
            terms += [(self.magnetising[row], 1.0)] if row in self.magnetising else []
            for name, coefficient in terms:
                a, b = scene.position(name) if name in self.positions else scene.coils[name]
                first, last = first + coefficient * a, last + coefficient * b
            found.append((start, end, (first, last)))
        return found


NONE = WindingShares((), (), (), {}, True, frozenset())


def winding_shares(stage: Stage, cores: Sequence[Transformer]) -> WindingShares:
    """Solve the windings' currents; not determined where the equations leave something open."""
    if not cores:
        return NONE
    windings = [(pair, core, k) for core in cores for k, pair in enumerate(core.windings)]
    stiff = {n for b in stage.branches if b.kind is BranchKind.VOLTAGE for n in (b.start, b.end)}
    positions = {p.name: (p.start, p.end) for p in stage.positions}
    coils = {name_of(b): (b.start, b.end) for b in stage.branches if b.kind is BranchKind.CURRENT}
    coils |= {magnetising_name(c): c.windings[0] for c in cores if not c.ideal}
    free = {net for pair, _, _ in windings for net in pair} - stiff
    near = {n: e for n, e in (positions | coils).items() if set(e) & free}
    names = tuple(near)
    left, right = [], []
    for net in sorted(free):
        left.append([_flow(pair, net) for pair, _, _ in windings])
        right.append([-_flow(near[name], net) for name in names])
    for core in cores:
        left.append([core.turns[k] if owner is core else 0.0 for _, owner, k in windings])
        right.append([0.0] * len(names))
    matrix = np.linalg.pinv(np.array(left), rcond=1e-9) @ np.array(right).reshape(len(left), -1)
    determined = np.linalg.matrix_rank(np.array(left)) == len(windings)
    magnetising = {
        row: magnetising_name(core)
        for row, (_, core, k) in enumerate(windings)
        if k == 0 and not core.ideal
    }
    return WindingShares(
        tuple(pair for pair, _, _ in windings), names, matrix.tolist(), magnetising,
        bool(determined), frozenset(positions),
    )  # fmt: skip


def _flow(ends: tuple[str, str], net: str) -> float:
    """How a branch from start to end drives current into a net."""
    return (1.0 if ends[1] == net else 0.0) - (1.0 if ends[0] == net else 0.0)
