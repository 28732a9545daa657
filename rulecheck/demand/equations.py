"""Solve one state of a group: potentials, currents, and what contradicts itself.

Unknowns are the islands' potentials and the currents of on positions and windings. An on
position is 0 V (the nets are one), an off one is absent. Where the equations leave something
open, off voltages and parallel currents share evenly (least squares); that is exact for all that
the equations determine.
"""

from collections.abc import Callable, Mapping

import numpy as np
import numpy.typing as npt

from rulecheck.demand.topology import Cluster, Link, loop_name
from rulecheck.values import AffineForm
from rulecheck.values.record import Record

Matrix = npt.NDArray[np.float64]
_RANK = 1e-9
_LOOSE = 1e-6
_RESIDUAL = 1e-7


class Solution(Record):
    off_voltages: Mapping[str, AffineForm]
    on_currents: Mapping[str, AffineForm]
    potentials: Mapping[str, AffineForm]
    """Of the islands' roots, up to a common offset."""
    voltage_contradictions: tuple[AffineForm, ...]
    """Forms that would have to be zero for no voltage to be shorted."""
    current_contradictions: tuple[AffineForm, ...]
    """Forms that would have to be zero for no current to be interrupted."""

    @property
    def contradictions(self) -> tuple[AffineForm, ...]:
        return self.voltage_contradictions + self.current_contradictions


class _System:
    """Rows of `coefficients . unknowns = right side`, the right side a form per row."""

    def __init__(self, cluster: Cluster, on: frozenset[str]) -> None:
        self.cluster = cluster
        self.islands = {island: k for k, island in enumerate(cluster.islands)}
        carrying = [link for link in cluster.links if link.core or link.name in on]
        first = len(self.islands)
        self.currents = {link.name: first + k for k, link in enumerate(carrying)}
        self.size = first + len(carrying)
        self.names = _names(cluster)
        self._column = {name: k for k, name in enumerate(self.names)}
        self.left: list[Matrix] = []
        self.right: list[Matrix] = []

    def across(self, link: Link) -> Matrix:
        """The link's voltage, without its own step, as a row over the unknowns."""
        row = np.zeros(self.size)
        row[self.islands[link.start]] += 1.0
        row[self.islands[link.end]] -= 1.0
        return row

    def through(self, link: Link) -> Matrix:
        row = np.zeros(self.size)
        row[self.currents[link.name]] = 1.0
        return row

    def add(self, row: Matrix, right: Matrix) -> None:
        self.left.append(row)
        self.right.append(right)

    def vector(self, form: AffineForm) -> Matrix:
        row = np.zeros(len(self.names))
        for name, coefficient in form.terms:
            row[self._column[name]] = coefficient
        return row

    def column(self, name: str) -> int:
        return self._column[name]

    def form(self, row: Matrix) -> AffineForm:
        size = float(np.abs(row).max(initial=0.0))
        if size < _RESIDUAL * 1e-3:
            return AffineForm()
        return AffineForm.of(
            {
                name: float(round(x, 12))
                for name, x in zip(self.names, row, strict=True)
                if abs(x) > _RESIDUAL * max(size, 1e-3)
            }
        )


def _names(cluster: Cluster) -> tuple[str, ...]:
    forms = [link.step for link in cluster.links] + list(cluster.into.values())
    loops = {loop_name(link.core) for link in cluster.links if link.core}
    return tuple(sorted({name for form in forms for name in form.names} | loops))


def solve_state(
    cluster: Cluster, on: frozenset[str], vanishes: Callable[[AffineForm], bool]
) -> Solution:
    """Potentials and currents of the group with the named positions on, the others off.

    Where a contradiction does not vanish the state is illegal, and only its contradictions are
    given: most combinations are, so nothing more is worked out for them.
    """
    system = _System(cluster, on)
    for link in cluster.links:
        if link.name in on:
            system.add(system.across(link), -system.vector(link.step))
    _add_windings(system)
    voltage_rows = len(system.left)
    _add_currents(system, on)
    left, right = np.array(system.left), np.array(system.right)
    unknowns, free, residual = _solve(left, right)
    forms = [system.form(row) for row in residual]
    voltage = tuple(form for form in forms[:voltage_rows] if not vanishes(form))
    current = tuple(form for form in forms[voltage_rows:] if not vanishes(form))
    if current:
        return Solution({}, {}, {}, voltage, current)
    unknowns, free = _with_loops(system, unknowns, free)
    unknowns = _share_evenly(system, on, unknowns, free)
    return Solution(
        {k: system.form(row) for k, row in _off_voltages(system, on, unknowns).items()},
        {name: system.form(unknowns[k]) for name, k in system.currents.items() if name in on},
        {island: system.form(unknowns[k]) for island, k in system.islands.items()},
        voltage,
        current,
    )


def _cores(cluster: Cluster) -> dict[str, list[Link]]:
    cores: dict[str, list[Link]] = {}
    for link in cluster.links:
        if link.core:
            cores.setdefault(link.core, []).append(link)
    return cores


def _add_windings(system: _System) -> None:
    """Equal volts per turn on one core."""
    for windings in _cores(system.cluster).values():
        first = windings[0]
        for other in windings[1:]:
            row = system.across(other) / other.turns - system.across(first) / first.turns
            step = other.step.scaled(1.0 / other.turns) - first.step.scaled(1.0 / first.turns)
            system.add(row, -system.vector(step))


def _add_currents(system: _System, on: frozenset[str]) -> None:
    """Ampere-turns sum to zero on each core; Kirchhoff's current law at each island."""
    for windings in _cores(system.cluster).values():
        total = sum((system.through(w) * w.turns for w in windings), np.zeros(system.size))
        system.add(total, np.zeros(len(system.names)))
    for island in system.cluster.islands:
        row = np.zeros(system.size)
        right = system.vector(system.cluster.into.get(island, AffineForm()))
        for link in system.cluster.links:
            for end, sign in ((link.start, 1.0), (link.end, -1.0)):
                if end != island:
                    continue
                if link.name in system.currents:
                    row += sign * system.through(link)
                elif link.ohm:
                    row += sign * system.across(link) / link.ohm
                    right = right - sign * system.vector(link.step) / link.ohm
        system.add(row, right)


def _solve(left: Matrix, right: Matrix) -> tuple[Matrix, Matrix, Matrix]:
    """A least-squares solution, a basis of the null space, and the residual."""
    u, sizes, v = np.linalg.svd(left, full_matrices=True)
    rank = int(np.sum(sizes > _RANK * max(1.0, float(sizes.max(initial=0.0)))))
    solution = v[:rank].T @ ((u[:, :rank].T @ right) / sizes[:rank, None])
    return solution, v[rank:].T, left @ solution - right


def _share_evenly(system: _System, on: frozenset[str], unknowns: Matrix, free: Matrix) -> Matrix:
    """Settle what the equations leave open: first gated positions and currents, then diodes.

    A reverse-biased diode's leakage must not pull a net past the free path that clamps it.
    """
    gated: list[tuple[Matrix, Matrix]] = []
    diodes: list[tuple[Matrix, Matrix]] = []
    for link in system.cluster.links:
        if link.position is not None and link.name not in on:
            row = (system.across(link), system.vector(link.step))
            (gated if link.position.gated else diodes).append(row)
        elif link.name in system.currents and not link.core:
            gated.append((system.through(link), np.zeros(len(system.names))))
    for rows in (gated, diodes):
        if free.size and rows:
            weights = np.array([row for row, _ in rows])
            excess = weights @ unknowns + np.array([offset for _, offset in rows])
            step, left, _ = _solve(weights @ free, excess)
            unknowns = unknowns - free @ step
            free = free @ left
    return unknowns


def _with_loops(system: _System, unknowns: Matrix, free: Matrix) -> tuple[Matrix, Matrix]:
    """Let a current that runs freely through windings and a stiff voltage be its own variable.

    What circulates through positions and windings alone shares evenly, its drops see to that; a
    current on through a voltage branch is fixed by nothing in the state. Gives the solution, and
    what is still free in it.
    """
    through = _net_balances(system) @ free if free.size else free
    if not through.size or np.abs(through).max() < _LOOSE:
        return unknowns, free
    _, sizes, directions = np.linalg.svd(through, full_matrices=True)
    held = int(np.sum(sizes > _LOOSE))
    for direction in directions[:held]:
        along = free @ direction
        for core, windings in _cores(system.cluster).items():
            rows = [system.currents[w.name] for w in windings]
            row = max(rows, key=lambda k: abs(along[k]))
            if abs(along[row]) > _LOOSE:
                unknowns = unknowns.copy()
                unknowns[:, system.column(loop_name(core))] += along / along[row]
                break
    return unknowns, free @ directions[held:].T


def _net_balances(system: _System) -> Matrix:
    """A row a net: the current that links leave to the voltage branches there."""
    rows: dict[str, Matrix] = {}
    for link in system.cluster.links:
        if link.name not in system.currents:
            continue
        for net, sign in zip(link.nets, (1.0, -1.0), strict=True):
            row = rows.setdefault(net, np.zeros(system.size))
            row += sign * system.through(link)
    return np.array([rows[net] for net in sorted(rows)]).reshape(len(rows), system.size)


def _off_voltages(system: _System, on: frozenset[str], unknowns: Matrix) -> dict[str, Matrix]:
    return {
        link.name: system.across(link) @ unknowns + system.vector(link.step)
        for link in system.cluster.positions
        if link.name not in on
    }
