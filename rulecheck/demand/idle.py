"""The idle interval of discontinuous conduction: every switch off, the inductors without voltage.

    boost      M1 on, then D1 on, then i(L1) rests at zero: M1 has v(in), D1 has v(in) - v(out)

A group can idle where diodes stop all the stiff currents into it at zero. Ringing with the
capacitances of the switches is not looked at. Erickson and Maksimovic, Fundamentals of Power
Electronics, chapter on the discontinuous conduction mode (from memory).
"""

from collections.abc import Iterable, Mapping, Sequence

from rulecheck.demand.analysis import Worked
from rulecheck.demand.demands import PositionDemand
from rulecheck.demand.equations import Solution
from rulecheck.demand.evaluate import Sample, clipped, widened_off, withstood
from rulecheck.demand.offsets import Offsets
from rulecheck.demand.readings import Amendment, across, feasible, free_ways, inequalities
from rulecheck.demand.states import Laws, RawState
from rulecheck.demand.stiff import Box, tightened
from rulecheck.demand.topology import magnetising_name
from rulecheck.demand.voltages import name_of
from rulecheck.stage import BranchKind, Position
from rulecheck.values import AffineForm
from rulecheck.values.record import Record

_ALL_OFF = RawState((), Solution({}, {}, {}, (), ()))
_TOUCHES = 1e-9


class Idle(Record):
    """What one group's idle state leaves of the variables, and the potentials in it."""

    box: Box
    off_voltages: dict[str, AffineForm]
    """Of the positions whose voltage the idle network fixes."""


def find_idle(worked: Worked, index: int) -> Idle | None:
    """The group's idle state, or None where its currents never all rest or it is not legal."""
    cluster, amended = worked.topology.clusters[index], worked.reading.amended
    if index in worked.connecting:
        return None
    if any(link.ohm for link in cluster.links):
        return None
    resting = _resting_currents(worked, index)
    if not resting:
        return None
    potentials = _potentials(worked, resting)
    found: dict[str, AffineForm] = {}
    for link in cluster.positions:
        assert link.position is not None
        form = potentials.difference(link.position.start, link.position.end)
        if form is not None:
            found[link.name] = form
    box = worked.box.only(name for form in found.values() for name in form.names)
    positions = [link.position for link in cluster.positions if link.position]
    narrowed = tightened(box, _not_forward_biased(positions, found, amended))
    return None if narrowed is None else Idle(narrowed, found)


def with_idle(
    demand: PositionDemand,
    position: Position,
    idle: Idle | None,
    amended: Mapping[str, Amendment],
) -> PositionDemand:
    """The demand with its off voltage widened by the idle state, where there is one."""
    if idle is None or position.name not in idle.off_voltages:
        return demand
    form = idle.off_voltages[position.name]
    span = clipped(idle.box.range_of(form), withstood(position, amended))
    return widened_off(demand, Sample(_ALL_OFF, form, span, idle.box))


def _not_forward_biased(
    positions: Sequence[Position],
    voltages: Mapping[str, AffineForm],
    amended: Mapping[str, Amendment],
) -> Iterable[AffineForm]:
    for position in positions:
        if position.name in voltages:
            form = voltages[position.name]
            forward, reverse = free_ways(position, amended)
            yield from [-form] if forward else []
            yield from [form] if reverse else []


def _potentials(worked: Worked, resting: frozenset[str]) -> Offsets:
    """Stiff voltages as they are; what carries a resting current has no voltage."""
    offsets, zero = Offsets(), AffineForm()
    for branch in worked.stage.branches:
        if branch.kind is BranchKind.VOLTAGE:
            offsets.tie(branch.start, branch.end, worked.voltages.forms[branch.name])
    for branch in worked.stage.branches:
        if branch.kind is BranchKind.CURRENT and name_of(branch) in resting:
            offsets.tie(branch.start, branch.end, zero)
    for core in worked.stage.transformers:
        if magnetising_name(core) in resting:
            for start, end in core.windings:
                offsets.tie(start, end, zero)
    return offsets


def _resting_currents(worked: Worked, index: int) -> frozenset[str]:
    """The currents of the inductors around the group, where diodes stop all of them together.

    Empty where some current into the group does not stop, or is not an inductor's.
    """
    laws = Laws(worked.topology.ties, worked.box)
    into = worked.topology.clusters[index].into
    forms = [into[net] for net in sorted(into) if not laws.vanishes(into[net])]
    names = frozenset(name for form in forms for name in form.names)
    inductors = {carrier.name for carrier, _ in worked.routes if not carrier.port}
    if not names <= inductors:
        return frozenset()
    stopped = [form for form in forms if _is_stopped(worked, index, form)]
    alone = {form.names[0]: AffineForm() for form in stopped if len(form.names) == 1}
    for form in forms:
        rest = form.substitute(alone)
        if not laws.vanishes(rest) and not any(_ratio(rest, other) for other in stopped):
            return frozenset()
    return names


def _ratio(form: AffineForm, other: AffineForm) -> float:
    """The factor by which one form is a multiple of the other, 0 where it is none."""
    if not form.terms or form.names != other.names:
        return 0.0
    factor = form.terms[0][1] / other.terms[0][1]
    return factor if (form - other.scaled(factor)).is_zero else 0.0


def _is_stopped(worked: Worked, index: int, form: AffineForm) -> bool:
    """True where a diode carries this current and its range ends at zero."""
    cluster = worked.topology.clusters[index]
    span = worked.box.range_of(form)
    if not span.bounded or not span.contains(0.0) or span.magnitude < _TOUCHES:
        return False
    states = feasible(worked.reading, index, _box_of(worked, index))
    amended = worked.reading.amended
    diodes = [p.name for p in cluster.positions if p.name not in cluster.gated | amended.keys()]
    carried = [s.solution.on_currents[d] for s, _ in states for d in diodes if d in s.on]
    if not any(_ratio(current, form) for current in carried):
        return False
    if min(abs(span.low), abs(span.high)) < _TOUCHES:
        return True
    return len(form.names) > 1 and _kept(worked, index, form) != _kept(worked, index, -form)


def _box_of(worked: Worked, index: int) -> Box:
    cluster = worked.topology.clusters[index]
    names = {n for form in cluster.into.values() for n in form.names}
    for state in worked.reading.states[index]:
        for form in (*state.solution.off_voltages.values(), *state.solution.potentials.values()):
            names |= set(form.names)
        for form in inequalities(cluster, state, worked.reading.amended):
            names |= set(form.names)
    return worked.box.only(names)


def _kept(worked: Worked, index: int, form: AffineForm) -> bool:
    """True where this sum of currents can stay positive: its inductors see both voltages."""
    cluster, amended = worked.topology.clusters[index], worked.reading.amended
    states = [
        (state, box)
        for state, box in feasible(worked.reading, index, _box_of(worked, index))
        if not any(_ratio(g, form) < 0.0 for g in inequalities(cluster, state, amended))
    ]
    for carrier, route in worked.routes:
        if carrier.name not in form.names or [step.cluster for step in route.steps] != [index]:
            continue
        spans = [
            worked.box.range_of(route.fixed + across(route.steps[0], state)) for state, _ in states
        ]
        if not any(s.high > 0.0 for s in spans) or not any(s.low < 0.0 for s in spans):
            return False
    return bool(states)
