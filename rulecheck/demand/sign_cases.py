"""The combinations of signs of port quantities in which the stage has to work.

battery, 42 V ... 58 V, -80 A ... 80 A       two cases: its current positive, negative
mains that supplies 16 A                     two cases: voltage and current positive, or
                                             both negative
three phases                                 six cases
"""

import math
from collections.abc import Iterable, Mapping, Sequence
from itertools import product

from rulecheck.demand.means import current_names
from rulecheck.demand.stiff import Box, PhaseSet
from rulecheck.stage import Port, PortKind
from rulecheck.values import Interval, point
from rulecheck.values.record import Record, field

MOST_CASES = 64


class Case(Record):
    """Signs of variables that can take both, and values of those that are fixed to an instant."""

    signs: Mapping[str, bool]
    values: Mapping[str, float] = field(default_factory=dict)

    def narrow(self, box: Box) -> Box:
        changed: dict[str, Interval] = {}
        for name, positive in self.signs.items():
            own = box.ranges.get(name)
            if own is None:
                continue
            half = own.part_of_sign(positive)
            if own.low < 0.0 < own.high and half is not None:
                changed[name] = half
        for name, value in self.values.items():
            if name in box.ranges:
                changed[name] = point(value)
        return box.with_ranges(changed) if changed else box

    def at_instants(self, sets: Sequence[PhaseSet]) -> list["Case"]:
        """The case at instants of its sector at which symmetrical voltages have full amplitude."""
        cases = [self]
        for phases in sets:
            if phases.names[0].startswith("v(") and phases.names[0] in self.signs:
                cases = [
                    Case(case.signs, {**case.values, **values})
                    for case in cases
                    for values in _instants(phases)
                    if all((values[n] > 0) == self.signs[n] for n in phases.names)
                ]
        return cases

    def text(self) -> str:
        words = [f"{name} {'>' if positive else '<'} 0" for name, positive in self.signs.items()]
        return ", ".join(words) or "all values"


def _instants(phases: PhaseSet) -> list[dict[str, float]]:
    """Twelve instants of a period, none of them at a crossing of zero or of two phases."""
    count = len(phases.names)
    return [
        {
            name: phases.amplitude
            * math.cos(math.radians(15.0 + 30.0 * instant) - 2.0 * math.pi * k / count)
            for k, name in enumerate(phases.names)
        }
        for instant in range(12)
    ]


def voltage_names(port: Port) -> tuple[str, ...]:
    if port.kind is PortKind.PHASES:
        return tuple(f"v({port.name}/{net})" for net in port.nets)
    return (f"v({port.name})",)


def port_cases(port: Port, box: Box) -> list[dict[str, bool]]:
    """The sign combinations of one port's variables that the stage has to serve."""
    currents = [name for name in current_names(port) if name in box.ranges]
    voltages = [name for name in voltage_names(port) if name in box.ranges]
    if port.kind is PortKind.DC:
        both = [n for n in (*voltages, *currents) if box.ranges[n].low < 0 < box.ranges[n].high]
        return [dict(zip(both, signs, strict=True)) for signs in _signs(len(both))]
    count = max(len(currents), len(voltages))
    cases = []
    for signs in _signs(count):
        if count > 1 and len(set(signs)) == 1:
            continue
        case = dict(zip(voltages, signs, strict=False))
        turned = port.draws and bool(voltages)
        case |= {n: s != turned for n, s in zip(currents, signs, strict=False)}
        cases.append(case)
    return cases or [{}]


def _signs(count: int) -> Iterable[tuple[bool, ...]]:
    return product((True, False), repeat=count)


def cases_for(names: frozenset[str], by_port: Sequence[Sequence[Mapping[str, bool]]]) -> list[Case]:
    """All combinations for the ports whose variables are among the names."""
    chosen = [cases for cases in by_port if any(name in names for case in cases for name in case)]
    merged: list[Case] = []
    for combination in product(*chosen):
        signs: dict[str, bool] = {}
        for case in combination:
            signs |= case
        merged.append(Case(signs))
        if len(merged) >= MOST_CASES:
            break
    return merged
