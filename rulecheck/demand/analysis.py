"""The whole procedure on one stage, step by step: voltages, topology, states, currents, ranges."""

from collections.abc import Iterable, Iterator, Mapping, Sequence
from itertools import product

from rulecheck.demand.alternating import alternating_parts
from rulecheck.demand.balance import unbalanced
from rulecheck.demand.currents import (
    CurrentRange,
    Means,
    currents_without_route,
    derive_means,
    range_of_current,
)
from rulecheck.demand.first_box import first_box
from rulecheck.demand.least_loss import without_lossy
from rulecheck.demand.means import collect_unknowns
from rulecheck.demand.power import PortCurrents
from rulecheck.demand.readings import (
    Amendment,
    Failure,
    Reading,
    disabled,
    failures,
    feasible,
    inequalities,
)
from rulecheck.demand.routes import Carrier, Route, find_carriers, find_routes
from rulecheck.demand.sign_cases import Case, cases_for, port_cases
from rulecheck.demand.states import (
    MOST_POSITIONS,
    Laws,
    RawState,
    find_connecting_states,
    find_states,
)
from rulecheck.demand.stiff import Box
from rulecheck.demand.surroundings import Surroundings
from rulecheck.demand.topology import Cluster, Topology, build_topology
from rulecheck.demand.voltages import Voltages, derive_voltages, name_of
from rulecheck.stage import Position, Stage
from rulecheck.values import AffineForm, Interval
from rulecheck.values.record import Record, replace

_MOST_RECTIFIER_STATES = 32


_Names = Sequence[frozenset[str]]


class Worked(Record):
    """Everything the procedure found for one reading of the stage."""

    stage: Stage
    voltages: Voltages
    topology: Topology
    currents: Mapping[str, CurrentRange]
    port_currents: PortCurrents
    box: Box
    reading: Reading
    routes: tuple[tuple[Carrier, Route], ...]
    failures: tuple[Failure, ...]
    too_large: frozenset[int]
    connecting: frozenset[int]
    """Clusters without a stiff current, whose states connect voltages."""
    means: Means
    pulsed: frozenset[str]
    """Diodes that only carry the charging pulses of a capacitor."""


class _Routed(Record):
    """Carriers with their routes, and by carrier the variables and the cases that matter to it."""

    routes: Sequence[tuple[Carrier, Route]]
    local: Mapping[str, frozenset[str]]
    cases: Mapping[str, Sequence[Case]]


def work_out(stage: Stage, pulsed: frozenset[str] = frozenset()) -> Worked:
    """Analyse the stage as its branches stand; `pulsed` names diodes that carry only pulses."""
    voltages = derive_voltages(stage.branches, stage.transformers, stage.positions)
    topology = build_topology(
        stage.positions, stage.branches, stage.transformers, voltages.potentials
    )
    box, port_currents = first_box(stage, voltages)
    laws = Laws(topology.ties, box)
    states, too_large, connecting = _all_states(topology, laws, pulsed)
    carriers = find_carriers(stage.branches, stage.transformers, stage.ports)
    routes = find_routes(carriers, topology)
    by_port = [port_cases(port, box) for port in stage.ports]
    never = frozenset(p.name for p in topology.tie_positions if _stays_off(p, voltages, box))
    slow = _rectifier_states(topology, states)
    means = _means(stage, voltages, port_currents, carriers, never, slow)
    box = replace(box, means=means.forms)
    names = _names_by_cluster(topology, states)
    local = {
        c.name: box.names_with(_names_of(c, r, topology.clusters, names, means)) for c, r in routes
    }
    cases = {name: cases_for(found, by_port) for name, found in local.items()}
    routed = _Routed(routes, local, cases)
    reading, failed = _choose_reading(topology, states, routed, box)
    box = _with_peaks(box, reading, connecting)
    currents = _currents(stage, routed, means, box, reading)
    given = {name_of(b) for b in stage.branches if b.given is not None}
    currents |= currents_without_route(carriers, currents, given, means, box)
    box = _with_currents(box, currents)
    return Worked(
        stage,
        voltages,
        topology,
        currents,
        port_currents,
        box,
        reading,
        routes,
        tuple(failed),
        too_large,
        connecting,
        means,
        pulsed,
    )


def _all_states(
    topology: Topology, laws: Laws, pulsed: frozenset[str]
) -> tuple[list[Sequence[RawState]], frozenset[int], frozenset[int]]:
    states: list[Sequence[RawState]] = []
    too_large, connecting = set(), set()
    for index, cluster in enumerate(topology.clusters):
        if len(cluster.positions) > MOST_POSITIONS:
            too_large.add(index)
            states.append(())
            continue
        found = without_lossy(cluster, find_states(cluster, laws, pulsed), laws)
        if not any(state.on for state in found) and cluster.positions:
            connecting.add(index)
            found = find_connecting_states(cluster, laws)
        states.append(found)
    return states, frozenset(too_large), frozenset(connecting)


def _means(
    stage: Stage,
    voltages: Voltages,
    port_currents: PortCurrents,
    carriers: Sequence[Carrier],
    never: frozenset[str],
    slow: Sequence[frozenset[str]],
) -> Means:
    unknowns = collect_unknowns(
        stage.branches,
        stage.transformers,
        [p for p in stage.positions if p.name not in never],
        stage.ports,
        port_currents.ranges,
        voltages,
    )
    stated = {name_of(b) for b in stage.branches if b.given is not None}
    wanted = [carrier for carrier in carriers if carrier.name not in stated]
    return derive_means(unknowns, wanted, stage.transformers, slow)


def _stays_off(position: Position, voltages: Voltages, box: Box) -> bool:
    """A position between rigid voltages that are never equal carries nothing."""
    if position.name in voltages.charged_through:
        return False
    form = voltages.potentials.difference(position.start, position.end)
    return form is not None and not box.range_of(form).contains(0.0)


def _rectifier_states(
    topology: Topology, states: Sequence[Sequence[RawState]]
) -> list[frozenset[str]]:
    """Which diodes are off together, over all mixtures of groups that have only diodes."""
    choices = []
    for cluster, found in zip(topology.clusters, states, strict=True):
        if cluster.gated or not cluster.positions or not found:
            continue
        names = {link.name for link in cluster.positions}
        choices.append([frozenset(names - set(state.on)) for state in found])
    count = 1
    for options in choices:
        count *= len(options)
    if not choices or count > _MOST_RECTIFIER_STATES:
        return []
    return [frozenset().union(*mixture) for mixture in product(*choices)]


def _names_by_cluster(
    topology: Topology, states: Sequence[Sequence[RawState]]
) -> list[frozenset[str]]:
    """The variables that a cluster's forms speak of."""
    found = []
    for cluster, mine in zip(topology.clusters, states, strict=True):
        names: set[str] = set()
        for state in mine:
            solution = state.solution
            for form in (
                *solution.off_voltages.values(),
                *solution.on_currents.values(),
                *solution.potentials.values(),
                *inequalities(cluster, state, {}),
            ):
                names |= set(form.names)
        found.append(frozenset(names))
    return found


def _names_of(
    carrier: Carrier, route: Route, clusters: Sequence[Cluster], by_cluster: _Names, means: Means
) -> set[str]:
    names = {carrier.name, *route.fixed.names}
    names |= {n for form in means.rectified.get(carrier.name, ()) for n in form.names}
    for step in route.steps:
        names |= by_cluster[step.cluster]
        for link in clusters[step.cluster].positions:
            names |= set(means.branches.get(link.name, AffineForm()).names)
    return names


def _choose_reading(
    topology: Topology, states: Sequence[Sequence[RawState]], routed: _Routed, box: Box
) -> tuple[Reading, list[Failure]]:
    """The drawn devices limit the control where the stage still works so.

    Where it does not, the fewest positions are amended with which it does: no device excuses
    itself from its own job, and none is blamed for another's.
    """
    reading = Reading(topology.clusters, states)
    names = _names_by_cluster(topology, states)
    troubled = _trouble(reading, routed, box, names, range(len(states)))
    for group in _overlapping(troubled):
        for amendments in _amendments(reading, group):
            tried = reading.amending(amendments)
            if not _trouble(tried, routed, box, names, group):
                reading = tried
                break
    return reading, _failures(reading, routed, box)


def _trouble(
    reading: Reading,
    routed: _Routed,
    box: Box,
    names: Sequence[frozenset[str]],
    clusters: Iterable[int],
) -> list[frozenset[int]]:
    """Sets of clusters that do not work together, among those given."""
    among = set(clusters)
    near = [(c, r) for c, r in routed.routes if among & {step.cluster for step in r.steps}]
    found = [
        frozenset(failure.clusters)
        for failure in _failures(reading, replace(routed, routes=near), box)
    ]
    found += [frozenset((k,)) for k in sorted(among) if disabled(reading, k, box.only(names[k]))]
    return found


def _overlapping(sets: Sequence[frozenset[int]]) -> list[frozenset[int]]:
    """The sets, those that share a member united."""
    united: list[frozenset[int]] = []
    for one in sets:
        touching = [other for other in united if one & other]
        united = [other for other in united if not one & other]
        united.append(one.union(*touching))
    return united


def _amendments(reading: Reading, group: Iterable[int]) -> Iterator[dict[str, Amendment]]:
    """What may be read otherwise than drawn: one position, all gated ones, all of them."""
    limiting = [
        link.position
        for index in sorted(group)
        for link in reading.clusters[index].positions
        if link.position and (link.position.free_forward or link.position.free_reverse)
    ]
    gated = {p.name: Amendment.IGNORED for p in limiting if p.gated}
    diodes = {p.name: Amendment.TURNED for p in limiting if not p.gated}
    for name in (*diodes, *gated):
        yield {name: Amendment.TURNED}
    for name, amendment in gated.items():
        yield {name: amendment}
    yield gated
    yield {**gated, **dict.fromkeys(diodes, Amendment.IGNORED)}


def _failures(reading: Reading, routed: _Routed, box: Box) -> list[Failure]:
    found = []
    for carrier, route in routed.routes:
        if carrier.port and not route.steps:
            continue
        mine = box.only(routed.local[carrier.name])
        found += failures(reading, [(carrier, route)], mine, routed.cases)
    if found:
        return found
    wanted = {name for carrier, _ in routed.routes for name in routed.local[carrier.name]}
    return unbalanced(reading, routed.routes, box.only(wanted), routed.cases)


def _currents(
    stage: Stage, routed: _Routed, means: Means, box: Box, reading: Reading
) -> dict[str, CurrentRange]:
    given = {name_of(b): b.given for b in stage.branches if b.given is not None}
    alternating = alternating_parts(stage)
    found: dict[str, CurrentRange] = {}
    for carrier, route in routed.routes:
        stated = given.get(carrier.name)
        if stated is not None:
            found[carrier.name] = CurrentRange(stated, 0.0, "stated", True)
            continue
        if carrier.port:
            continue
        around = Surroundings(
            stage,
            reading,
            route,
            box.only(routed.local[carrier.name]),
            routed.cases[carrier.name],
            carrier.part in alternating,
        )
        found[carrier.name] = range_of_current(carrier, means, around)
    return found


def _with_peaks(box: Box, reading: Reading, connecting: Iterable[int]) -> Box:
    """A capacitor that diodes connect to known voltages has one that some state gives it."""
    for index in connecting:
        spans: dict[str, Interval] = {}
        for state, narrowed in feasible(reading, index, box):
            for name in narrowed.ranges.keys() & box.unsettled if state.equal else ():
                span = narrowed.ranges[name]
                if name.startswith("v(") and span.bounded:
                    spans[name] = spans[name].hull(span) if name in spans else span
        ranges = {**box.ranges, **spans}
        box = replace(box, ranges=ranges, unsettled=box.unsettled - spans.keys())
    return box


def _with_currents(box: Box, currents: Mapping[str, CurrentRange]) -> Box:
    ranges = {**box.ranges, **{name: found.range for name, found in currents.items()}}
    ripples = {name: found.ripple for name, found in currents.items() if found.ripple}
    settled = {name for name, found in currents.items() if found.settled}
    return replace(box, ranges=ranges, ripples=ripples, unsettled=box.unsettled - settled)
