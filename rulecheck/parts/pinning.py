"""Give an element's nets the roles that part data names.

pins: [source, source, source, gate, drain]   Q1 A A A G B      source A, gate G, drain B
pins: {gate: 1, drain: 2, source: 3}          Q1 G D S          by number
pins: {collector: C1, emitter: E1, gate: G}   X1 ... IGBT-MOD   by the ports of its definition
"""

from rulecheck.netlist import Element, Subcircuit
from rulecheck.parts.part import Kind
from rulecheck.parts.part_data import StatedPart
from rulecheck.parts.roles import PINOUTS, Roles, default_roles, required, roles_by_ports
from rulecheck.values import Problem, error

_NAMED_BY_DATA = frozenset({Kind.DRIVER, Kind.ISOLATOR})
"""Kinds whose pins mean nothing without their names."""


def find_roles(
    element: Element, part: StatedPart, definition: Subcircuit | None
) -> Roles | Problem:
    """A role for each net in card order, or what is wrong with the pins of the entry."""
    if part.pins_by_name:
        return _by_name(element, part, definition)
    if part.pins:
        return _by_order(element, part)
    return _by_kind(element, part, definition)


def _by_order(element: Element, part: StatedPart) -> Roles | Problem:
    count = len(element.nets)
    roles = part.pins
    if count == len(roles) + 1 and element.letter == "M" and part.kind in PINOUTS:
        roles = (*roles, "body")
    left_out = set(roles[count:]) & set(required(part.kind))
    if count > len(roles) or left_out or (count < len(roles) and part.kind not in PINOUTS):
        what = f"{element.name} has {count} nets, but part '{part.key}' lists {len(roles)} pins"
        return error(part.span, what, f"list one role for each net of {element.span}")
    return roles[:count]


def _by_name(element: Element, part: StatedPart, definition: Subcircuit | None) -> Roles | Problem:
    ports = [port.lower() for port in definition.ports] if definition else []
    roles = [str(number) for number in range(1, len(element.nets) + 1)]
    for role, pin in part.pins_by_name.items():
        index = _index(pin, ports)
        if index is None or not 0 <= index < len(roles):
            what = f"{element.name} has no pin '{pin}', which part '{part.key}' calls {role}"
            return error(part.span, what, _pin_names(ports, len(roles)))
        roles[index] = role
    return tuple(roles)


def _index(pin: str, ports: list[str]) -> int | None:
    if pin.lower() in ports:
        return ports.index(pin.lower())
    return int(pin) - 1 if pin.isascii() and pin.isdigit() else None


def _pin_names(ports: list[str], count: int) -> str:
    return f"its pins are {', '.join(ports)}" if ports else f"number its pins from 1 to {count}"


def _by_kind(element: Element, part: StatedPart, definition: Subcircuit | None) -> Roles | Problem:
    if definition is not None:
        named = roles_by_ports(part.kind, definition.ports)
        if named is not None and len(named) == len(element.nets):
            return named
    roles = None
    if part.kind not in _NAMED_BY_DATA:
        roles = default_roles(part.kind, element.letter, len(element.nets))
    if roles is None:
        what = f"part '{part.key}' does not say which of the {len(element.nets)} pins is which"
        remedy = f"list the roles in the order of {element.name}'s nets: pins: [...]"
        return error(part.span, what, remedy)
    return roles


def split_nets(element: Element, roles: Roles, part: StatedPart) -> Problem | None:
    """A role on pins of two different nets: the package's pins are not joined on the board."""
    nets: dict[str, str] = {}
    for role, net in zip(roles, element.nets, strict=False):
        other = nets.setdefault(role, net)
        if other != net and role in PINOUTS.get(part.kind, PINOUTS[Kind.DIODE]).needed:
            what = f"{element.name} has its {role} pins on two nets, {other} and {net}"
            return error(element.span, what, f"join them, or correct the pins of '{part.key}'")
    return None
