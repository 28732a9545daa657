"""Recognise the small networks around switches that carry no power current.

series R and C with nothing else between them            an RC snubber
a diode into a small C with an R beside it                an RCD snubber or clamp
a zener or surge clamp                                    a clamp
a capacitor of 100 nF or less across one device           a snubber of that device
a diode into a C that stands on a switching net and
  feeds a driver                                          a bootstrap supply
"""

from collections.abc import Mapping

from rulecheck.parts import Kind, Part
from rulecheck.stage.layout import (
    CIRCUITS,
    DIODES,
    Layout,
    is_semiconductor,
    main_nets,
)
from rulecheck.stage.stage import Role
from rulecheck.values import Unknown
from rulecheck.values.record import Record

SNUBBER_CAPACITANCE = 100e-9
"""Farad; common practice: a larger capacitor across one switch is no snubber."""
CLAMP_CAPACITANCE = 1e-6
"""Farad; a larger capacitor behind a diode is taken for an output."""
_OPAQUE = (Kind.UNKNOWN, Kind.OTHER)
SHARING_RESISTANCE = 1e3
"""Ohm; a resistor across a device from here on shares voltage or bleeds."""


class Peripheral(Record):
    roles: Mapping[str, Role]
    refers_to: Mapping[str, str]
    """Part name -> the device or the net that the network stands at."""
    assumed: tuple[str, ...]


class _Found(Record):
    part: Part
    role: Role
    at: str


def find_peripheral(layout: Layout, gate_parts: frozenset[str]) -> Peripheral:
    found: dict[str, _Found] = {}
    for net in layout.touches:
        for item in _at_net(layout, net, gate_parts):
            found.setdefault(item.part.name, item)
    for item in _before_bootstraps(layout, found):
        found.setdefault(item.part.name, item)
    for item in _across_devices(layout, gate_parts):
        found.setdefault(item.part.name, item)
    for part in layout.parts.parts:
        if part.kind is Kind.ZENER and part.name not in gate_parts:
            found.setdefault(part.name, _Found(part, Role.CLAMP, main_nets(layout, part)[0]))
        if part.kind is Kind.VARISTOR:
            found.setdefault(part.name, _Found(part, Role.CLAMP, layout.ends(part)[0]))
    kept = {
        name: item
        for name, item in found.items()
        if not _overruled(layout, name) and name not in gate_parts
    }
    return Peripheral(
        {name: item.role for name, item in kept.items()},
        {name: item.at for name, item in kept.items()},
        tuple(_sentence(item) for item in kept.values()),
    )


def _sentence(item: _Found) -> str:
    article = {
        Role.BOOTSTRAP: "part of a bootstrap supply on",
        Role.SHARING: "sharing voltage of",
        Role.SUPPLY: "feeding the auxiliary supply",
    }
    return f"{item.part.name} read as {article.get(item.role, f'a {item.role} of')} {item.at}"


def _overruled(layout: Layout, name: str) -> bool:
    override = layout.sheet.overrides.get(name.lower())
    return override is not None and (
        override.role is not None or override.voltage is not None or override.current is not None
    )


def _at_net(layout: Layout, net: str, gate_parts: frozenset[str]) -> list[_Found]:
    if net in layout.port_nets or net in layout.grounds:
        return []
    by_name = {t.part.name: t.part for t in layout.touches[net] if not _senses(t.part)}
    around = list(by_name.values())
    if any(part.name in gate_parts for part in around):
        return []
    kinds = [part.kind for part in around]
    if sorted(kinds) == [Kind.CAPACITOR, Kind.RESISTOR]:
        return [_Found(part, Role.SNUBBER, _behind(layout, around, net)) for part in around]
    if not set(kinds) <= {*DIODES, Kind.CAPACITOR, Kind.RESISTOR, Kind.BJT, *CIRCUITS}:
        return []
    diodes = [part for part in around if part.kind in DIODES]
    capacitors = [part for part in around if part.kind is Kind.CAPACITOR]
    if capacitors and _supplies_circuits(layout, net):
        return _bootstrap(layout, net, around, capacitors) or _supply(layout, net, around)
    if Kind.BJT in kinds:
        return []
    if diodes and (Kind.ZENER in kinds or _is_clamp(around, capacitors)):
        at = _behind(layout, diodes, net)
        return [_Found(p, Role.CLAMP, at) for p in around if p.kind not in CIRCUITS]
    return []


def _senses(part: Part) -> bool:
    """Dividers and bleeders of large resistance say nothing about a network's purpose."""
    large = 100e3
    return (
        part.kind is Kind.RESISTOR and not isinstance(part.value, Unknown) and part.value >= large
    )


def _is_clamp(around: list[Part], capacitors: list[Part]) -> bool:
    if not capacitors or not any(p.kind is Kind.RESISTOR for p in around):
        return False
    return all(not isinstance(c.value, Unknown) and c.value < CLAMP_CAPACITANCE for c in capacitors)


def _supplies_circuits(layout: Layout, net: str) -> bool:
    """Some circuit takes its supply from the net, or one whose inside is not known touches it."""
    return any(
        t.part.kind in CIRCUITS
        and (
            t.role.startswith(("supply", "bootstrap")) or t.part.kind in (Kind.UNKNOWN, Kind.OTHER)
        )
        for t in layout.touches[net]
    )


def _bootstrap(
    layout: Layout, net: str, around: list[Part], capacitors: list[Part]
) -> list[_Found]:
    """The capacitor's far end must be a net that some gated device switches."""
    for capacitor in capacitors:
        for far in layout.others(capacitor, net):
            if far not in layout.grounds and _switches(layout, far):
                own = [p for p in around if p.kind not in CIRCUITS]
                return [_Found(p, Role.BOOTSTRAP, far) for p in own]
    return []


def _supply(layout: Layout, net: str, around: list[Part]) -> list[_Found]:
    """What feeds a supply from another net, unless it rectifies a winding."""
    return [
        _Found(part, Role.SUPPLY, net)
        for part in around
        if is_semiconductor(part)
        and not any(
            t.part.name in layout.coupled
            for other in main_nets(layout, part)
            for t in layout.touches[other]
        )
    ]


def _before_bootstraps(layout: Layout, found: Mapping[str, _Found]) -> list[_Found]:
    """A diode and a resistor in series into a bootstrap supply."""
    more = []
    for item in list(found.values()):
        if item.role is not Role.BOOTSTRAP or item.part.kind is not Kind.RESISTOR:
            continue
        for net in layout.ends(item.part):
            around = [t.part for t in layout.touches[net] if t.part.name != item.part.name]
            if [part.kind for part in around] == [Kind.DIODE]:
                more.append(_Found(around[0], Role.BOOTSTRAP, item.at))
    return more


def _switches(layout: Layout, net: str) -> bool:
    return any(
        is_semiconductor(t.part) and t.part.gated and net in main_nets(layout, t.part)
        for t in layout.touches[net]
    )


def _behind(layout: Layout, around: list[Part], net: str) -> str:
    """The far net of the first part, preferring one that a device switches."""
    far = [other for part in around for other in layout.others(part, net)]
    switched = [other for other in far if _switches(layout, other) and other not in layout.grounds]
    return (switched or far or [net])[0]


def _across_devices(layout: Layout, gate_parts: frozenset[str]) -> list[_Found]:
    devices = {
        frozenset(main_nets(layout, part)): part
        for part in reversed(layout.parts.parts)
        if is_semiconductor(part) and part.name not in gate_parts
    }
    found = []
    for part in layout.parts.parts:
        if part.kind not in (Kind.CAPACITOR, Kind.RESISTOR) or part.name in layout.wires:
            continue
        device = devices.get(frozenset(layout.ends(part)))
        if device is not None and not isinstance(part.value, Unknown):
            role = _role_across(part.kind, part.value)
            found += [_Found(part, role, device.name)] if role else []
    return found


def _role_across(kind: Kind, value: float) -> Role | None:
    if kind is Kind.CAPACITOR:
        return Role.SNUBBER if value <= SNUBBER_CAPACITANCE else None
    return Role.SHARING if value >= SHARING_RESISTANCE else None
