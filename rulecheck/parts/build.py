"""Turn one element with its reading and figures into a part, or a module into its devices.

X1 BUS SW PGND GH GL HB-1200-200      X1, a module
                                      X1.high, an IGBT with diode from BUS to SW
                                      X1.low, the same from SW to PGND
"""

from collections.abc import Iterable

from rulecheck.netlist import Element
from rulecheck.parts.edges import find_edges
from rulecheck.parts.part import Core, Kind, Part, Pin
from rulecheck.parts.part_data import StatedDevice, StatedPart, StatedWinding
from rulecheck.parts.part_reading import PartReading
from rulecheck.parts.roles import pair_up
from rulecheck.parts.stated import gather, multiplied
from rulecheck.values import Problem, Unknown
from rulecheck.values.record import Record, replace

_VALUED = frozenset({Kind.RESISTOR, Kind.CAPACITOR, Kind.INDUCTOR, Kind.NTC})
_UNNAMED = frozenset("RCLVI")


class Built(Record):
    parts: tuple[Part, ...]
    problems: tuple[Problem, ...]
    cores: tuple[Core, ...] = ()


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
        waveform=None if _is_constant(element) else element.waveform,
        multiplicity=multiplicity,
        instance=element.instance,
        instance_chain=element.instance_chain,
        named_by=_named_by(element, stated),
    )
    part = replace(part, edges=find_edges(part))
    if applied is None:
        return Built((part,), figures.problems)
    inner = [_device(part, device, applied) for device in applied.devices]
    wound = [_winding(part, winding, applied) for winding in applied.windings]
    return Built((part, *inner, *wound), figures.problems, _core(part, applied))


def _device(module: Part, device: StatedDevice, stated: StatedPart) -> Part:
    nets = {pin.role: pin.net for pin in module.pins}
    pins = tuple(Pin(role, nets[pin]) for role, pin in device.pins.items() if pin in nets)
    part = replace(
        _inside(module, device.name, stated),
        kind=device.kind,
        pins=pins,
        data=multiplied(device.data, module.multiplicity),
        facts=device.facts,
    )
    return replace(part, edges=find_edges(part))


def _winding(whole: Part, winding: StatedWinding, stated: StatedPart) -> Part:
    """Inductances on one core are as the squares of their turns."""
    nets = {pin.role: pin.net for pin in whole.pins}
    ends = (("plus", winding.dot), ("minus", winding.other))
    part = _inside(whole, winding.name, stated)
    ratio = winding.turns / stated.windings[0].turns
    henry = None if stated.inductance is None else stated.inductance * ratio**2
    return replace(
        part,
        kind=Kind.INDUCTOR,
        pins=tuple(Pin(role, nets[pin]) for role, pin in ends if pin in nets),
        value=Unknown(f"inductance of {part.name}", f"inductance of {_settled_by(stated)}")
        if henry is None
        else henry,
    )


def _core(whole: Part, stated: StatedPart) -> tuple[Core, ...]:
    windings = stated.windings
    if not windings:
        return ()
    names = tuple(f"{whole.name}.{winding.name}" for winding in windings)
    turns = tuple(winding.turns / windings[0].turns for winding in windings)
    return (Core(whole.name, names, turns, whole.span),)


def _inside(whole: Part, name: str, stated: StatedPart) -> Part:
    """A part inside another one, before its kind and pins are given."""
    full = f"{whole.name}.{name}"
    return Part(
        name=full,
        kind=Kind.OTHER,
        pins=(),
        span=whole.span,
        value=_no_value(full),
        text=whole.text,
        settle_in=f"{name} of {_settled_by(stated)}",
        multiplicity=whole.multiplicity,
        module=whole.name,
        instance=whole.instance,
        instance_chain=whole.instance_chain,
        named_by=whole.named_by,
    )


def _value(element: Element, reading: PartReading, multiplicity: float) -> float | Unknown:
    """Ohm, farad, henry of the devices in parallel, or a source's DC value."""
    value = element.value if reading.value is None else reading.value
    if isinstance(value, Unknown):
        return value
    if element.controls:
        return _no_value(element.name)
    if reading.kind in _VALUED:
        return value * multiplicity if reading.kind is Kind.CAPACITOR else value / multiplicity
    if reading.kind in (Kind.VOLTAGE_SOURCE, Kind.CURRENT_SOURCE):
        return value
    return _no_value(element.name)


def _is_constant(element: Element) -> bool:
    """A behavioural source whose expression depends on nothing is one with a DC value."""
    wave = element.waveform
    known = not isinstance(element.value, Unknown)
    return wave is not None and wave.kind == "behavioural" and known and not element.controls


def _no_value(name: str) -> Unknown:
    return Unknown(f"value of {name}", f"a number on the card of {name}")


def _named_by(element: Element, stated: StatedPart | None) -> str:
    if stated is not None:
        return "part data"
    if element.model is not None:
        return "model"
    return "subcircuit" if element.letter == "X" else ""


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
