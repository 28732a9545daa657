"""Find the demand of every position: work the stage out, try other readings, assemble."""

from collections.abc import Iterable
from dataclasses import replace

from rulecheck.demand.analysis import Worked, alternating_parts, work_out
from rulecheck.demand.connecting import connecting_demand
from rulecheck.demand.demands import (
    Demands,
    Group,
    PositionDemand,
    State,
    Undetermined,
    Variable,
)
from rulecheck.demand.duty import with_duty
from rulecheck.demand.evaluate import demand_of
from rulecheck.demand.gates_off import find_free_shorts, find_interrupted
from rulecheck.demand.legs import find_bridges, find_hard_commutations, find_legs
from rulecheck.demand.peak_charged import find_peaks, with_peaks
from rulecheck.demand.readings import feasible
from rulecheck.demand.states import RawState
from rulecheck.demand.topology import magnetising_name
from rulecheck.demand.voltages import name_of
from rulecheck.demand.wired import wire_leakages, without_followers, without_magnetising
from rulecheck.stage import BranchKind, Stage
from rulecheck.values import AffineForm, Interval, QuadrantSet, Unknown, natural_key


def find_demands(stage: Stage) -> Demands:
    """Ranges of off voltage and on current of every position, over all states it must serve.

    Where the stage cannot work as its branches stand, leakage inductors are read as wires, then
    the magnetising current of clamped cores is left to the clamp; what works first is taken.
    """
    worked, assumed = _first_that_works(stage)
    settle = {name: line for name, _, line in _lines(worked.stage)}
    positions, more = _positions(worked, settle)
    legs = find_legs(worked)
    interrupted, noted = find_interrupted(worked, positions)
    groups = tuple(_group(worked, index) for index in range(len(worked.topology.clusters)))
    return Demands(
        _variables(worked, settle),
        positions,
        groups,
        legs,
        find_bridges(worked, legs),
        _undetermined(worked),
        tuple(interrupted),
        tuple(find_free_shorts(worked)),
        find_hard_commutations(legs, worked.stage.positions, positions),
        (*assumed, *more, *_flow_notes(worked)),
        (*_not_covered(worked, positions), *noted),
    )


def _first_that_works(stage: Stage) -> tuple[Worked, tuple[str, ...]]:
    worked = work_out(stage)
    stage, assumed = with_duty(worked)
    best = work_out(stage) if assumed else worked
    for reading in (_following, _wired, _clamped):
        if not _unclear(best):
            break
        other, sentences = reading(best, stage)
        if not sentences:
            continue
        tried = work_out(other)
        if _unclear(tried) < _unclear(best):
            best, assumed = tried, assumed + sentences
            stage = other if reading is _following else stage
    peaks = find_peaks(best, work_out)
    if not peaks:
        return best, assumed
    pulsed = frozenset(name for peak in peaks for name in peak.diodes)
    stage = with_peaks(best.stage, peaks)
    return work_out(stage, pulsed), (*assumed, *(peak.sentence for peak in peaks))


def _following(worked: Worked, stage: Stage) -> tuple[Stage, tuple[str, ...]]:
    return without_followers(stage, _followers(worked))


def _wired(worked: Worked, stage: Stage) -> tuple[Stage, tuple[str, ...]]:
    return wire_leakages(stage) if worked.failures else (stage, ())


def _clamped(worked: Worked, stage: Stage) -> tuple[Stage, tuple[str, ...]]:
    return without_magnetising(stage) if worked.failures else (stage, ())


def _unclear(worked: Worked) -> int:
    return len(worked.failures) + len(worked.connecting)


def _followers(worked: Worked) -> tuple[str, ...]:
    """Capacitors that nobody states, behind groups of diodes that only connect voltages."""
    nets = {
        net
        for index in worked.connecting
        if not worked.topology.clusters[index].gated
        for link in worked.topology.clusters[index].positions
        if link.position
        for net in (link.position.start, link.position.end)
    }
    return tuple(b.name for b in worked.voltages.undetermined if b.part and {b.start, b.end} & nets)


def _positions(
    worked: Worked, settle: dict[str, str]
) -> tuple[dict[str, PositionDemand], tuple[str, ...]]:
    failed = {index: f for f in worked.failures for index in f.clusters}
    found: dict[str, PositionDemand] = {}
    assumed: list[str] = []
    for index, cluster in enumerate(worked.topology.clusters):
        names = {n for s in worked.reading.states[index] for f in _forms(s) for n in f.names}
        box = worked.box.only(names)
        for link in cluster.positions:
            assert link.position is not None
            if index in worked.too_large or index in failed or not _states(worked, index):
                found[link.name] = _not_analysed(link.name, _why_not(worked, index))
                continue
            demand = demand_of(link.position, worked.reading, index, box, settle)
            if index in worked.connecting or link.name in worked.pulsed:
                demand = _pulsed(demand)
            found[link.name] = demand
    for position in worked.topology.tie_positions:
        found[position.name], sentence = connecting_demand(position, worked, settle)
        assumed += [sentence] if sentence else []
    ordered = {p.name: found[p.name] for p in worked.stage.positions}
    return ordered, tuple(assumed)


def _forms(state: RawState) -> tuple[AffineForm, ...]:
    return (*state.solution.off_voltages.values(), *state.solution.on_currents.values())


def _states(worked: Worked, index: int) -> bool:
    return bool(worked.reading.states[index])


def _why_not(worked: Worked, index: int) -> str:
    cluster = worked.topology.clusters[index]
    if index in worked.too_large:
        return f"its group has {len(cluster.positions)} positions, more than are enumerated"
    for failure in worked.failures:
        if index in failure.clusters:
            return (
                f"{failure.carrier.name} could not keep its balance with "
                f"{failure.case.text()}: {failure.why}"
            )
    return "every combination of on positions shorts a voltage or interrupts a current"


def _not_analysed(name: str, why: str) -> PositionDemand:
    unknown = Unknown(f"demand of {name}", f"a stage that works: {why}")
    return PositionDemand(
        name, unknown, unknown, unknown, None, None, None, None, (f"not analysed: {why}",)
    )


def _pulsed(demand: PositionDemand) -> PositionDemand:
    """Charging pulses are not found by stiff quantities; their sign and the blocking are."""
    why = "the charging pulses of a capacitor behind diodes are not covered"
    current = Interval(0.0, float("inf"))
    quadrants = demand.quadrants
    if isinstance(demand.off_voltage, Interval):
        volts = demand.off_voltage
        signs = [s for s, ok in ((True, volts.high > 1.0), (False, volts.low < -1.0)) if ok]
        quadrants = QuadrantSet.product(signs, [True])
    return replace(demand, on_current=current, quadrants=quadrants, not_covered=(why,))


def _group(worked: Worked, index: int) -> Group:
    cluster = worked.topology.clusters[index]
    names = tuple(sorted((p.name for p in cluster.positions), key=natural_key))
    failed = any(index in failure.clusters for failure in worked.failures)
    raw = worked.reading.states[index]
    analysed = bool(raw) and not failed and index not in worked.too_large
    if not analysed:
        return Group(names, (), False, _why_not(worked, index) if names else "")
    box = worked.box.only({n for s in raw for f in _forms(s) for n in f.names})
    legal = {state.on for state, _ in feasible(worked.reading, index, box)}
    strict = replace(worked.reading, strict=worked.reading.strict | {index})
    available = {state.on for state, _ in feasible(strict, index, box)}
    states = tuple(
        State(s.on, s.solution.off_voltages, s.solution.on_currents, s.on in available)
        for s in raw
        if s.on in legal
    )
    relaxed = index not in worked.reading.strict
    forbidden = tuple(s.on for s in states if not s.available) if relaxed else ()
    forbidding = _forbidding(worked, index, forbidden)
    return Group(names, states, True, "", forbidden, forbidding)


def _forbidding(
    worked: Worked, index: int, forbidden: tuple[tuple[str, ...], ...]
) -> tuple[str, ...]:
    """Gated positions whose free path would conduct in the forbidden states."""
    names = set()
    for state in worked.reading.states[index]:
        if state.on not in forbidden:
            continue
        for link in worked.topology.clusters[index].positions:
            position = link.position
            if position is None or not position.gated or link.name in state.on:
                continue
            span = worked.box.range_of(state.solution.off_voltages[link.name])
            forward = position.free_forward and span.high > 0
            if forward or (position.free_reverse and span.low < 0):
                names.add(link.name)
    return tuple(sorted(names, key=natural_key))


def _lines(stage: Stage) -> Iterable[tuple[str, str, str]]:
    """Variable, what it is in words, and the sheet line that states it."""
    for branch in stage.branches:
        name = name_of(branch)
        if branch.kind is BranchKind.RESISTOR:
            continue
        key = "voltage" if branch.kind is BranchKind.VOLTAGE else "current"
        if branch.part:
            yield (
                name,
                f"{key} of {branch.part}",
                f"set: {{{branch.part}: {{{key}: [LOW, HIGH]}}}}",
            )
        else:
            word = "voltage" if branch.kind is BranchKind.VOLTAGE else "draws"
            yield name, f"{key} of port {branch.port}", f"ports: {{{branch.port}: {{{word}: ...}}}}"
    for core in stage.transformers:
        yield (
            magnetising_name(core),
            f"magnetising current of {core.name}",
            "the inductance of its windings and `switching: {frequency: ...}`, or the currents "
            "of the ports",
        )


def _variables(worked: Worked, settle: dict[str, str]) -> tuple[Variable, ...]:
    stage, box = worked.stage, worked.box
    found = []
    for branch in stage.branches:
        if branch.kind is not BranchKind.VOLTAGE:
            continue
        form = worked.voltages.forms[branch.name]
        name = name_of(branch)
        own = form.names == (name,)
        span = box.range_of(form)
        known = span.bounded
        found.append(
            Variable(
                name,
                "V",
                span if known else Unknown(f"voltage of {branch.name}", settle.get(name, name)),
                worked.voltages.origins[branch.name],
                None if own else form,
            )
        )
    for name, span in sorted(box.ranges.items(), key=lambda item: natural_key(item[0])):
        if not name.startswith("i("):
            continue
        current = worked.currents.get(name)
        origin = current.origin if current else _port_origin(worked, name)
        value = span if span.bounded else Unknown(f"current {name}", settle.get(name, name))
        ripple = current.ripple if current else 0.0
        found.append(Variable(name, "A", value, origin, box.means.get(name), ripple))
    return tuple(found)


def _port_origin(worked: Worked, name: str) -> str:
    port = name.removeprefix("i(").removesuffix(")").partition("/")[0]
    return worked.port_currents.origins.get(port, "stated")


def _undetermined(worked: Worked) -> tuple[Undetermined, ...]:
    """Quantities that some position's demand rests on and that nobody states."""
    used = {
        name
        for index, states in enumerate(worked.reading.states)
        for state in states
        for form in _forms(state)
        for name in form.names
        if worked.topology.clusters[index].positions
    }
    means = worked.box.means
    used |= {name for known in used & means.keys() for name in means[known].names}
    used -= means.keys()
    alternating = {f"i({part})" for part in alternating_parts(worked.stage)}
    found = []
    for name, what, line in _lines(worked.stage):
        span = worked.box.ranges.get(name)
        if span is None or span.bounded or name not in used:
            continue
        if name in alternating or name not in worked.box.unsettled:
            what = f"magnitude of the {what}"
        found.append(Undetermined(what, line))
    return tuple(found)


def _flow_notes(worked: Worked) -> tuple[str, ...]:
    """How each derived quantity was found, so that a user may overrule it."""
    notes = []
    for branch in worked.stage.branches:
        origin = worked.voltages.origins.get(branch.name, "")
        if origin and origin != "stated" and branch.name not in _names_left(worked):
            notes.append(f"v({branch.name.removeprefix('port/')}): {origin}")
    return tuple(notes)


def _names_left(worked: Worked) -> frozenset[str]:
    return frozenset(branch.name for branch in worked.voltages.undetermined)


def _not_covered(worked: Worked, positions: dict[str, PositionDemand]) -> tuple[str, ...]:
    lines = list(worked.stage.not_covered)
    for name, current in worked.currents.items():
        if "ripple not included" in current.origin:
            lines.append(f"{name}: {current.origin.rpartition(', ')[2]}")
    for demand in positions.values():
        lines += [f"{demand.position}: {line}" for line in demand.not_covered]
    return tuple(lines)
