"""Facts of gate nets: which devices share one, what drives it, and with what."""

from collections import Counter
from collections.abc import Iterable, Mapping, Sequence

from rulecheck.facts.drawn import open_where_none
from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.gate_drive_terms import GATE_DRIVE
from rulecheck.facts.gate_electrics import (
    drive_power,
    frequency_of,
    gate_charge,
    induced_voltage,
    off_path_resistance,
    peak_gate_current,
    total,
)
from rulecheck.facts.gate_levels import (
    least_on_level,
    off_level,
    on_level,
    swing,
    unclamped_level,
)
from rulecheck.facts.gate_limits import (
    clamp_values,
    edge_time,
    edge_voltage_at,
    highest_threshold,
    lowest_threshold,
)
from rulecheck.facts.gate_resistor import hottest_resistor, resistor_power
from rulecheck.facts.inputs import Inputs, stated_number
from rulecheck.facts.potential import Steps, known_steps, largest_difference
from rulecheck.parts import Kind, Part
from rulecheck.stage import DrivenBy, GateDrive
from rulecheck.values import Unknown, natural_key

_RETURNS = ("source", "emitter", "cathode")
_INSULATED = frozenset(
    {Kind.MOSFET, Kind.P_MOSFET, Kind.GAN_HEMT, Kind.IGBT, Kind.IGBT_WITH_DIODE}
    | {Kind.REVERSE_BLOCKING_IGBT}
)
_NOT_DRAWN = Unknown(
    "the gate drive", "the drivers in the netlist: no gate of the stage has one there"
)


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    drives = inputs.stage.gate_drives
    gates = sorted(inputs.devices_at_gate, key=natural_key)
    drawn = any(
        drive.output.by is not DrivenBy.NOTHING and _positions(inputs, drive.devices)
        for drive in drives.values()
    )
    steps = known_steps(inputs)
    found = tuple(_subject(inputs, gate, drives.get(gate), drawn, steps) for gate in gates)
    commands = Unknown("what commands the drivers", "the controller in the netlist")
    return open_where_none(found, "commanded", commands)


def _subject(
    inputs: Inputs, gate: str, drive: GateDrive | None, drawn: bool, steps: Steps
) -> Subject:
    devices = inputs.devices_at_gate[gate]
    parts = [inputs.part_by_name[name] for name in devices]
    positions = _positions(inputs, devices)
    values: dict[str, Value] = {
        "gates": float(len(devices)),
        "positions-driven": float(len(positions)),
        "kinds": tuple(sorted({part.kind.value for part in parts})),
        "insulated": all(part.kind in _INSULATED for part in parts),
        "driven": _driven(inputs, gate, devices, drive, drawn),
        "on-own-return": any(_on_own_return(inputs, part) for part in parts),
        "side-by-side": float(_side_by_side(inputs, devices)),
        "upside": all(part.kind is Kind.P_MOSFET for part in parts),
        "threshold": lowest_threshold(parts),
        "full-on": highest_threshold(parts),
        **(_undriven(gate) if drive is None else _drive_values(inputs, drive, positions, steps)),
    }
    if drive is not None and not drawn:
        values |= _not_drawn(values)
    links = {
        "devices": devices,
        "positions": positions,
        "legs": _distinct(inputs.legs_of_position, positions),
        "supply": _supply(drive),
        "gate-resistors": _resistors(drive),
    }
    span, related = inputs.span_of_parts(devices), inputs.related_spans(devices)
    return Subject("gate-drive", gate, values, links, devices, (gate,), span, related)


def _undriven(gate: str) -> dict[str, Value]:
    """Of a gate on which only drive transistors are: nothing is asked of it."""
    unknown = Unknown(f"the drive of {gate}", f"a power device with its gate on {gate}")
    empty: dict[str, Value] = {
        term.name: unknown for term in GATE_DRIVE.fields if term.name not in _OWN
    }
    return empty | {"driven-by": "", "driver": "", "transformer": "", "return": ""}


def _not_drawn(values: Mapping[str, Value]) -> dict[str, Value]:
    """Of a stage in which no drive is drawn: what rests on the drive is open for that reason."""
    unknown = {n: _NOT_DRAWN for n, v in values.items() if isinstance(v, Unknown) and n not in _OWN}
    found: dict[str, Value] = {**unknown, "driven-by": _NOT_DRAWN, "series-resistor": _NOT_DRAWN}
    return found | ({} if values["held"] is True else {"held": _NOT_DRAWN})


_OWN = frozenset(
    {"gates", "positions-driven", "kinds", "insulated", "driven", "on-own-return", "side-by-side"}
    | {"upside", "threshold", "full-on"}
)


def _drive_values(
    inputs: Inputs, drive: GateDrive, positions: Sequence[str], steps: Steps
) -> dict[str, Value]:
    output = drive.output
    driver = inputs.part_by_name.get(output.part)
    edge_voltage, edge = edge_voltage_at(inputs, positions), edge_time(inputs, positions)
    return {
        "driven-by": output.by.value,
        "driver": output.part,
        "buffered-by": drive.buffers,
        "transformer": drive.transformer,
        "isolated": output.isolated,
        "own-return": output.own_return,
        "return": output.return_net,
        "returns": drive.returns,
        "return-right": drive.return_right,
        "drive-voltage": on_level(inputs, drive),
        "unclamped-voltage": unclamped_level(inputs, drive),
        "least-drive-voltage": least_on_level(inputs, drive),
        "off-voltage": off_level(inputs, drive),
        "swing": swing(inputs, drive),
        "turn-on-resistance": drive.turn_on.resistance,
        "turn-off-resistance": drive.turn_off.resistance,
        "holding-resistance": off_path_resistance(inputs, drive),
        "series-resistor": _above_zero(drive.turn_on.resistance),
        "held": bool(drive.hold_resistors) or bool(drive.transformer),
        "hold-resistor": _least_hold(inputs, drive),
        "clamped": bool(drive.clamps),
        **clamp_values(inputs, drive),
        "charge": gate_charge(inputs, drive),
        "frequency": frequency_of(inputs, positions),
        **_power_values(inputs, drive, positions),
        "peak-current": peak_gate_current(inputs, drive),
        "output-peak-current": _of_whole_output(inputs, drive),
        "output-current": _of_driver(driver, "driver.output-current", drive),
        "edge-voltage": edge_voltage,
        "induced-voltage": induced_voltage(inputs, drive, edge_voltage, edge),
        "return-potential": largest_difference(steps, output.input_ground, output.return_net)
        if output.input_ground and output.return_net
        else Unknown(f"the grounds of {output.part}", f"part data of {output.part}"),
        "insulation": _of_driver(driver, "driver.isolation", drive),
        "offset-rating": _of_driver(driver, "ratings.voltage", drive),
        "commanded": _commanded(inputs, drive),
    }


def _power_values(inputs: Inputs, drive: GateDrive, positions: Sequence[str]) -> dict[str, Value]:
    power = drive_power(inputs, drive, positions)
    hottest = hottest_resistor(inputs, drive)
    none = Unknown(f"gate resistor of {drive.gate}", f"a resistor in series with {drive.gate}")
    return {
        "power": power,
        "resistor-power": none if hottest is None else resistor_power(hottest, power),
        "resistor-rating": none
        if hottest is None
        else stated_number(inputs.part_by_name[hottest.name], "ratings.power"),
        "hottest-resistor": "" if hottest is None else hottest.name,
    }


def _of_whole_output(inputs: Inputs, drive: GateDrive) -> Value:
    """Peak current of every gate net that the same output drives."""
    output = (drive.output.part, drive.output.role)
    together = [
        other
        for other in inputs.stage.gate_drives.values()
        if (other.output.part, other.output.role) == output and not other.buffers
    ]
    return total(peak_gate_current(inputs, other) for other in together)


def _of_driver(driver: Part | None, path: str, drive: GateDrive) -> Value:
    if driver is None:
        return Unknown(f"the driver of gate {drive.gate}", f"a driver at {drive.gate}")
    return stated_number(driver, path)


def _above_zero(ohms: float | Unknown) -> bool | Unknown:
    return ohms if isinstance(ohms, Unknown) else ohms > 0.0


def _least_hold(inputs: Inputs, drive: GateDrive) -> Value:
    values = [inputs.part_by_name[name].value for name in drive.hold_resistors]
    known = [value for value in values if isinstance(value, float)]
    if known:
        return min(known)
    return Unknown(f"gate-source resistor of {drive.gate}", "a resistor from gate to source")


def _commanded(inputs: Inputs, drive: GateDrive) -> bool | Unknown:
    """Whether each input net that belongs to the output leads to something else."""
    if drive.output.by not in (DrivenBy.DRIVER, DrivenBy.ISOLATOR) or not drive.output.input_nets:
        return Unknown(f"the input behind gate {drive.gate}", f"a driver at {drive.gate}")
    own = {drive.output.part}
    return all(set(inputs.parts_at_net.get(net, ())) - own for net in drive.output.input_nets)


def _supply(drive: GateDrive | None) -> tuple[str, ...]:
    net = drive.output.supply_net if drive is not None else ""
    return (net,) if net else ()


def _resistors(drive: GateDrive | None) -> tuple[str, ...]:
    if drive is None:
        return ()
    return tuple(dict.fromkeys((*drive.turn_on.resistors, *drive.turn_off.resistors)))


def _side_by_side(inputs: Inputs, devices: Iterable[str]) -> int:
    """The most of the devices that conduct between the same two nets."""
    ends = Counter(
        frozenset(inputs.merged(net) for edge in part.edges for net in (edge.tail, edge.head))
        for part in (inputs.part_by_name[name] for name in devices)
    )
    return max(ends.values(), default=0)


def _positions(inputs: Inputs, devices: tuple[str, ...]) -> tuple[str, ...]:
    return _distinct(inputs.positions_of_part, devices)


def _distinct(table: Mapping[str, tuple[str, ...]], names: tuple[str, ...]) -> tuple[str, ...]:
    return tuple(dict.fromkeys(found for name in names for found in table.get(name, ())))


def _driven(
    inputs: Inputs, gate: str, devices: tuple[str, ...], drive: GateDrive | None, drawn: bool
) -> bool | Unknown:
    """Whether something commands the gate; not known where no drive at all is drawn."""
    if drive is not None and drive.output.by is not DrivenBy.NOTHING:
        return True
    if gate in inputs.power_nets or any(_at_another_pin(inputs, gate, name) for name in devices):
        return True
    return False if drawn else _NOT_DRAWN


def _at_another_pin(inputs: Inputs, gate: str, name: str) -> bool:
    """A gate strapped to another pin of its own device is driven, if oddly."""
    pins = inputs.part_by_name[name].pins
    return any(inputs.merged(p.net) == gate and p.role not in ("gate", "base") for p in pins)


def _on_own_return(inputs: Inputs, part: Part) -> bool:
    gates = {inputs.merged(pin.net) for pin in part.pins if pin.role in ("gate", "base")}
    returns = {inputs.merged(pin.net) for pin in part.pins if pin.role in _RETURNS}
    return bool(gates & returns)
