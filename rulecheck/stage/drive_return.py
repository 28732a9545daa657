"""Whether an output is measured against the device's own source, and the bias between the two.

return of the driver on the source net                            right, no bias
return on VEE, zener or supply from VEE to the source             right, biased below the source
return on the power ground, source on the switching net           wrong
"""

from collections.abc import Iterable

from rulecheck.parts import Kind, Part
from rulecheck.stage.gate_drive import DrivenBy, GateDrive
from rulecheck.stage.layout import Layout, Touch, main_nets
from rulecheck.values import Unknown
from rulecheck.values.record import replace

_SENSE = 1.0
"""Ohm; a current sense resistor up to this between return and source counts as a joint."""
_NAMELESS = frozenset({DrivenBy.NOTHING, DrivenBy.CIRCUIT, DrivenBy.CONNECTOR})


def judge_return(layout: Layout, drive: GateDrive) -> GateDrive:
    """The drive with its bias and with the answer whether its return is the right one."""
    output = drive.output
    if output.by in _NAMELESS or output.by is DrivenBy.TRANSISTOR:
        unknown = _unknown_return(drive)
        return replace(drive, return_right=unknown, bias=unknown)
    rails = {output.return_net, output.off_net} - {""}
    if drive.buffers and not drive.transformer:
        return _behind_buffer(layout, drive)
    if not rails:
        unknown = _unknown_return(drive)
        return replace(drive, return_right=unknown, bias=unknown)
    if _pulls_to_supply(layout, drive):
        unknown = Unknown(f"off voltage of gate {drive.gate}", "a drawing of its supply")
        return replace(drive, return_right=True, bias=unknown)
    joined = _joined(layout, drive.returns)
    if output.off_net in joined:
        return replace(drive, return_right=True, bias=0.0)
    parts = _between(layout, output.off_net, joined)
    if parts:
        names = tuple(part.name for part in parts)
        return replace(drive, return_right=True, bias=_bias(drive, parts), bias_parts=names)
    if output.return_net in joined:
        unknown = Unknown(f"negative bias of gate {drive.gate}", "a zener or source that sets it")
        return replace(drive, return_right=True, bias=unknown)
    if any(_hidden(layout, rail, joined) for rail in rails):
        unknown = _unknown_return(drive)
        return replace(drive, return_right=unknown, bias=unknown)
    return replace(drive, return_right=False, bias=0.0)


def _unknown_return(drive: GateDrive) -> Unknown:
    part = drive.output.part
    settle = f"part data of {part} (kind: driver)" if part else f"the driver at net {drive.gate}"
    return Unknown(f"what the drive of gate {drive.gate} is measured against", settle)


def _behind_buffer(layout: Layout, drive: GateDrive) -> GateDrive:
    """The buffer's own rails decide: its lower transistor ends at the source, or at a bias."""
    ends = {net for name in drive.buffers for net in main_nets(layout, layout.parts.by_name[name])}
    joined = _joined(layout, drive.returns)
    if ends & joined:
        return replace(drive, return_right=True, bias=0.0)
    for net in sorted(ends):
        parts = _between(layout, net, joined)
        if parts:
            names = tuple(part.name for part in parts)
            return replace(drive, return_right=True, bias=_bias(drive, parts), bias_parts=names)
    unknown = _unknown_return(drive)
    return replace(drive, return_right=unknown, bias=unknown)


def _pulls_to_supply(layout: Layout, drive: GateDrive) -> bool:
    """A p-channel device's source is on the upper rail: off is high there."""
    parts = layout.parts.by_name
    return all(parts[name].kind is Kind.P_MOSFET for name in drive.devices)


def _joined(layout: Layout, nets: Iterable[str]) -> frozenset[str]:
    """The nets, and those behind a sense resistor or a drive's own small resistor."""
    nets = frozenset(nets)
    near = {
        other
        for net in nets
        for touch in layout.touches.get(net, ())
        if touch.part.kind is Kind.RESISTOR
        and isinstance(touch.part.value, float)
        and touch.part.value <= _SENSE
        for other in layout.others(touch.part, net)
    }
    return nets | near


_BIASING = (Kind.ZENER, Kind.VOLTAGE_SOURCE, Kind.OTHER, Kind.CAPACITOR)
"""Kinds that can hold a rail below the source, the most telling first."""


def _between(layout: Layout, rail: str, returns: frozenset[str]) -> tuple[Part, ...]:
    """Zeners, sources, outputs of one supply, and capacitors beside them, from rail to returns."""
    found = [
        touch.part
        for touch in layout.touches.get(rail, ())
        if touch.part.kind in _BIASING and _joins(layout, touch, returns)
    ]
    found.sort(key=lambda part: _BIASING.index(part.kind))
    # a capacitor alone holds no voltage
    return tuple(found) if found and found[0].kind is not Kind.CAPACITOR else ()


def _joins(layout: Layout, touch: Touch, returns: frozenset[str]) -> bool:
    far = [pin for pin in touch.part.pins if layout.net(pin.net) in returns]
    if touch.part.kind is not Kind.OTHER:
        return bool(far)
    return touch.role.startswith("out") and any(pin.role.startswith("out") for pin in far)


def _hidden(layout: Layout, rail: str, returns: frozenset[str]) -> bool:
    """A part whose inside nobody describes touches both: it may hold any voltage."""
    return any(
        touch.part.kind is Kind.UNKNOWN and set(layout.others(touch.part, rail)) & returns
        for touch in layout.touches.get(rail, ())
    )


def _bias(drive: GateDrive, parts: tuple[Part, ...]) -> float | Unknown:
    for part in parts:
        if part.kind is Kind.ZENER:
            datum = part.datum("ratings.blocking")
            if isinstance(datum, Unknown):
                return datum
            return datum.value if isinstance(datum.value, float) else datum.value.low
        if part.kind is Kind.VOLTAGE_SOURCE and isinstance(part.value, float):
            return abs(part.value)
    return Unknown(f"negative bias of gate {drive.gate}", "a zener or source that sets it")
