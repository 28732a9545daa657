"""Which states the drawn hardware allows, and whether the stage can work with them.

A free path (a body or anti-parallel diode) forbids states in which it would be forward-biased
while its position is off. If without those states the stage cannot work, the device must not
excuse itself from its own job: then all legal states count.
"""

import math
from collections.abc import Mapping, Sequence
from enum import StrEnum
from itertools import product

from rulecheck.demand.routes import Carrier, Route, Step
from rulecheck.demand.sign_cases import Case
from rulecheck.demand.states import RawState
from rulecheck.demand.stiff import Box, tightened
from rulecheck.demand.ties import build_ties
from rulecheck.demand.topology import Cluster, Link
from rulecheck.stage import Position
from rulecheck.values import AffineForm, Interval, total_of
from rulecheck.values.record import Record, field, replace

_MOST_MIXTURES = 64
_VOLT_SECOND = 1e-6
_NO_CURRENT = 1e-5
"""Ampere."""


class Failure(Record):
    """A carrier that in some case sees voltage of one sign only: its current would run off."""

    carrier: Carrier
    case: Case
    clusters: tuple[int, ...]
    why: str
    always: bool = True
    """It fails in every one of the cases that the carrier has to serve."""


class Amendment(StrEnum):
    """How a position is read that the stage cannot work with as it is drawn."""

    IGNORED = "ignored"
    """Its free paths forbid nothing: it is taken to obey its gate."""
    TURNED = "turned"
    """Its free path is taken to point the other way."""


class Reading(Record):
    """For each cluster its states, and the positions that are not taken as drawn."""

    clusters: Sequence[Cluster]
    states: Sequence[Sequence[RawState]]
    amended: Mapping[str, Amendment] = field(default_factory=dict)

    def amending(self, more: Mapping[str, Amendment]) -> "Reading":
        return replace(self, amended={**self.amended, **more})


def free_ways(position: Position, amended: Mapping[str, Amendment]) -> tuple[bool, bool]:
    """In which directions the position conducts freely, as it is read: forward, reverse."""
    forward, reverse = position.free_forward, position.free_reverse
    amendment = amended.get(position.name)
    if amendment is Amendment.TURNED:
        return reverse, forward
    return (False, False) if amendment is Amendment.IGNORED else (forward, reverse)


def inequalities(
    cluster: Cluster, state: RawState, amended: Mapping[str, Amendment]
) -> list[AffineForm]:
    """Forms that are zero or positive in the state: diodes, free paths, connected voltages."""
    forms: list[AffineForm] = []
    for link in cluster.positions:
        forms += _of_position(link, state, amended)
    if state.equal:
        ties = build_ties(state.equal)
        forms += [ties.reduced(form) for form in forms]
    for form in state.equal:
        forms += [form, -form]
    return forms


def _of_position(link: Link, state: RawState, amended: Mapping[str, Amendment]) -> list[AffineForm]:
    position = link.position
    if position is None:
        return []
    forward, reverse = free_ways(position, amended)
    if link.name in state.on:
        if position.gated or forward == reverse:
            return []
        current = state.solution.on_currents[link.name]
        return [current if forward else -current]
    voltage = state.solution.off_voltages[link.name]
    forms = []
    if forward:
        forms.append(-voltage)
    if reverse:
        forms.append(voltage)
    return forms


def feasible(reading: Reading, index: int, box: Box) -> list[tuple[RawState, Box]]:
    """The cluster's states that the box leaves possible, each with its narrowed box."""
    cluster, amended = reading.clusters[index], reading.amended
    found = []
    for state in reading.states[index]:
        narrowed = tightened(box, inequalities(cluster, state, amended))
        rectifies = not cluster.gated and not state.equal
        if narrowed is not None and (not rectifies or _conducts(cluster, state, narrowed)):
            found.append((state, narrowed))
    return found


def _conducts(cluster: Cluster, state: RawState, box: Box) -> bool:
    """False where a diode of a rectifier would be on with no current whatever the variables."""
    for link in cluster.positions:
        if link.name in state.on and link.position and not link.position.gated:
            span = box.range_of(state.solution.on_currents[link.name])
            if span.magnitude < _NO_CURRENT / 10:
                return False
    return True


def reach(reading: Reading, route: Route, box: Box) -> Interval | None:
    """The voltages that a carrier can see over the states; None where some group has no state.

    Over all mixtures of the groups' states, each summed as one form so that a voltage common to
    two groups cancels; past a bound on the mixtures the groups' ranges are added instead.
    """
    choices = [feasible(reading, step.cluster, box) for step in route.steps]
    if not all(choices):
        return None
    if math.prod(len(options) for options in choices) > _MOST_MIXTURES:
        return _added(route, choices, box)
    span: Interval | None = None
    for mixture in product(*choices):
        forms = [across(step, state) for step, (state, _) in zip(route.steps, mixture, strict=True)]
        common = _common_box(box, [narrowed for _, narrowed in mixture])
        if common is None:
            continue
        here = common.range_of(total_of([route.fixed, *forms]))
        span = here if span is None else span.hull(here)
    return span


def across(step: Step, state: RawState) -> AffineForm:
    """The step's part of its carrier's voltage in a state of its group."""
    potentials = state.solution.potentials
    return (potentials[step.enter] - potentials[step.leave]).scaled(step.weight)


def _common_box(box: Box, narrowed: Sequence[Box]) -> Box | None:
    """What all of the states leave of the box."""
    changed: dict[str, Interval] = {}
    for other in narrowed:
        for name, span in other.ranges.items():
            if span != box.ranges[name]:
                both = changed.get(name, box.ranges[name]).meet(span)
                if both is None:
                    return None
                changed[name] = both
    return box.with_ranges(changed) if changed else box


def _added(route: Route, choices: Sequence[Sequence[tuple[RawState, Box]]], box: Box) -> Interval:
    total = box.range_of(route.fixed)
    for step, options in zip(route.steps, choices, strict=True):
        spans = [narrowed.range_of(across(step, state)) for state, narrowed in options]
        total += Interval(min(s.low for s in spans), max(s.high for s in spans))
    return total


def disabled(reading: Reading, index: int, box: Box) -> tuple[str, ...]:
    """Gated positions that some legal state puts on, or off, but no possible state does.

    Whatever forbids that state takes the position's job away, so it must not decide.
    """
    possible = [state for state, _ in feasible(reading, index, box)]
    legal = reading.states[index]
    found = []
    for name in sorted(reading.clusters[index].gated):
        for on in (True, False):
            asked = any((name in state.on) == on for state in legal)
            given = any((name in state.on) == on for state in possible)
            if asked and not given:
                found.append(name)
    return tuple(dict.fromkeys(found))


def failures(
    reading: Reading,
    routes: Sequence[tuple[Carrier, Route]],
    box: Box,
    cases_of: Mapping[str, Sequence[Case]],
) -> list[Failure]:
    """Carriers that would not keep volt-second balance in one of their required cases."""
    found = []
    for carrier, route in routes:
        clusters = tuple(sorted({step.cluster for step in route.steps}))
        if not clusters:
            continue
        controlled = any(reading.clusters[index].gated for index in clusters)
        cases = _instants(cases_of[carrier.name], box, controlled)
        choices = sum(len(reading.clusters[index].positions) for index in clusters)
        if carrier.port and not carrier.feeds and choices == 1:
            whys = [_why_over_all(reading, route, cases, box)] * len(cases)
        else:
            whys = [_why_in(reading, carrier, route, case.narrow(box), box) for case in cases]
        failing = [(case, why) for case, why in zip(cases, whys, strict=True) if why]
        if failing:
            case, why = failing[0]
            found.append(Failure(carrier, case, clusters, why, len(failing) == len(cases)))
    return found


def _why_over_all(reading: Reading, route: Route, cases: Sequence[Case], box: Box) -> str:
    """An AC current port behind one switch sees both signs over its period, not at each instant."""
    spans = [reach(reading, route, case.narrow(box)) for case in cases]
    known = [span for span in spans if span is not None]
    if not known:
        return _why_not(None)
    return _why_not(Interval(min(s.low for s in known), max(s.high for s in known)))


def _why_in(reading: Reading, carrier: Carrier, route: Route, narrow: Box, box: Box) -> str:
    span = reach(reading, route, narrow)
    return _why_not_fed(carrier, span, box) if carrier.feeds else _why_not(span)


def _instants(cases: Sequence[Case], box: Box, controlled: bool) -> list[Case]:
    """A controlled stage must work at every instant, a rectifier only over the line period."""
    if not controlled:
        return list(cases)
    return [instant for case in cases for instant in case.at_instants(box.phase_sets)]


def _why_not(span: Interval | None) -> str:
    if span is None:
        return "no state is possible"
    scale = max(1.0, min(span.magnitude, 1e9)) * _VOLT_SECOND
    if span.high <= scale:
        return "no state gives it positive voltage"
    if span.low >= -scale:
        return "no state gives it negative voltage"
    return ""


def _why_not_fed(carrier: Carrier, span: Interval | None, stated: Box) -> str:
    """A DC current port needs the sign of voltage that takes its power the stated way.

    Its current leaves its first net, its voltage is first over second net; the branch runs from
    the second to the first. A port that both draws and supplies says nothing of its voltage.
    """
    if span is None:
        return "no state is possible"
    current = stated.ranges[carrier.name]
    out = 0.0 if current.low < 0.0 < current.high or not current.bounded else current.middle
    positive = (out > 0.0) == (carrier.feeds == "supplies")
    reached = -span.low if positive else span.high
    if out == 0.0 or reached > _VOLT_SECOND:
        return ""
    return f"no state gives port {carrier.port} {'positive' if positive else 'negative'} voltage"


def sustainable(
    reading: Reading, route: Route, box: Box, cases: Sequence[Case], name: str, positive: bool
) -> bool:
    """True where a current of that sign can be kept in some case: both voltages are at hand."""
    # leave zero itself out: a current of zero satisfies every diode
    signed = box.ranges[name].part_of_sign(positive, _NO_CURRENT)
    if signed is None:
        return False
    for case in cases:
        span = reach(reading, route, case.narrow(box.with_ranges({name: signed})))
        if not _why_not(span):
            return True
    return False
