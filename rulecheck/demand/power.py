"""Currents of the ports, stated or from the power balance.

    boost: i(in) = v(out) i(out) / v(in), divided by the efficiency where power is taken in

The balance is used only where exactly one port's current is missing.
"""

import math
from collections.abc import Mapping, Sequence

from rulecheck.demand.stiff import Box
from rulecheck.demand.voltages import Voltages
from rulecheck.stage import Branch, BranchKind, Port, PortKind
from rulecheck.values import Interval
from rulecheck.values.record import Record


class PortCurrents(Record):
    """By port name: the current out of the first net into the stage; the rest is not known."""

    ranges: Mapping[str, Interval]
    origins: Mapping[str, str]


def find_port_currents(
    ports: Sequence[Port],
    branches: Sequence[Branch],
    voltages: Voltages,
    box: Box,
    efficiency: float,
) -> PortCurrents:
    ranges: dict[str, Interval] = {}
    origins: dict[str, str] = {}
    volts = {port.name: _voltage(port, voltages, box) for port in ports}
    for port in ports:
        if port.current is not None:
            ranges[port.name] = port.current
            origins[port.name] = f"stated for port {port.name}"
        elif port.power is not None:
            current = _current(port, volts[port.name], port.power)
            if current is not None:
                ranges[port.name] = current
                origins[port.name] = f"power of port {port.name} over its voltage"
    missing = [port for port in ports if port.name not in ranges]
    if len(missing) == 1:
        others = [_power(p, volts[p.name], ranges[p.name]) for p in ports if p is not missing[0]]
        others += _load_powers(branches, voltages, box)
        current = _balanced(missing[0], volts[missing[0].name], others, efficiency)
        if current is not None:
            ranges[missing[0].name] = current
            origins[missing[0].name] = "power balance with the other ports"
    return PortCurrents(ranges, origins)


def _voltage(port: Port, voltages: Voltages, box: Box) -> Interval | None:
    if port.voltage is not None:
        return port.voltage
    if port.kind is PortKind.PHASES:
        return None
    form = voltages.averages.difference(port.nets[0], port.nets[1])
    if form is None:
        return None
    volts = box.range_of(form)
    return volts if volts.bounded and not box.says_nothing(form) else None


def _power(port: Port, volts: Interval | None, current: Interval) -> Interval | None:
    """Watts into the stage. AC: the mean, from none to all of the apparent power."""
    if port.power is not None:
        return port.power
    if volts is None:
        return None
    if port.kind is PortKind.DC:
        corners = [v * i for v in (volts.low, volts.high) for i in (current.low, current.high)]
        return Interval(min(corners), max(corners))
    phases = len(port.nets) if port.kind is PortKind.PHASES else 1
    apparent = phases * volts.high * current.high / 2
    return Interval(-apparent, 0.0) if port.draws else Interval(0.0, apparent)


def _load_powers(branches: Sequence[Branch], voltages: Voltages, box: Box) -> list[Interval | None]:
    """Watts into the stage of the resistors in the power path: never positive."""
    powers: list[Interval | None] = []
    for branch in branches:
        if branch.kind is not BranchKind.RESISTOR:
            continue
        form = voltages.averages.difference(branch.start, branch.end)
        if form is None or not branch.value:
            powers.append(None)
            continue
        volts = box.range_of(form)
        least = 0.0 if volts.contains(0.0) else min(abs(volts.low), abs(volts.high))
        powers.append(Interval(-(volts.magnitude**2), -(least**2)).scaled(1.0 / branch.value))
    return powers


def _balanced(
    port: Port, volts: Interval | None, others: Sequence[Interval | None], efficiency: float
) -> Interval | None:
    total = Interval(0.0, 0.0)
    for power in others:
        if power is None:
            return None
        total += power
    needed = -total
    supplied = needed.high / efficiency if needed.high > 0 else needed.high * efficiency
    returned = needed.low / efficiency if needed.low > 0 else needed.low * efficiency
    return _current(port, volts, Interval(returned, supplied))


def _current(port: Port, volts: Interval | None, power: Interval) -> Interval | None:
    if volts is None:
        return None
    if port.kind is not PortKind.DC:
        least = port.least_amplitude or volts.high
        phases = len(port.nets) if port.kind is PortKind.PHASES else 1
        amplitude = 2 * power.magnitude / (phases * least) if least > 0 else math.inf
        return Interval(-amplitude, amplitude) if math.isfinite(amplitude) else None
    if volts.low <= 0.0 <= volts.high:
        return None
    corners = [p / v + 0.0 for p in (power.low, power.high) for v in (volts.low, volts.high)]
    return Interval(min(corners), max(corners))
