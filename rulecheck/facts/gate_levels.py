"""The voltages of a gate drive: its supply, and the gate when on and when off."""

from rulecheck.facts.facts import Bounds, Value
from rulecheck.facts.inputs import Inputs
from rulecheck.parts import Datum, Kind, Part
from rulecheck.stage import DrivenBy, GateDrive, Role
from rulecheck.values import Interval, Unknown

_DIODE_DROP = Interval(0.4, 1.2)
"""Volts that a bootstrap diode takes (common practice)."""
_WITH_SUPPLY = (DrivenBy.DRIVER, DrivenBy.ISOLATOR, DrivenBy.CONTROLLER)


def supply_range(
    inputs: Inputs, net: str, returned: str, seen: frozenset[str] = frozenset()
) -> Interval | Unknown:
    """Volts of a supply net over its return: from the sheet, a source, or the bootstrap's feed.

    `seen` are the nets that it feeds in turn: two that feed each other have no voltage.
    """
    stated = inputs.stage.gate_supplies.get(net)
    if stated is not None:
        return stated
    stiff = inputs.voltage_between.get((net, returned))
    if isinstance(stiff, Interval):
        return stiff
    source = _source_between(inputs, net, returned)
    if source is not None:
        return source
    feed = bootstrap_feed(inputs, net)
    if feed and feed not in seen:
        before = supply_range(inputs, feed, "", seen | {net})
        if isinstance(before, Interval):
            return before - _DIODE_DROP
        return before
    return Unknown(f"voltage of gate supply {net}", f"gate-supplies: {{{net}: [LOW, HIGH]}}")


def bootstrap_diodes(inputs: Inputs, net: str) -> tuple[Part, ...]:
    """Diodes from elsewhere to a floating supply net, directly or behind a resistor."""
    parts = inputs.part_by_name
    near = [net]
    for name in inputs.parts_at_net.get(net, ()):
        part = parts[name]
        if part.kind is Kind.RESISTOR and inputs.stage.roles.get(name) is Role.BOOTSTRAP:
            near += [inputs.merged(n) for n in part.nets]
    found = {
        name: parts[name]
        for at in near
        for name in inputs.parts_at_net.get(at, ())
        if parts[name].kind is Kind.DIODE
    }
    return tuple(found.values())


def bootstrap_feed(inputs: Inputs, net: str) -> str:
    """The supply net that a bootstrap diode charges this one from; empty where none does."""
    for diode in bootstrap_diodes(inputs, net):
        anode = inputs.merged(diode.net("anode") or "")
        feed = _behind_resistor(inputs, anode, net)
        if feed != net:
            return feed
    return ""


def _behind_resistor(inputs: Inputs, anode: str, net: str) -> str:
    """The net on the other side of the resistor in series with a bootstrap diode."""
    names = inputs.parts_at_net.get(anode, ())
    if len(names) != 2:
        return anode
    for name in names:
        part = inputs.part_by_name[name]
        if part.kind is Kind.RESISTOR:
            far = next((inputs.merged(n) for n in part.nets if inputs.merged(n) != anode), anode)
            return far if far != net else anode
    return anode


def _source_between(inputs: Inputs, net: str, returned: str) -> Interval | None:
    """Of a DC source from the net to the return, or to any net where none is asked."""
    for name in inputs.parts_at_net.get(net, ()):
        part = inputs.part_by_name[name]
        if part.kind is not Kind.VOLTAGE_SOURCE or not isinstance(part.value, float):
            continue
        plus, minus = (inputs.merged(part.net(role) or "") for role in ("plus", "minus"))
        if part.waveform is None and plus == net and returned in ("", minus):
            return Interval(part.value, part.value)
    return None


def supply_of(inputs: Inputs, drive: GateDrive) -> Interval | Unknown:
    """Volts of the drive's own supply over its return; behind drive transistors, of their rail."""
    output = drive.output
    if drive.buffers and not drive.transformer:
        return _rail_of_buffers(inputs, drive)
    if output.by in _WITH_SUPPLY and output.supply_net:
        return supply_range(inputs, output.supply_net, output.return_net)
    return Unknown(f"supply voltage of gate {drive.gate}", f"the supply of {drive.gate}'s driver")


def _rail_of_buffers(inputs: Inputs, drive: GateDrive) -> Interval | Unknown:
    """Of the first rail of the drive transistors, other than the return, that is known."""
    rails = [
        net
        for name in drive.buffers
        for net in (inputs.merged(pin.net) for pin in inputs.part_by_name[name].pins)
        if net not in drive.returns and not _within(inputs, drive, net)
    ]
    found = [supply_range(inputs, net, "") for net in dict.fromkeys(rails)]
    known = next((volts for volts in found if isinstance(volts, Interval)), None)
    unknown = Unknown(f"supply of the buffer at gate {drive.gate}", "gate-supplies: {RAIL: ...}")
    return known or next(iter(found), unknown)


def _within(inputs: Inputs, drive: GateDrive, net: str) -> bool:
    """Nets between the drive transistors: another one's base or gate, or one's way to the gate."""
    parts = (inputs.part_by_name[name] for name in drive.buffers)
    roles = [pin.role for part in parts for pin in part.pins if inputs.merged(pin.net) == net]
    shared = len(inputs.parts_at_net.get(net, ())) > 1 and len(roles) > 1
    return net == drive.gate or shared or any(role in ("base", "gate") for role in roles)


def on_level(inputs: Inputs, drive: GateDrive) -> Value:
    """The largest voltage between gate and return while on, clamps included; a magnitude."""
    return _clamped(_level(inputs, drive, upper=True), drive)


def unclamped_level(inputs: Inputs, drive: GateDrive) -> Value:
    """The largest voltage that the drive would put on the gate without its clamps."""
    return _level(inputs, drive, upper=True)


def least_on_level(inputs: Inputs, drive: GateDrive) -> Value:
    """The smallest voltage that the drive puts on the gate while on; a magnitude."""
    return _clamped(_level(inputs, drive, upper=False), drive)


def _clamped(level: Value, drive: GateDrive) -> Value:
    for clamp in drive.clamps:
        if isinstance(level, float) and isinstance(clamp.highest, float):
            level = min(level, max(clamp.highest, -_low_of(clamp.lowest)))
    return level


def _low_of(level: float | Unknown) -> float:
    return float("-inf") if isinstance(level, Unknown) else level


def _level(inputs: Inputs, drive: GateDrive, upper: bool) -> Value:
    output = drive.output
    if output.by in (DrivenBy.SOURCE, DrivenBy.CONSTANT):
        levels = _source_levels(inputs, drive)
        if isinstance(levels, Unknown):
            return levels
        return max(levels.high, 0.0)
    supply = supply_of(inputs, drive)
    if isinstance(supply, Unknown):
        return _by_permitted_supply(inputs, drive, supply)
    high = supply.high if upper else supply.low
    if output.return_net in drive.returns:
        return high
    return drive.bias if isinstance(drive.bias, Unknown) else high - drive.bias


def _by_permitted_supply(inputs: Inputs, drive: GateDrive, unknown: Unknown) -> Value:
    """Within what the driver's maker permits as its supply."""
    part = inputs.part_by_name.get(drive.output.part)
    if part is None or drive.buffers or drive.output.by not in _WITH_SUPPLY:
        return unknown
    datum = part.datum("driver.supply")
    if not isinstance(datum, Datum):
        return unknown
    if isinstance(datum.value, Interval):
        return Bounds(datum.value, (unknown,))
    return datum.value


def off_level(inputs: Inputs, drive: GateDrive) -> Value:
    """The voltage between gate and return while it is held off: 0, or below for a bias."""
    if drive.output.by is DrivenBy.SOURCE:
        levels = _source_levels(inputs, drive)
        return levels if isinstance(levels, Unknown) else min(levels.low, 0.0)
    if drive.turn_off_transistors:
        return 0.0
    return drive.bias if isinstance(drive.bias, Unknown) else 0.0 - drive.bias


def _source_levels(inputs: Inputs, drive: GateDrive) -> Interval | Unknown:
    """Least and largest voltage of the source, turned so that on is high."""
    part = inputs.part_by_name[drive.output.part]
    values = _stated_levels(part)
    if not values:
        return Unknown(f"levels of {part.name}", f"PULSE or PWL values of {part.name}")
    span = Interval(min(values), max(values))
    turned = inputs.merged(part.net("minus") or "") == drive.output.net
    upside = any(inputs.part_by_name[n].kind is Kind.P_MOSFET for n in drive.devices)
    return -span if turned != upside else span


def _stated_levels(part: Part) -> tuple[float, ...]:
    wave = part.waveform
    if part.kind is not Kind.VOLTAGE_SOURCE:
        return ()
    if wave is None:
        return (part.value,) if isinstance(part.value, float) else ()
    picked = {"pulse": wave.values[:2], "pwl": wave.values[1::2]}
    return picked.get(wave.kind, ())


def swing(inputs: Inputs, drive: GateDrive) -> Value:
    """Volts between on and off."""
    high, low = on_level(inputs, drive), off_level(inputs, drive)
    if isinstance(low, float) and isinstance(high, Bounds):
        return Bounds(high.range - Interval(low, low), high.missing)
    if isinstance(low, float) and isinstance(high, float):
        return high - low
    return low if isinstance(low, Unknown) else high
