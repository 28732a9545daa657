"""Report each group: its legal states, those that a free path forbids, or why it has none."""

from rulecheck.demand.analysis import Worked
from rulecheck.demand.demands import Group, State
from rulecheck.demand.readings import feasible
from rulecheck.demand.states import RawState
from rulecheck.values import AffineForm, natural_key
from rulecheck.values.record import replace


def forms_of(state: RawState) -> tuple[AffineForm, ...]:
    return (*state.solution.off_voltages.values(), *state.solution.on_currents.values())


def why_not_analysed(worked: Worked, index: int) -> str:
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


def group_of(worked: Worked, index: int) -> Group:
    cluster = worked.topology.clusters[index]
    names = tuple(sorted((p.name for p in cluster.positions), key=natural_key))
    failed = any(index in failure.clusters for failure in worked.failures)
    raw = worked.reading.states[index]
    analysed = bool(raw) and not failed and index not in worked.too_large
    if not analysed:
        why = why_not_analysed(worked, index) if names else ""
        return Group(names, (), False, why, cannot_work=_cannot_work(worked, index))
    box = worked.box.only({n for s in raw for f in forms_of(s) for n in f.names})
    legal = {state.on for state, _ in feasible(worked.reading, index, box)}
    drawn = replace(worked.reading, amended={})
    available = {state.on for state, _ in feasible(drawn, index, box)}
    states = tuple(
        State(s.on, s.solution.off_voltages, s.solution.on_currents, s.on in available)
        for s in raw
        if s.on in legal
    )
    relaxed = bool(worked.reading.amended.keys() & set(names))
    forbidden = tuple(s.on for s in states if not s.available) if relaxed else ()
    forbidding = _forbidding(worked, index, forbidden)
    return Group(names, states, True, "", forbidden_states=forbidden, forbidding=forbidding)


def _cannot_work(worked: Worked, index: int) -> bool:
    """True where it is sure: no legal state, or a balance that fails in all of its cases.

    A balance that fails only in some cases may be that of a current which rests in them.
    """
    if index in worked.too_large:
        return False
    failures = [failure for failure in worked.failures if index in failure.clusters]
    return not failures or any(failure.always for failure in failures)


def _forbidding(
    worked: Worked, index: int, forbidden: tuple[tuple[str, ...], ...]
) -> tuple[str, ...]:
    """Positions whose free path would conduct in the forbidden states."""
    names = set()
    for state in worked.reading.states[index]:
        if state.on not in forbidden:
            continue
        for link in worked.topology.clusters[index].positions:
            position = link.position
            if position is None or link.name in state.on:
                continue
            span = worked.box.range_of(state.solution.off_voltages[link.name])
            forward = position.free_forward and span.high > 0
            if forward or (position.free_reverse and span.low < 0):
                names.add(link.name)
    return tuple(sorted(names, key=natural_key))
