"""Whether a current sensor sees the short circuit that a leg makes when both its sides are on.

C2+ - BUS - M1 - SW - M2 - S2 - R1 (shunt) - PGND - C2-        R1 sees it
the same with the shunt in the battery's line                  nothing sees it
"""

from collections.abc import Iterator

from rulecheck.demand import Leg
from rulecheck.facts.feeding import Wires
from rulecheck.facts.inputs import Inputs
from rulecheck.facts.shunt_facts import is_shunt
from rulecheck.parts import Kind, Part, through_nets

_SENSING_PINS = ("desat", "sense", "trip")
"""Beginnings of the roles of a driver's pins that watch the device (common practice)."""


def is_short_sensed(inputs: Inputs, wires: Wires, leg: Leg) -> bool:
    """No way from rail to rail through the leg's devices avoids every current sensor."""
    positions = (*leg.high, *leg.low, *leg.others)
    devices = [inputs.part_by_name[name] for name in inputs.parts_of_positions(positions)]
    if any(_driver_watches(inputs, device) for device in devices):
        return True
    ends = set(_stiff_nets(inputs, leg.rails[-1]))
    seen = set(_stiff_nets(inputs, leg.rails[0]))
    waiting = sorted(seen)
    at = _device_ways(devices)
    while waiting:
        net = waiting.pop()
        if net in ends:
            return False
        behind = [b for name, b in wires.at.get(net, ()) if not _senses(inputs, name)]
        for other in (*behind, *at.get(net, ())):
            if other not in seen:
                seen.add(other)
                waiting.append(other)
    return True


def _device_ways(devices: list[Part]) -> dict[str, list[str]]:
    found: dict[str, list[str]] = {}
    for part in devices:
        for edge in part.edges:
            found.setdefault(edge.tail, []).append(edge.head)
            found.setdefault(edge.head, []).append(edge.tail)
    return found


def _stiff_nets(inputs: Inputs, rail: str) -> Iterator[str]:
    """The nets, as written, at which a capacitor, source or port holds the rail."""
    for name in inputs.parts_at_net.get(rail, ()):
        part = inputs.part_by_name[name]
        if part.kind in (Kind.CAPACITOR, Kind.VOLTAGE_SOURCE) and name in inputs.branch_parts:
            yield from (net for net in part.nets if inputs.merged(net) == rail)
    yield from inputs.held_by_ports.get(rail, ())


def _senses(inputs: Inputs, name: str) -> bool:
    part = inputs.part_by_name[name]
    if part.kind in (Kind.CURRENT_TRANSFORMER, Kind.SENSOR):
        return bool(through_nets(part))
    return is_shunt(inputs, part)


def _driver_watches(inputs: Inputs, device: Part) -> bool:
    gate = next((pin.net for pin in device.pins if pin.role in ("gate", "base")), None)
    if gate is None:
        return False
    driver = inputs.part_by_name.get(_driver_name(inputs, gate))
    return driver is not None and any(pin.role.startswith(_SENSING_PINS) for pin in driver.pins)


def _driver_name(inputs: Inputs, gate: str) -> str:
    """What drives the gate; empty where nothing is found."""
    drive = inputs.stage.gate_drives.get(inputs.merged(gate))
    return drive.output.part if drive is not None else ""
