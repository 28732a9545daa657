"""When the netlist's own sources turn the gates on, directly or through drivers.

VG1 G1 SW PULSE(0 12 0 10n 10n 4u 10u)   R1 G1 GATE 4.7      Q1: on for 4.01 us of 10 us
V1 PWM 0 PULSE(0 5 ...)   XU1 input PWM, output HO   R1 HO GATE 4.7      Q1: as V1 says
"""

from collections.abc import Mapping

from rulecheck.parts import Kind, Part
from rulecheck.stage.driver_command import command_of_output
from rulecheck.stage.gate_command import GateCommand, opposite, steady_command
from rulecheck.stage.gate_drive import DrivenBy, GateDrive
from rulecheck.stage.layout import Layout, control_nets, main_nets
from rulecheck.stage.waveform_command import command_of
from rulecheck.values import Interval, Unknown
from rulecheck.values.record import replace

_LATCHING = frozenset({Kind.THYRISTOR, Kind.TRIAC})
"""Kinds that a gate turns on but not off."""
_STEPS_BACK = 3
"""Isolators in series before a driver's input that are followed."""


def find_gate_commands(
    layout: Layout, drives: Mapping[str, GateDrive]
) -> Mapping[str, GateCommand]:
    """By device name: when its gate is commanded on, where the netlist's sources say so."""
    found = {}
    for part in layout.parts.parts:
        for net in control_nets(layout, part)[:1]:
            drive = drives.get(net)
            if drive is None or part.kind in _LATCHING or part.name not in drive.devices:
                continue
            command = _at_gate(layout, part, drive)
            if command is not None:
                found[part.name] = command
    return found


def _at_gate(layout: Layout, device: Part, drive: GateDrive) -> GateCommand | None:
    low_turns_on = device.kind is Kind.P_MOSFET or device.facts.get("polarity") == "pnp"
    inverted = low_turns_on != drive.inverted
    output = drive.output
    origin = layout.parts.by_name.get(output.part)
    if origin is None:
        return None
    if output.by is DrivenBy.CONSTANT:
        return _steady(layout, origin, device, drive)
    if output.by is DrivenBy.SOURCE:
        return _of_source(layout, origin, output.net, inverted)
    if output.by is not DrivenBy.DRIVER:
        return None
    command = command_of_output(
        origin, output.role, lambda net: _at_input(layout, layout.net(net), _STEPS_BACK)
    )
    if command is None or not inverted:
        return command
    return replace(command, on=opposite(command.on, command.period))


def _at_input(layout: Layout, net: str, steps: int) -> GateCommand | None:
    """The command on a driver's input net: from a source behind resistors, or an isolator."""
    seen = {net}
    frontier = [net]
    for here in frontier:
        for touch in layout.touches.get(here, ()):
            part = touch.part
            if part.kind is Kind.VOLTAGE_SOURCE:
                return _of_source(layout, part, here, False)
            before = _input_of(part, touch.role) if part.kind is Kind.ISOLATOR else None
            if before is not None and steps:
                return _at_input(layout, layout.net(before), steps - 1)
            if part.kind is Kind.RESISTOR:
                onward = set(layout.others(part, here)) - seen - layout.grounds
                seen |= onward
                frontier += sorted(onward)
    return None


def _input_of(part: Part, role: str) -> str | None:
    """The net on the pin that an isolator's output repeats: `in2` of `out2`."""
    if not role.startswith("out"):
        return None
    return part.net("in" + role.removeprefix("out")) or part.net(
        "input" + role.removeprefix("output")
    )


def _of_source(layout: Layout, source: Part, net: str, inverted: bool) -> GateCommand | None:
    if source.waveform is None:
        return None
    return command_of(source.waveform, source.name, inverted != _at_minus(layout, source, net))


def _at_minus(layout: Layout, source: Part, net: str) -> bool:
    return layout.ends(source)[0] != net


def _steady(layout: Layout, source: Part, device: Part, drive: GateDrive) -> GateCommand | None:
    """A DC source between the gate and one of the device's own terminals."""
    own = set(main_nets(layout, device)) | set(drive.returns)
    at_device = bool(set(layout.others(source, drive.output.net)) & own)
    if isinstance(source.value, Unknown) or drive.buffers or not at_device:
        return None
    low_turns_on = device.kind is Kind.P_MOSFET or device.facts.get("polarity") == "pnp"
    inverted = low_turns_on != _at_minus(layout, source, drive.output.net)
    on = _turned_on(device, -source.value if inverted else source.value)
    return None if on is None else steady_command(on, source.name)


def _turned_on(device: Part, volts: float) -> bool | None:
    """Whether a steady gate voltage holds the device on; None between what its data say."""
    if volts <= 0.0:
        return False
    datum = device.datum("gate.threshold")
    if isinstance(datum, Unknown):
        return None
    value = datum.value
    low, high = (value.low, value.high) if isinstance(value, Interval) else (value, value)
    return True if volts > abs(high) else False if volts < abs(low) else None
