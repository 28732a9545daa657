"""With all gates off: which stiff currents find no free path, and which voltages are shorted."""

from collections.abc import Iterator, Mapping, Sequence
from itertools import pairwise

import networkx as nx

from rulecheck.demand.account import settling_of
from rulecheck.demand.analysis import Worked
from rulecheck.demand.demands import FreeShort, InterruptedCurrent, PositionDemand
from rulecheck.demand.readings import inequalities
from rulecheck.demand.routes import Carrier, find_carriers
from rulecheck.demand.states import RawState
from rulecheck.demand.stiff import Box, tightened
from rulecheck.demand.topology import Cluster, Link
from rulecheck.demand.voltages import name_of
from rulecheck.parts import Kind
from rulecheck.stage import BranchKind, Position
from rulecheck.values import AffineForm, Interval, Unknown, natural_key, variable
from rulecheck.values.record import replace


def find_interrupted(
    worked: Worked, demands: Mapping[str, PositionDemand]
) -> tuple[list[InterruptedCurrent], list[str]]:
    """Currents that all gates off would interrupt, and those that no device here could carry.

    Where every position that could carry a current must also block both polarities, no free path
    can exist: such a stage commutates by overlap or in steps, and that is only noted. Of a current
    whose sign nobody knows both directions are tried, and the current itself stays unknown.
    """
    found: dict[tuple[str, str], InterruptedCurrent] = {}
    noted: list[str] = []
    carriers = {
        carrier.name: carrier
        for carrier in find_carriers(
            worked.stage.branches, worked.stage.transformers, worked.stage.ports
        )
    }
    settle = {name: line for name, _, line in settling_of(worked)}
    for index, cluster in enumerate(worked.topology.clusters):
        if not cluster.gated or index in worked.connecting or not worked.reading.states[index]:
            continue
        for item in _interrupted_in(worked, index, carriers, settle):
            if _could_freewheel(item.positions, demands):
                before = found.get((item.carrier, item.direction))
                more = before.positions if before else ()
                merged = replace(item, positions=(*more, *item.positions))
                found[item.carrier, item.direction] = merged
            else:
                noted.append(
                    f"current of {item.carrier}: with all gates off it has no path; the switches "
                    "block both polarities, so commutation must overlap or go in steps, and a "
                    "clamp must take the current at a trip"
                )
    return list(found.values()), list(dict.fromkeys(noted))


def _interrupted_in(
    worked: Worked, index: int, carriers: Mapping[str, Carrier], settle: Mapping[str, str]
) -> Iterator[InterruptedCurrent]:
    cluster = worked.topology.clusters[index]
    names = {n for form in cluster.into.values() for n in form.names}
    box = worked.box.only((names | _all_names(cluster, worked, index)) & worked.box.ranges.keys())
    for name in sorted(names & carriers.keys(), key=natural_key):
        carrier = carriers[name]
        if carrier.name.startswith("i(magnetising"):
            continue
        for positive in (True, False):
            item = _interrupted(worked, index, box, carrier, positive)
            if item is not None:
                yield replace(item, within=_known(item.within, carrier, box, settle))


def _known(
    within: Interval | Unknown, carrier: Carrier, box: Box, settle: Mapping[str, str]
) -> Interval | Unknown:
    """The range, or what would settle it where its sign is not known."""
    open_names = box.says_nothing(variable(carrier.name))
    if not open_names:
        return within
    lines = " and ".join(settle.get(name, name) for name in open_names)
    return Unknown(f"current of {carrier.part or carrier.port}", lines)


def _all_names(cluster: Cluster, worked: Worked, index: int) -> set[str]:
    names: set[str] = set()
    for state in worked.reading.states[index]:
        for form in inequalities(cluster, state, {}):
            names |= set(form.names)
        for form in state.solution.on_currents.values():
            names |= set(form.names)
    return names & worked.box.ranges.keys()


def _interrupted(
    worked: Worked, index: int, box: Box, carrier: Carrier, positive: bool
) -> InterruptedCurrent | None:
    span = box.ranges[carrier.name]
    small = 0.02 * span.magnitude if span.bounded else 1e-3
    signed = span.part_of_sign(positive, small)
    if signed is None or small == 0.0:
        return None
    cluster = worked.topology.clusters[index]
    flowing = box.with_ranges({carrier.name: signed})
    if any(
        tightened(flowing, _freewheeling(cluster, state)) is not None
        for state in worked.reading.states[index]
        if _is_free(cluster, state)
    ):
        return None
    start, end = (carrier.start, carrier.end) if positive else (carrier.end, carrier.start)
    at_ends = tuple(
        link.name
        for link in cluster.positions
        if link.position and {carrier.start, carrier.end} & {link.position.start, link.position.end}
    )
    return InterruptedCurrent(
        carrier.part or carrier.port,
        f"{start} -> {end}",
        (start, end),
        at_ends or tuple(link.name for link in cluster.positions),
        signed,
    )


def _is_free(cluster: Cluster, state: RawState) -> bool:
    """True where every on position of the state has some free path."""
    return all(
        link.position is not None and (link.position.free_forward or link.position.free_reverse)
        for link in cluster.positions
        if link.name in state.on
    )


def _freewheeling(cluster: Cluster, state: RawState) -> list[AffineForm]:
    """Currents only in free directions, and no free path forward-biased while off."""
    forms = inequalities(cluster, state, {})
    for link in cluster.positions:
        position = link.position
        if position is None or link.name not in state.on or not position.gated:
            continue
        current = state.solution.on_currents[link.name]
        if not position.free_reverse:
            forms.append(current)
        if not position.free_forward:
            forms.append(-current)
    return forms


def _could_freewheel(names: Sequence[str], demands: Mapping[str, PositionDemand]) -> bool:
    """True where some of the positions need not block both polarities."""
    for name in names:
        span = demands[name].off_voltage
        if not isinstance(span, Interval):
            return True
        small = max(1.0, 0.02 * span.magnitude) if span.bounded else 1.0
        if span.low >= -small or span.high <= small:
            return True
    return False


def find_free_shorts(worked: Worked) -> list[FreeShort]:
    """Loops of free paths around a voltage that drives them."""
    found: dict[tuple[str, ...], FreeShort] = {}
    for cluster in worked.topology.clusters:
        for short in _shorts_in(worked, cluster.positions):
            found.setdefault(tuple(sorted(short.positions)), short)
    for position in worked.topology.tie_positions:
        link = Link(position.name, position.start, position.end, AffineForm(), position)
        for short in _shorts_in(worked, (link,)):
            found.setdefault(tuple(sorted(short.positions)), short)
    return sorted(found.values(), key=lambda short: natural_key(short.positions[0]))


def _free_edges(positions: Sequence[Link]) -> Iterator[tuple[str, str, Position]]:
    for link in positions:
        position = link.position
        if position is None:
            continue
        if position.free_forward:
            yield position.start, position.end, position
        if position.free_reverse:
            yield position.end, position.start, position


def _shorts_in(worked: Worked, positions: Sequence[Link]) -> Iterator[FreeShort]:
    graph: nx.DiGraph[str] = nx.DiGraph()
    for tail, head, position in _free_edges(positions):
        graph.add_edge(tail, head, position=position.name)
    for tail in sorted(graph):
        paths = nx.single_source_shortest_path(graph, tail)
        for head in sorted(paths):
            if head == tail:
                continue
            short = _short_along(worked, graph, paths[head])
            if short is not None:
                yield short


def _short_along(worked: Worked, graph: "nx.DiGraph[str]", path: Sequence[str]) -> FreeShort | None:
    voltage = worked.voltages.potentials.difference(path[0], path[-1])
    if voltage is None or voltage.is_zero:
        return None
    span = worked.box.range_of(voltage)
    small = max(1.0, 0.02 * span.magnitude) if span.bounded else 1.0
    always = span.low > small
    alternating = span.high > small and span.low < -small and _only_sources(worked, voltage)
    if not (always or alternating):
        return None
    names = [graph.edges[a, b]["position"] for a, b in pairwise(path)]
    return FreeShort(tuple(dict.fromkeys(names)), voltage.text(), span)


def _only_sources(worked: Worked, voltage: AffineForm) -> bool:
    """A capacitor charges to the peak behind a diode; a source does not give way."""
    parts = worked.stage.parts.by_name
    sources = {
        name_of(b)
        for b in worked.stage.branches
        if b.kind is BranchKind.VOLTAGE and (b.port or parts[b.part].kind is not Kind.CAPACITOR)
    }
    return set(voltage.names) <= sources
