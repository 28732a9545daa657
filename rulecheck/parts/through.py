"""What power current passes as through a wire, and which nets a part joins at all.

XF1 BAT BAT_F FU-80            a fuse: BAT and BAT_F are one node while the stage works
XK1 C1 C2 BAT BAT_C RE-100     a relay: the contact joins BAT and BAT_C, the coil C1 and C2
XU1 A K C E OC-1               an optocoupler: A with K on one side, C with E on the other
"""

from collections.abc import Iterable, Mapping

from rulecheck.parts.part import Kind, Part
from rulecheck.values import Unknown
from rulecheck.values.record import Record

INRUSH_RESISTANCE = 100.0
"""Ohm, cold; common practice: inrush limiters are below it, temperature sensors above."""

_Pair = tuple[str, str]
_THROUGH: Mapping[Kind, tuple[_Pair, ...]] = {
    Kind.FUSE: (("plus", "minus"),),
    Kind.CIRCUIT_BREAKER: (("plus", "minus"),),
    Kind.NTC: (("plus", "minus"),),
    Kind.RELAY: (("common", "normally-open"),),
    Kind.COMMON_MODE_CHOKE: (("in-1", "out-1"), ("in-2", "out-2"), ("in-3", "out-3")),
    Kind.CURRENT_TRANSFORMER: (("primary-in", "primary-out"),),
    Kind.SENSOR: (("primary-in", "primary-out"),),
}
"""Pairs of roles; a relay's contact is read as closed, which it is while the stage works."""
_SECOND_SIDE: Mapping[Kind, tuple[str, ...]] = {
    Kind.RELAY: ("coil",),
    Kind.CURRENT_TRANSFORMER: ("secondary",),
    Kind.ISOLATOR: ("out", "collector", "emitter", "base", "supply-out", "ground-out"),
    Kind.DRIVER: ("supply-in", "ground-in", "input"),
    Kind.SENSOR: ("primary",),
    Kind.OTHER: ("supply-in", "ground-in", "in-", "input"),
}
"""Beginnings of the roles that stand apart from the part's other pins."""
_BARRIER_ROLES = ("supply-in", "ground-in", "primary-in", "in-plus", "in-minus")
"""A driver, sensor or supply module with such a pin has an insulated input side."""


class Joined(Record):
    """The groups of nets that a part joins; `sure` is False where its inside is not known."""

    groups: tuple[tuple[str, ...], ...]
    sure: bool = True


def through_nets(part: Part) -> tuple[_Pair, ...]:
    """The pairs of nets between which power current passes as through a wire."""
    if part.kind is Kind.NTC and (
        isinstance(part.value, Unknown) or part.value > INRUSH_RESISTANCE
    ):
        return ()
    pairs = ((part.net(a), part.net(b)) for a, b in _THROUGH.get(part.kind, ()))
    return tuple((a, b) for a, b in pairs if a is not None and b is not None)


def joined_nets(part: Part, wound: Iterable[str]) -> Joined:
    """Which of its nets a part joins galvanically; `wound` names the inductors on cores.

    A winding joins its own two nets only. Connectors join nothing: every pin is its own.
    """
    if part.kind is Kind.CONNECTOR or part.kind in (Kind.WINDING_SET, Kind.MODULE):
        return Joined(())
    if part.kind is Kind.COMMON_MODE_CHOKE:
        return Joined(through_nets(part))
    if part.kind is Kind.UNKNOWN:
        return Joined((part.nets,), sure=False)
    if part.kind in _SECOND_SIDE and is_barrier(part):
        starts = _SECOND_SIDE[part.kind]
        apart = tuple(pin.net for pin in part.pins if pin.role.startswith(starts))
        rest = tuple(pin.net for pin in part.pins if not pin.role.startswith(starts))
        return Joined((apart, rest))
    return Joined((part.nets,), sure=part.kind is not Kind.OTHER or len(part.nets) < 3)


def is_barrier(part: Part) -> bool:
    """Whether the part holds two sides apart inside: an isolator, a relay, an isolated driver."""
    if part.kind in (Kind.ISOLATOR, Kind.RELAY, Kind.CURRENT_TRANSFORMER):
        return True
    if part.kind not in (Kind.DRIVER, Kind.SENSOR, Kind.OTHER):
        return False
    stated = {"driver.isolation", "ratings.isolation"} & set(part.data)
    return bool(stated) or any(pin.role.startswith(_BARRIER_ROLES) for pin in part.pins)
