"""Voltages of voltage branches: stated ones are variables, the others follow where they can.

SEPIC: the coupling capacitor's ends are tied to the input by inductors, so v(C1) = v(in)
two capacitors in series across 800 V share it by 1/C
a flying capacitor hangs between switches only: undetermined, and a variable of its own
"""

from collections.abc import Mapping, Sequence

import networkx as nx
import numpy as np

from rulecheck.demand.offsets import Offsets
from rulecheck.stage import Branch, BranchKind, Position, Transformer
from rulecheck.values import AffineForm, Interval, variable
from rulecheck.values.record import Record


class Voltages(Record):
    """The form of every voltage branch, in base variables `v(NAME)`."""

    forms: Mapping[str, AffineForm]
    origins: Mapping[str, str]
    undetermined: tuple[Branch, ...]
    potentials: Offsets
    """Nets tied by voltage branches alone: the rigid islands."""
    averages: Offsets
    """Nets tied by voltage branches, inductors and windings: mean potentials."""
    charged_through: Mapping[str, tuple[str, AffineForm]]
    """Connecting position -> the net before it, and that net's voltage over the far side's
    discharged capacitor."""
    ranges: Mapping[str, Interval]
    """Of variables that no branch states but that follow from stated ones."""
    rivals: Mapping[str, tuple[AffineForm, ...]]
    """By diode into a capacitor: what else can hold the capacitor up while it is off."""


def name_of(branch: Branch) -> str:
    """`v(battery)`, `v(C7)`, `i(L1)`, `i(pump/U)`."""
    letter = "v" if branch.kind is BranchKind.VOLTAGE else "i"
    return f"{letter}({branch.name.removeprefix('port/')})"


class _Found:
    """What is known so far; grows while one derivation after another adds to it."""

    def __init__(self) -> None:
        self.forms: dict[str, AffineForm] = {}
        self.origins: dict[str, str] = {}
        self.rigid = Offsets()
        self.averages = Offsets()
        self.charged_through: dict[str, tuple[str, AffineForm]] = {}
        self.ranges: dict[str, Interval] = {}
        self.rivals: dict[str, tuple[AffineForm, ...]] = {}

    def settle(self, branch: Branch, form: AffineForm, origin: str) -> None:
        self.forms[branch.name] = form
        self.origins[branch.name] = origin
        self.rigid.tie(branch.start, branch.end, form)
        self.averages.tie(branch.start, branch.end, form)

    def state(self, branch: Branch, origin: str) -> None:
        """A variable of its own, unless the voltage between its nets is fixed already."""
        tied = self.rigid.difference(branch.start, branch.end)
        if tied is None:
            self.settle(branch, variable(name_of(branch)), origin)
        else:
            self.settle(branch, tied, f"in a loop of voltages: {tied.text()}")

    def open_among(self, branches: Sequence[Branch]) -> tuple[Branch, ...]:
        return tuple(b for b in branches if b.name not in self.forms)


def derive_voltages(
    branches: Sequence[Branch], transformers: Sequence[Transformer], positions: Sequence[Position]
) -> Voltages:
    """Tie what is stated, then derive the rest by the mean-voltage walk and by 1/C."""
    voltage = [b for b in branches if b.kind is BranchKind.VOLTAGE]
    stated = sorted((b for b in voltage if b.given is not None), key=lambda b: not b.port)
    found = _Found()
    for branch in stated:
        found.state(branch, "stated")
    _tie_means(branches, transformers, found.averages)
    _derive(found, voltage)
    _share(found, voltage)
    _derive(found, voltage)
    ranges = {name_of(b): b.given for b in stated if b.given is not None}
    _through_ties(found.open_among(voltage), positions, ranges, found)
    left = found.open_among(voltage)
    for branch in left:
        found.state(branch, "nobody states it and nothing derives it")
    return Voltages(
        found.forms,
        found.origins,
        left,
        found.rigid,
        found.averages,
        found.charged_through,
        found.ranges,
        found.rivals,
    )


def _tie_means(
    branches: Sequence[Branch], transformers: Sequence[Transformer], averages: Offsets
) -> None:
    """Over a period inductors and windings carry no DC voltage."""
    zero = AffineForm()
    for branch in branches:
        if branch.kind is BranchKind.CURRENT and branch.part:
            averages.tie(branch.start, branch.end, zero)
    for transformer in transformers:
        for start, end in transformer.windings:
            averages.tie(start, end, zero)


def _derive(found: _Found, voltage: Sequence[Branch]) -> None:
    for branch in found.open_among(voltage):
        mean = found.averages.difference(branch.start, branch.end)
        if mean is not None:
            why = "mean voltage (inductors and windings carry no DC voltage)"
            found.settle(branch, mean, f"{why}: {mean.text()}")


def _share(found: _Found, voltage: Sequence[Branch]) -> None:
    """Capacitors in series across a known voltage share it by 1/C.

    That is the minimum of the stored energy over the potentials of the nets between them. A
    capacitor that closes no loop with stated voltages or other capacitors takes no part.
    """
    open_ = [b for b in found.open_among(voltage) if b.value]
    in_loops = _in_loops(open_, found.rigid)
    looped = [b for b in open_ if b.name in in_loops]
    potentials = _least_energy(looped, found.rigid) if looped else {}
    forms = {b.name: _difference(b, potentials, found.rigid) for b in looped}
    for branch in looped:
        form = forms[branch.name]
        found.settle(branch, form, f"series capacitors share by 1/C: {form.text()}")


def _difference(branch: Branch, potentials: Mapping[str, AffineForm], rigid: Offsets) -> AffineForm:
    start, end = rigid.root(branch.start), rigid.root(branch.end)
    return (
        potentials[start] - potentials[end] + rigid.offset(branch.start) - rigid.offset(branch.end)
    )


def _least_energy(looped: Sequence[Branch], rigid: Offsets) -> dict[str, AffineForm]:
    """Potentials of the islands' roots that minimise the sum of C v^2 / 2."""
    roots = sorted({rigid.root(n) for b in looped for n in (b.start, b.end)})
    index = {root: i for i, root in enumerate(roots)}
    steps = [rigid.offset(b.start) - rigid.offset(b.end) for b in looped]
    names = sorted({name for step in steps for name in step.names})
    laplacian = np.zeros((len(roots), len(roots)))
    sources = np.zeros((len(roots), len(names)))
    for branch, step in zip(looped, steps, strict=True):
        i, j = index[rigid.root(branch.start)], index[rigid.root(branch.end)]
        capacitance = branch.value or 0.0
        for a, b in ((i, j), (j, i)):
            laplacian[a, a] += capacitance
            laplacian[a, b] -= capacitance
        row = np.array([dict(step.terms).get(name, 0.0) for name in names])
        sources[i] -= capacitance * row
        sources[j] += capacitance * row
    scale = float(np.abs(laplacian).max()) or 1.0
    offsets = np.linalg.pinv(laplacian / scale, rcond=1e-9, hermitian=True) @ (sources / scale)
    return {
        root: AffineForm.of(dict(zip(names, (float(x) for x in offsets[i]), strict=True)))
        for root, i in index.items()
    }


def _in_loops(open_: Sequence[Branch], rigid: Offsets) -> frozenset[str]:
    """Capacitors whose removal would not part the islands: they close a loop."""
    graph: nx.MultiGraph[str] = nx.MultiGraph()
    for branch in open_:
        graph.add_edge(rigid.root(branch.start), rigid.root(branch.end), key=branch.name)
    cut = {frozenset(pair) for pair in nx.bridges(graph)}
    return frozenset(name for a, b, name in graph.edges(keys=True) if frozenset((a, b)) not in cut)


def _through_ties(
    left: Sequence[Branch],
    positions: Sequence[Position],
    voltages: Mapping[str, Interval],
    found: _Found,
) -> None:
    """A capacitor behind a connecting switch has, in operation, the voltage before the switch.

    Only where the switch's far end stands rigidly over the capacitor's second net, by a voltage
    that keeps its sign: behind an alternating one the capacitor would hold a peak. Behind several
    diodes it follows the highest of the voltages before them.
    """
    for branch in left:
        before = [(p, form) for p in positions if (form := _before(branch, p, found.rigid))]
        if any(_alternates(voltages.get(n)) for _, form in before for n in form.names):
            continue
        if len(before) == 1:
            position, form = before[0]
            found.settle(branch, form, f"equal to {form.text()} while {position.name} connects it")
            net = position.end if position.start == branch.start else position.start
            found.charged_through[position.name] = (net, form)
        elif before and all(not p.gated and p.end == branch.start for p, _ in before):
            spans = [_range(form, voltages) for _, form in before]
            names = " and ".join(p.name for p, _ in before)
            found.state(branch, f"the highest voltage before {names}")
            found.ranges[name_of(branch)] = Interval(
                max(span.low for span in spans), max(span.high for span in spans)
            )
            for p, _ in before:
                found.rivals[p.name] = tuple(form for q, form in before if q is not p)


def _range(form: AffineForm, voltages: Mapping[str, Interval]) -> Interval:
    total = Interval(0.0, 0.0)
    for name, coefficient in form.terms:
        total += voltages[name].scaled(coefficient)
    return total


def _alternates(voltage: Interval | None) -> bool:
    return voltage is None or voltage.low < 0.0 < voltage.high


def _before(branch: Branch, position: Position, rigid: Offsets) -> AffineForm | None:
    """The voltage of a switch's far end over the capacitor's second net, where it is known."""
    ends = (position.start, position.end)
    if branch.start not in ends:
        return None
    far = ends[1] if ends[0] == branch.start else ends[0]
    return rigid.difference(far, branch.end)
