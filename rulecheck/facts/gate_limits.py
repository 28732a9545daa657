"""Limits at a gate: what its clamps allow, where it turns on, what edge comes upon it."""

from collections.abc import Sequence

from rulecheck.facts.facts import Value
from rulecheck.facts.inputs import Inputs, stated_range
from rulecheck.parts import Kind, Part
from rulecheck.stage import GateDrive
from rulecheck.values import Interval, Unknown


def clamp_values(inputs: Inputs, drive: GateDrive) -> dict[str, Value]:
    """In the direction that turns the devices on, and in the other."""
    highest = [clamp.highest for clamp in drive.clamps]
    lowest = [_turned(clamp.lowest) for clamp in drive.clamps]
    if all(inputs.part_by_name[name].kind is Kind.P_MOSFET for name in drive.devices):
        highest, lowest = lowest, highest
    return {
        "clamp-high": _nearest(highest, drive.gate),
        "clamp-low": _turned(_nearest(lowest, drive.gate)),
    }


def _turned(level: float | Unknown) -> float | Unknown:
    return level if isinstance(level, Unknown) else -level


def _nearest(levels: Sequence[float | Unknown], gate: str) -> float | Unknown:
    unknown = next((level for level in levels if isinstance(level, Unknown)), None)
    missing = Unknown(f"clamp of gate {gate}", f"a zener from {gate} to its source")
    known = [level for level in levels if isinstance(level, float)]
    return unknown or (min(known) if known else missing)


def lowest_threshold(parts: Sequence[Part]) -> Value:
    return _threshold(parts, upper=False)


def highest_threshold(parts: Sequence[Part]) -> Value:
    return _threshold(parts, upper=True)


def _threshold(parts: Sequence[Part], upper: bool) -> Value:
    found: list[float] = []
    for part in parts:
        value = stated_range(part, "gate.threshold")
        if not isinstance(value, Interval):
            return value
        size = sorted((abs(value.low), abs(value.high)))
        found.append(size[1] if upper else size[0])
    return max(found) if upper else min(found)


def edge_time(inputs: Inputs, positions: Sequence[str]) -> Value:
    """Seconds that the voltage of the legs takes to change over."""
    legs = [leg for name in positions for leg in inputs.legs_of_position.get(name, ())]
    own = [inputs.stage.leg_switching[leg] for leg in legs if leg in inputs.stage.leg_switching]
    stated = [s.edge for s in (*own, inputs.stage.switching) if s.edge is not None]
    return stated[0] if stated else Unknown("edge time of the leg", "switching: {edge: ...}")


def edge_voltage_at(inputs: Inputs, positions: Sequence[str]) -> Value:
    """Volts: the largest forward off voltage of the positions."""
    spans = [inputs.demands.positions[name].off_voltage for name in positions]
    unknown = [span for span in spans if isinstance(span, Unknown) or not span.bounded]
    if unknown or not spans:
        open_one = next((span for span in unknown if isinstance(span, Unknown)), None)
        return open_one or Unknown("off voltage of the switch", "the voltages of the ports")
    return max(max(span.magnitude, 0.0) for span in spans if isinstance(span, Interval))
