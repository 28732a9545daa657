"""What drives a gate: back through its resistors and diodes to a driver's output or a source.

XU1 output-high - HO - R3 - G1      G1 is driven by a driver, XU1
V5 - R9 - G2                        G2 is driven by a source, V5
"""

from collections import deque
from dataclasses import dataclass

from rulecheck.facts.facts import Bounds, Value
from rulecheck.facts.inputs import Inputs
from rulecheck.parts import Datum, Kind, Part
from rulecheck.stage import Role
from rulecheck.values import Interval, Unknown

_PASSED = frozenset({Kind.RESISTOR, Kind.DIODE, Kind.ZENER})
_SOURCES = {Kind.DRIVER: "driver", Kind.VOLTAGE_SOURCE: "source"}
_FARTHEST = 200


@dataclass(frozen=True, slots=True)
class GateSource:
    """`by` is `driver`, `source`, or empty where neither was found."""

    by: str
    part: str
    net: str
    """The merged net of the output."""
    voltage: Value
    """The largest magnitude that it puts on the gate, volts."""


def find_gate_source(inputs: Inputs, gate: str) -> GateSource:
    """The nearest driver or source; of several equally near the first by name."""
    barred = _beyond(inputs, gate)
    seen = {gate}
    waiting = deque([gate])
    while waiting and len(seen) < _FARTHEST:
        net = waiting.popleft()
        here = [inputs.part_by_name[name] for name in sorted(inputs.parts_at_net.get(net, ()))]
        for part in here:
            if part.kind in _SOURCES and _gives_out(inputs, part, net):
                return GateSource(_SOURCES[part.kind], part.name, net, _voltage(part))
        for part in here:
            for other in _through(inputs, part) - seen - barred:
                seen.add(other)
                waiting.append(other)
    unknown = Unknown(f"drive voltage of {gate}", f"a driver or source at gate net {gate}")
    return GateSource("", "", "", unknown)


def _beyond(inputs: Inputs, gate: str) -> set[str]:
    """Where a pull-down or a clamp leads: the power path and the devices' own returns."""
    devices = (inputs.part_by_name[name] for name in inputs.devices_at_gate[gate])
    ends = {inputs.merged(net) for part in devices for e in part.edges for net in (e.tail, e.head)}
    return (ends | inputs.power_nets | inputs.grounds) - {gate}


def _through(inputs: Inputs, part: Part) -> set[str]:
    """The nets behind a part that belongs to some gate drive."""
    passed = part.kind in _PASSED and inputs.stage.roles.get(part.name) is Role.GATE_DRIVE
    return {inputs.merged(net) for net in part.nets} if passed else set()


def _gives_out(inputs: Inputs, part: Part, net: str) -> bool:
    if part.kind is Kind.VOLTAGE_SOURCE:
        return True
    return any(pin.role.startswith("output") and inputs.merged(pin.net) == net for pin in part.pins)


def _voltage(part: Part) -> Value:
    if part.kind is Kind.VOLTAGE_SOURCE:
        return _source_voltage(part)
    supply = part.datum("driver.supply")
    if not isinstance(supply, Datum):
        return supply
    if isinstance(supply.value, Interval):
        exact = Unknown(f"supply voltage of {part.name}", f"driver.supply of {part.settle_in}")
        return Bounds(supply.value, (exact,))
    return supply.value


def _source_voltage(part: Part) -> Value:
    if part.waveform is not None and part.waveform.kind == "pulse":
        return max((abs(value) for value in part.waveform.values[:2]), default=0.0)
    return abs(part.value) if isinstance(part.value, float) else part.value
