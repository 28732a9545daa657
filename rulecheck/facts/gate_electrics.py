"""The numbers of a gate drive: charge, power, peak current, induced voltage."""

from collections.abc import Callable, Iterable, Sequence

from rulecheck.facts.facts import Bounds, Value
from rulecheck.facts.gate_formulas import capacitive_bound, gate_power, induced_gate_voltage
from rulecheck.facts.gate_levels import off_level, swing
from rulecheck.facts.inputs import Inputs, stated_number
from rulecheck.parts import Part
from rulecheck.stage import GateDrive
from rulecheck.values import Interval, Unknown

_INFINITE = float("inf")


def devices_of(inputs: Inputs, drive: GateDrive) -> list[Part]:
    return [inputs.part_by_name[name] for name in drive.devices]


def total(values: Iterable[Value]) -> Value:
    """The sum, within bounds where a term is; the first unknown where there is one."""
    low = high = 0.0
    missing: tuple[Unknown, ...] = ()
    for value in values:
        if isinstance(value, Bounds):
            low, high = low + value.range.low, high + value.range.high
            missing += value.missing
        elif isinstance(value, float):
            low, high = low + value, high + value
        else:
            return value
    return Bounds(Interval(low, high), tuple(dict.fromkeys(missing))) if missing else high


def _open(value: Value) -> Value:
    return value.missing[0] if isinstance(value, Bounds) else value


def gate_charge(inputs: Inputs, drive: GateDrive) -> Value:
    """Coulombs of all devices on the gate net."""
    return total(stated_number(part, "gate.charge") for part in devices_of(inputs, drive))


def frequency_of(inputs: Inputs, positions: Sequence[str]) -> Value:
    """Hertz: of the legs of these positions, else of the stage."""
    legs = [leg for name in positions for leg in inputs.legs_of_position.get(name, ())]
    own = [inputs.stage.leg_switching[leg] for leg in legs if leg in inputs.stage.leg_switching]
    stated = [s.frequency for s in (*own, inputs.stage.switching) if s.frequency]
    return stated[0] if stated else Unknown("switching frequency", "switching: {frequency: ...}")


def drive_power(inputs: Inputs, drive: GateDrive, positions: Sequence[str]) -> Value:
    """Watts that the drive spends on the gates of its net."""
    charge, volts = gate_charge(inputs, drive), swing(inputs, drive)
    frequency = frequency_of(inputs, positions)
    return product_of(gate_power, charge, volts, frequency)


def product_of(formula: Callable[..., float], *values: Value) -> Value:
    """The formula of the numbers, or of their bounds where one is known within bounds only."""
    missing = [v for v in values if not isinstance(v, float | Bounds)]
    if missing:
        return missing[0]
    lows = [v.range.low if isinstance(v, Bounds) else v for v in values]
    highs = [v.range.high if isinstance(v, Bounds) else v for v in values]
    wanting = tuple(m for v in values if isinstance(v, Bounds) for m in v.missing)
    low, high = formula(*lows), formula(*highs)
    return Bounds(Interval(min(low, high), max(low, high)), wanting) if wanting else float(high)


def off_path_resistance(inputs: Inputs, drive: GateDrive) -> Value:
    """Ohms that hold the gate off: external, in the device, and in the driver's output."""
    inner = _inner_resistance(inputs, drive)
    ohms = drive.turn_off.resistance
    if isinstance(ohms, Unknown):
        return ohms
    if drive.turn_off_transistors:
        return ohms + inner
    sink = _sink_resistance(inputs, drive)
    if isinstance(sink, float):
        return ohms + inner + sink
    return Bounds(Interval(ohms + inner, _INFINITE), (sink,) if isinstance(sink, Unknown) else ())


def _inner_resistance(inputs: Inputs, drive: GateDrive) -> float:
    """Ohms inside the devices as far as stated; makers that state none include it elsewhere."""
    stated = [stated_number(part, "gate.resistance") for part in devices_of(inputs, drive)]
    known = [value for value in stated if isinstance(value, float)]
    return max(known, default=0.0)


def _sink_resistance(inputs: Inputs, drive: GateDrive) -> Value:
    if drive.buffers:
        name = drive.buffers[0]
        return Unknown(f"resistance of buffer {name}", "driver.sink-resistance of a driver instead")
    part = inputs.part_by_name.get(drive.output.part)
    if part is None:
        return Unknown(f"sink resistance of gate {drive.gate}", "a driver described in part data")
    if part.waveform is not None:
        return 0.0
    return stated_number(part, "driver.sink-resistance")


def peak_gate_current(inputs: Inputs, drive: GateDrive) -> Value:
    """Amperes of all its gates: swing over the smaller external resistance that is not zero."""
    paths = (drive.turn_on.resistance, drive.turn_off.resistance)
    unknown = next((ohms for ohms in paths if isinstance(ohms, Unknown)), None)
    limiting = [ohms for ohms in paths if isinstance(ohms, float) and ohms > 0.0]
    if unknown is not None or not limiting:
        return unknown or Unknown(f"gate current of {drive.gate}", "a resistor at the gate")
    least = min(limiting) + _inner_resistance(inputs, drive)
    return product_of(lambda volts: float(volts / least), swing(inputs, drive))


def induced_voltage(inputs: Inputs, drive: GateDrive, voltage: Value, edge: Value) -> Value:
    """Volts that the other switch's edge pushes the gate to, the bias included; the worst device.

    Where the edge or the resistance is not known, from the bias up to the capacitive bound.
    """
    bias = off_level(inputs, drive)
    if not isinstance(bias, float) or not isinstance(voltage, float):
        return bias if isinstance(bias, Unknown) else _open(voltage)
    found = [_induced_in(inputs, drive, part, voltage, edge) for part in devices_of(inputs, drive)]
    return _worst([_shifted(value, bias) for value in found])


def _induced_in(inputs: Inputs, drive: GateDrive, part: Part, voltage: float, edge: Value) -> Value:
    miller = stated_number(part, "gate.miller-capacitance")
    total_input = stated_number(part, "gate.input-capacitance")
    if not isinstance(miller, float) or not isinstance(total_input, float):
        return miller if isinstance(miller, Unknown) else total_input
    bound = capacitive_bound(miller, total_input, voltage)
    ohms = off_path_resistance(inputs, drive)
    missing = tuple(_open(value) for value in (edge, ohms) if not isinstance(value, float))
    unknown = tuple(item for item in missing if isinstance(item, Unknown))
    least = 0.0
    if isinstance(edge, float) and edge > 0.0:
        held = ohms.range.low if isinstance(ohms, Bounds) else ohms
        if isinstance(held, float):
            rate = voltage / edge
            least = induced_gate_voltage(held, miller, total_input, rate, voltage)
    return Bounds(Interval(min(least, bound), bound), unknown) if unknown else least


def _shifted(value: Value, bias: float) -> Value:
    if isinstance(value, Bounds):
        return Bounds(value.range + Interval(bias, bias), value.missing)
    return value + bias if isinstance(value, float) else value


def _worst(values: Sequence[Value]) -> Value:
    unknown = [value for value in values if isinstance(value, Unknown)]
    if unknown:
        return unknown[0]
    spans = [
        value.range if isinstance(value, Bounds) else Interval(value, value)
        for value in values
        if isinstance(value, float | Bounds)
    ]
    missing = tuple(m for value in values if isinstance(value, Bounds) for m in value.missing)
    low, high = max(s.low for s in spans), max(s.high for s in spans)
    return Bounds(Interval(low, high), missing) if missing else high
