"""Find the demand of every position: work the stage out, try other readings, assemble."""

from rulecheck.demand.account import (
    account_of_variables,
    derivations,
    settling_of,
    undetermined_quantities,
)
from rulecheck.demand.alternating import alternating_parts
from rulecheck.demand.analysis import Worked
from rulecheck.demand.attempts import first_that_works
from rulecheck.demand.banks import find_capacitor_banks
from rulecheck.demand.commanded import find_commanded
from rulecheck.demand.connecting import connecting_demand, shorting_groups
from rulecheck.demand.demands import (
    Demands,
    PositionDemand,
)
from rulecheck.demand.evaluate import demand_of
from rulecheck.demand.gates_off import find_free_shorts, find_interrupted
from rulecheck.demand.groups import forms_of, group_of, why_not_analysed
from rulecheck.demand.idle import find_idle, with_idle
from rulecheck.demand.legs import find_bridges, find_legs
from rulecheck.demand.pulses import pulsed
from rulecheck.demand.recovering import find_hard_commutations
from rulecheck.demand.resting import with_rest
from rulecheck.demand.shared import with_shares
from rulecheck.demand.starved import starved
from rulecheck.demand.waveforms.find import find_waveforms
from rulecheck.stage import Stage
from rulecheck.values import Unknown, natural_key


def find_demands(stage: Stage) -> Demands:
    """Ranges of off voltage and on current of every position, over all states it must serve.

    Where the stage cannot work as its branches stand, leakage inductors are read as wires, then
    the magnetising current of clamped cores is left to the clamp; what works first is taken.
    """
    worked, assumed = first_that_works(stage)
    settle = {name: line for name, _, line in settling_of(worked)}
    positions, more = _positions(worked, settle)
    legs = find_legs(worked)
    interrupted, noted = find_interrupted(worked, positions)
    groups = tuple(
        group_of(worked, index)
        for index, cluster in enumerate(worked.topology.clusters)
        if cluster.positions
    )
    groups += tuple(shorting_groups(worked))
    waveforms = find_waveforms(worked, settle)
    return Demands(
        account_of_variables(worked, settle),
        positions,
        groups,
        legs,
        find_bridges(worked, legs),
        (*undetermined_quantities(worked), *starved(worked, positions)),
        tuple(interrupted),
        tuple(find_free_shorts(worked)),
        find_hard_commutations(legs, worked, positions),
        (*assumed, *more, *derivations(worked), *waveforms.assumed),
        (*_not_covered(worked, positions), *noted),
        waveforms,
        find_capacitor_banks(worked),
        find_commanded(worked),
    )


def _positions(
    worked: Worked, settle: dict[str, str]
) -> tuple[dict[str, PositionDemand], tuple[str, ...]]:
    failed = {index: f for f in worked.failures for index in f.clusters}
    found: dict[str, PositionDemand] = {}
    assumed: list[str] = []
    for index, cluster in enumerate(worked.topology.clusters):
        names = {n for s in worked.reading.states[index] for f in forms_of(s) for n in f.names}
        box = worked.box.only(names)
        idle = find_idle(worked, index)
        for link in cluster.positions:
            assert link.position is not None
            if index in worked.too_large or index in failed or not _states(worked, index):
                found[link.name] = _not_analysed(link.name, why_not_analysed(worked, index))
                continue
            demand = demand_of(link.position, worked.reading, index, box, settle)
            demand = with_idle(demand, link.position, idle, worked.reading.amended)
            demand = with_rest(demand, link.position, worked)
            if index in worked.connecting or link.name in worked.pulsed:
                demand = pulsed(demand)
            found[link.name] = demand
        if _states(worked, index) and index not in failed:
            found, sentences = with_shares(found, worked, index, box)
            assumed += sentences
    for position in worked.topology.tie_positions:
        found[position.name], sentence = connecting_demand(position, worked, settle)
        assumed += [sentence] if sentence else []
    ordered = {p.name: found[p.name] for p in worked.stage.positions}
    return ordered, tuple(assumed)


def _states(worked: Worked, index: int) -> bool:
    return bool(worked.reading.states[index])


def _not_analysed(name: str, why: str) -> PositionDemand:
    unknown = Unknown(f"demand of {name}", f"a stage that works: {why}")
    return PositionDemand(
        name, unknown, unknown, unknown, None, None, None, None, (f"not analysed: {why}",)
    )


def _not_covered(worked: Worked, positions: dict[str, PositionDemand]) -> tuple[str, ...]:
    lines = list(worked.stage.not_covered)
    for name, current in worked.currents.items():
        if "ripple not included" in current.origin:
            lines.append(f"{name}: {current.origin.rpartition(', ')[2]}")
    lines += [
        f"current of {part}: the peaks of a resonance with what is in series with it"
        for part in sorted(alternating_parts(worked.stage), key=natural_key)
        if not worked.box.ranges[f"i({part})"].bounded
    ]
    for demand in positions.values():
        lines += [f"{demand.position}: {line}" for line in demand.not_covered]
    return tuple(lines)
