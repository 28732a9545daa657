"""Where gates and voltages leave diodes a choice, the way with the least loss is taken.

    two-switch forward, one switch just off: the winding is shorted by a switch and a clamp
    diode, and the coil's current could go on through rectifier, winding and clamp, or through
    the freewheeling diode alone; every diode has a drop, so it takes the latter

A state is left out where another one has the same gates, needs only diodes that stand at zero
volts in it, and never carries more diode current.
"""

from collections.abc import Sequence

from rulecheck.demand.readings import Amendment, inequalities
from rulecheck.demand.states import Laws, RawState
from rulecheck.demand.stiff import tightened
from rulecheck.demand.topology import Cluster, loop_name
from rulecheck.values import AffineForm, total_of


def without_lossy(cluster: Cluster, states: Sequence[RawState], laws: Laws) -> tuple[RawState, ...]:
    """The states that no other one undercuts."""
    if not cluster.gated or len(states) < 2:
        return tuple(states)
    by_gates: dict[frozenset[str], list[RawState]] = {}
    for state in states:
        by_gates.setdefault(frozenset(state.on) & cluster.gated, []).append(state)
    lossy = {
        state.on
        for same in by_gates.values()
        for state in same
        if any(_undercuts(other, state, cluster, laws) for other in same if other is not state)
    }
    return tuple(state for state in states if state.on not in lossy)


def _undercuts(other: RawState, state: RawState, cluster: Cluster, laws: Laws) -> bool:
    if set(other.on) < set(state.on) and _circulates(state, cluster):
        return True
    added = set(other.on) - set(state.on)
    off = state.solution.off_voltages
    if not all(laws.vanishes(off[name]) for name in added):
        return False
    saved = _loss(state, cluster) - _loss(other, cluster)
    if laws.vanishes(saved):
        return False
    obeying = dict.fromkeys(cluster.gated, Amendment.IGNORED)
    limits = inequalities(cluster, state, obeying)
    names = {n for form in limits for n in form.names}
    box = laws.box.only((names | set(saved.names)) & laws.box.ranges.keys())
    narrowed = tightened(box, limits)
    return narrowed is not None and narrowed.range_of(saved).low >= -1e-9


def _circulates(state: RawState, cluster: Cluster) -> bool:
    """A current that nothing drives runs through windings: every drop on its way ends it."""
    loops = {loop_name(link.core) for link in cluster.links if link.core}
    return any(loops & set(form.names) for form in state.solution.on_currents.values())


def _loss(state: RawState, cluster: Cluster) -> AffineForm:
    """The sum of the diodes' currents, each counted in its own direction."""
    signed = []
    for link in cluster.positions:
        position = link.position
        if position is None or position.gated or link.name not in state.on:
            continue
        current = state.solution.on_currents[link.name]
        signed.append(current if position.free_forward else -current)
    return total_of(signed)
