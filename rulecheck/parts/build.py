"""Turn one element with its reading and figures into a part, or a module into its devices.

X1 BUS SW PGND GH GL HB-1200-200      X1, a module
                                      X1.high, an IGBT with diode from BUS to SW
                                      X1.low, the same from SW to PGND
"""

from collections.abc import Iterable
from dataclasses import dataclass, replace

from rulecheck.netlist import Element
from rulecheck.parts.edges import find_edges
from rulecheck.parts.part import Kind, Part, Pin
from rulecheck.parts.part_data import StatedDevice, StatedPart
from rulecheck.parts.reading import PartReading
from rulecheck.parts.roles import pair_up
from rulecheck.parts.stated import gather, multiplied
from rulecheck.values import Problem, Unknown

_VALUED = frozenset({Kind.RESISTOR, Kind.CAPACITOR, Kind.INDUCTOR})
_CONTROLLED = frozenset("EFGHB")
_UNNAMED = frozenset("RCLVI")


@dataclass(frozen=True, slots=True)
class Built:
    parts: tuple[Part, ...]
    problems: tuple[Problem, ...] = ()


def build_part(
    element: Element, reading: PartReading, stated: StatedPart | None, multiplicity: float
) -> Built:
    """The part of an element; behind a module's part, the parts of its devices."""
    applied = stated if stated and reading.kind is stated.kind else None
    figures = gather(element, reading.kind, applied, reading.figures)
    part = Part(
        name=element.name,
        kind=reading.kind,
        pins=tuple(Pin(role, net) for role, net in pair_up(reading.roles, element.nets)),
        span=element.span,
        value=_value(element, reading, multiplicity),
        text=element.text,
        data=multiplied(figures.data, multiplicity),
        facts={**figures.facts, **reading.facts},
        settle_in=_settle_in(element, stated),
        waveform=element.waveform,
        multiplicity=multiplicity,
        instance=element.instance,
        instance_chain=element.instance_chain,
    )
    part = replace(part, edges=find_edges(part))
    inner = [_inner(part, device, applied) for device in applied.devices] if applied else []
    return Built((part, *inner), figures.problems)


def _inner(module: Part, device: StatedDevice, stated: StatedPart) -> Part:
    nets = {pin.role: pin.net for pin in module.pins}
    pins = tuple(
        Pin(role, nets[pin.lower()]) for role, pin in device.pins.items() if pin.lower() in nets
    )
    name = f"{module.name}.{device.name}"
    part = Part(
        name=name,
        kind=device.kind,
        pins=pins,
        span=module.span,
        value=_no_value(name),
        text=module.text,
        data=multiplied(device.data, module.multiplicity),
        facts=device.facts,
        settle_in=f"device {device.name} of {_settled_by(stated)}",
        multiplicity=module.multiplicity,
        module=module.name,
        instance=module.instance,
        instance_chain=module.instance_chain,
    )
    return replace(part, edges=find_edges(part))


def _value(element: Element, reading: PartReading, multiplicity: float) -> float | Unknown:
    """Ohm, farad, henry of the devices in parallel, or a source's DC value."""
    value = element.value if reading.value is None else reading.value
    if element.letter in _CONTROLLED or isinstance(value, Unknown):
        return _no_value(element.name) if not isinstance(value, Unknown) else value
    if reading.kind in _VALUED:
        return value * multiplicity if reading.kind is Kind.CAPACITOR else value / multiplicity
    if reading.kind in (Kind.VOLTAGE_SOURCE, Kind.CURRENT_SOURCE):
        return value
    return _no_value(element.name)


def _no_value(name: str) -> Unknown:
    return Unknown(f"value of {name}", f"a number on the card of {name}")


def _settle_in(element: Element, stated: StatedPart | None) -> str:
    if stated is not None:
        return _settled_by(stated)
    if element.text and element.letter not in _UNNAMED:
        return f"part {element.text} (in a parts file)"
    return f"the card {element.name} ({element.span.file}:{element.span.line})"


def _settled_by(stated: StatedPart) -> str:
    return f"part {stated.key} (in {stated.span.file})"


def multiplicity_of(element: Element, enclosing: Iterable[Element]) -> float:
    """Devices in parallel: `m` of the card and of the instances around it."""
    times = 1.0
    for card in (element, *enclosing):
        count = card.parameters.get("m", 1.0)
        if isinstance(count, float | int) and count > 0.0:
            times *= count
    return times
