"""The box before any current is derived: stated voltages and currents, and the ports' currents."""

from collections.abc import Mapping, Sequence

from rulecheck.demand.means import current_names
from rulecheck.demand.power import PortCurrents, find_port_currents
from rulecheck.demand.sign_cases import voltage_names
from rulecheck.demand.stiff import EVERYTHING, Box, PhaseSet
from rulecheck.demand.topology import loop_name, magnetising_name
from rulecheck.demand.voltages import Voltages, name_of
from rulecheck.stage import BranchKind, Port, PortKind, Stage
from rulecheck.values import Interval


def first_box(stage: Stage, voltages: Voltages) -> tuple[Box, PortCurrents]:
    """Ranges of voltages and of port currents; every other current may be anything as yet."""
    ranges: dict[str, Interval] = {}
    unsettled: set[str] = set()
    stated = {name_of(b) for b in stage.branches if b.given is not None}
    for branch in stage.branches:
        name = name_of(branch)
        if branch.kind is BranchKind.VOLTAGE or branch.kind is BranchKind.CURRENT:
            ranges[name] = branch.given or voltages.ranges.get(name, EVERYTHING)
        if branch.kind is not BranchKind.RESISTOR and branch.given is None:
            unsettled.add(name)
    unsettled -= voltages.ranges.keys()
    for core in stage.transformers:
        for name in (magnetising_name(core), loop_name(core.name)):
            ranges[name] = EVERYTHING
            unsettled.add(name)
    sets = tuple(_phase_sets(stage.ports))
    box = Box(ranges, phase_sets=sets, unsettled=frozenset(unsettled))
    found = find_port_currents(stage.ports, stage.branches, voltages, box, stage.efficiency)
    for port in stage.ports:
        known = found.ranges.get(port.name)
        for name in current_names(port):
            if known is not None and name not in stated:
                ranges[name] = known
                unsettled.discard(name)
    sets = tuple(_phase_sets(stage.ports, found.ranges))
    return Box(ranges, phase_sets=sets, unsettled=frozenset(unsettled)), found


def _phase_sets(
    ports: Sequence[Port], currents: Mapping[str, Interval] | None = None
) -> list[PhaseSet]:
    sets = []
    for port in ports:
        if port.kind is not PortKind.PHASES:
            continue
        if port.voltage is not None:
            sets.append(PhaseSet(voltage_names(port), port.voltage.magnitude))
        known = (currents or {}).get(port.name)
        if known is not None:
            sets.append(PhaseSet(current_names(port), known.magnitude))
    return sets
