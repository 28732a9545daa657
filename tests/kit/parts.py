"""Parts and positions for tests, in one line each.

>>> q1 = device("Q1", "mosfet", "BUS", "SW", blocking=100.0, current=120.0)
>>> position("BUS", "SW", q1).name
'Q1'
"""

from collections.abc import Mapping
from dataclasses import replace

from rulecheck.capability import Capability, find_capabilities
from rulecheck.parts import Datum, Kind, Part, Pin
from rulecheck.parts.edges import ROWS, find_edges
from rulecheck.stage import Position
from rulecheck.values import Dimension, Span, Unknown

HERE = Span("hut.cir", 1)


def device(
    name: str,
    kind: str,
    tail: str,
    head: str,
    facts: Mapping[str, str] | None = None,
    **ratings: float,
) -> Part:
    """A power device whose main current, gated or forward, flows from `tail` to `head`."""
    words = dict(facts or {})
    forward = ROWS[Kind(kind), next(iter(words.values()), "")][0]
    data = {f"ratings.{n.replace('_', '-')}": stated(value) for n, value in ratings.items()}
    pins = (Pin(forward.tail, tail), Pin(forward.head, head))
    bare = Part(name, Kind(kind), pins, HERE, Unknown("value", "the card"), data=data, facts=words)
    bare = replace(bare, settle_in=f"the card {name}")
    return replace(bare, edges=find_edges(bare))


def stated(value: float, dimension: Dimension = Dimension.NUMBER) -> Datum:
    return Datum(value, dimension, "card", HERE)


def position(start: str, end: str, *devices: Part) -> Position:
    """One position made of the given devices, named after the first."""
    edges = tuple(edge for part in devices for edge in part.edges)
    names = tuple(part.name for part in devices)
    gated = any(part.gated for part in devices)
    return Position(devices[0].name, names, start, end, edges, gated, False, False, HERE)


def capability(start: str, end: str, *devices: Part) -> Capability:
    """What the devices can do as one position from `start` to `end`."""
    return find_capabilities([position(start, end, *devices)]).positions[devices[0].name]
