"""The gate story of a position: what drives each gate, through what, against which net.

gate GH      driver XU1 (output-high), through 22 ohm on and 5.19 ohm off
  commanded  from HIN
  against    SW, the emitter of Q1
  supply     VB, floating, over SW
"""

from rulecheck.report.explanation import Entry
from rulecheck.report.figures import figure, range_figure
from rulecheck.stage import DrivenBy, GateClamp, GateDrive, GatePath, Position, Stage
from rulecheck.values import Unknown

_ALONE = {
    DrivenBy.NOTHING: "nothing found that drives it",
    DrivenBy.CONSTANT: "a steady voltage",
    DrivenBy.CONNECTOR: "another board, through connector",
    DrivenBy.CIRCUIT: "taken for a driver, part data do not say:",
}


def explain_gates(position: Position, stage: Stage) -> tuple[Entry, ...]:
    """One story for each gate net of the position's devices."""
    return tuple(
        entry
        for drive in stage.gate_drives.values()
        if set(drive.devices) & set(position.parts)
        for entry in _story(drive, stage)
    )


def _story(drive: GateDrive, stage: Stage) -> tuple[Entry, ...]:
    output = drive.output
    commanded = f"from {_list(output.input_nets)}" if output.input_nets else ""
    if output.by is DrivenBy.NOTHING:
        held = _held(drive)
        return (Entry(f"gate {drive.gate}", _ALONE[output.by]), *held)
    way = f"{_what(drive)}, through {_paths(drive)}"
    supply = _supply(drive, stage)
    return (
        Entry(f"gate {drive.gate}", way),
        *_between(drive),
        *((Entry("commanded", commanded, 1),) if commanded else ()),
        *((Entry("against", _against(drive), 1),) if output.return_net else ()),
        *((Entry("supply", supply, 1),) if supply else ()),
        *_held(drive),
        *(Entry("clamp", _clamp(clamp), 1) for clamp in drive.clamps),
        *_bias(drive),
    )


def _what(drive: GateDrive) -> str:
    output = drive.output
    role = f" ({output.role})" if output.role else ""
    if output.by is DrivenBy.TRANSFORMER:
        return f"{output.part}{role} by way of a gate transformer"
    return f"{_ALONE.get(output.by, output.by.value)} {output.part}{role}"


def _paths(drive: GateDrive) -> str:
    on, off = drive.turn_on, drive.turn_off
    if on == off or (on.resistance == off.resistance and on.resistors == off.resistors):
        return f"{_ohms(on)} both ways{_named(on)}"
    return f"{_ohms(on)} on{_named(on)} and {_ohms(off)} off{_named(off)}"


def _ohms(path: GatePath) -> str:
    if isinstance(path.resistance, Unknown):
        return "a resistance not known"
    return figure(path.resistance, "ohm") if path.resistance else "no resistance"


def _named(path: GatePath) -> str:
    return f" ({_list(path.resistors)})" if path.resistors else ""


def _between(drive: GateDrive) -> tuple[Entry, ...]:
    entries = []
    if drive.buffers:
        turned = ", which invert" if drive.inverted else ""
        entries.append(Entry("buffered", f"by {_list(drive.buffers)}{turned}", 1))
    if drive.transformer:
        entries.append(Entry("transformer", drive.transformer, 1))
    if drive.turn_off_transistors:
        entries.append(Entry("pulled off", f"by {_list(drive.turn_off_transistors)}", 1))
    return tuple(entries)


def _against(drive: GateDrive) -> str:
    output = drive.output
    own = f"the devices' own return {_list(drive.returns)}"
    if isinstance(drive.return_right, Unknown):
        return f"{output.return_net}; whether that fits {own} is not known"
    if not drive.return_right:
        return f"{output.return_net}, which is not {own}"
    if output.return_net in drive.returns:
        return f"{output.return_net}, the devices' own return"
    return f"{output.return_net}, tied to {own}"


def _supply(drive: GateDrive, stage: Stage) -> str:
    output = drive.output
    if not output.supply_net:
        return ""
    floating = ", the floating supply of a bootstrap" if output.floating_supply else ""
    stated = stage.gate_supplies.get(output.supply_net)
    volts = f", {range_figure(stated, 'V')} by the sheet" if stated is not None else ""
    return f"{output.supply_net}{floating}{volts}"


def _held(drive: GateDrive) -> tuple[Entry, ...]:
    if drive.hold_resistors:
        return (Entry("held off", f"by {_list(drive.hold_resistors)} while undriven", 1),)
    if drive.transformer:
        return (Entry("held off", "by the winding while undriven", 1),)
    return (Entry("held off", "by nothing while undriven", 1),)


def _clamp(clamp: GateClamp) -> str:
    ends = (clamp.lowest, clamp.highest)
    levels = ["not known" if isinstance(end, Unknown) else figure(end, "V") for end in ends]
    return f"{_list(clamp.parts)}, {levels[0]} to {levels[1]}"


def _bias(drive: GateDrive) -> tuple[Entry, ...]:
    if isinstance(drive.bias, Unknown):
        return (Entry("bias", f"not known: {drive.bias.what}", 1),)
    if not drive.bias:
        return ()
    return (Entry("bias", f"{figure(drive.bias, 'V')} below, by {_list(drive.bias_parts)}", 1),)


def _list(names: tuple[str, ...]) -> str:
    return ", ".join(names)
