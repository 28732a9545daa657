"""When the netlist's own pulse sources turn the gates on.

VG1 G1 SW PULSE(0 12 0 10n 10n 4u 10u)   R1 G1 GATE 4.7      Q1: on for 4.01 us of 10 us
"""

from collections.abc import Mapping

from rulecheck.parts import Kind, Part
from rulecheck.stage.gate_pulse import GatePulse
from rulecheck.stage.layout import Layout, control_nets

_PULSE_VALUES = 7
"""Initial and pulsed value, delay, rise, fall, width, period."""


def find_gate_pulses(layout: Layout) -> Mapping[str, GatePulse]:
    """By device name: the pulse source that reaches its gate directly or through resistors."""
    found = {}
    for part in layout.parts.parts:
        for net in control_nets(layout, part)[:1]:
            source = _source_at(layout, net)
            pulse = _pulse(source, part) if source is not None else None
            if pulse is not None:
                found[part.name] = pulse
    return found


def _source_at(layout: Layout, gate: str) -> Part | None:
    seen = {gate}
    frontier = [gate]
    for net in frontier:
        for touch in layout.touches.get(net, ()):
            part = touch.part
            if part.kind is Kind.VOLTAGE_SOURCE and part.waveform is not None:
                return part
            if part.kind is Kind.RESISTOR:
                for other in layout.others(part, net):
                    if other not in seen and other not in layout.grounds:
                        seen.add(other)
                        frontier.append(other)
    return None


def _pulse(source: Part, device: Part) -> GatePulse | None:
    waveform = source.waveform
    if waveform is None or waveform.kind != "pulse" or len(waveform.values) < _PULSE_VALUES:
        return None
    low, high, delay, rise, fall, width, period = waveform.values[:_PULSE_VALUES]
    if period <= 0.0 or low == high:
        return None
    on = min(width + (rise + fall) / 2, period)
    start = (delay + rise / 2) % period
    inverted = (high < low) != (device.kind is Kind.P_MOSFET)
    if inverted:
        return GatePulse((start + on) % period, period - on, period, source.name)
    return GatePulse(start, on, period, source.name)
