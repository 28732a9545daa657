"""What an element was read as, before its figures are looked up."""

from collections.abc import Mapping

from rulecheck.netlist import Element
from rulecheck.parts.part import Kind
from rulecheck.parts.roles import Roles, default_roles
from rulecheck.values.record import Record, field


class PartReading(Record):
    """Kind, roles in pin order, and what was taken for granted."""

    kind: Kind
    roles: Roles
    facts: Mapping[str, str] = field(default_factory=dict)
    assumed: str = ""
    """A sentence that goes on after the part's name; empty where nothing was assumed."""
    value: float | None = None
    """Stands in for a value that the card gives only in words."""
    figures: Mapping[str, float] = field(default_factory=dict)
    """Ratings that the value text states, by path."""


def read_as(
    element: Element,
    kind: Kind,
    assumed: str = "",
    facts: Mapping[str, str] | None = None,
    roles: Roles | None = None,
) -> PartReading:
    """The kind with its roles in device order; unknown where the number of pins is another."""
    count = len(element.nets)
    roles = roles or default_roles(kind, element.letter, count)
    if roles is None:
        return not_understood(element)
    return PartReading(kind, roles, facts or {}, assumed)


def not_understood(element: Element) -> PartReading:
    numbers = tuple(str(number) for number in range(1, len(element.nets) + 1))
    return PartReading(Kind.UNKNOWN, numbers)
