"""Parts and positions for tests, in one line each.

>>> q1 = device("Q1", "mosfet", "BUS", "SW", blocking=100.0, current=120.0)
>>> position("BUS", "SW", q1).name
'Q1'
"""

from collections.abc import Iterable, Mapping

from rulecheck.capability import Capability, find_capabilities
from rulecheck.netlist import Circuit, Element, Model, Subcircuit, read_circuit_text
from rulecheck.parts import (
    Datum,
    Kind,
    Part,
    PartList,
    Pin,
    identify_parts,
    read_part_data,
)
from rulecheck.parts.check import check_parts
from rulecheck.parts.edges import ROWS, find_edges
from rulecheck.reading import SourceText
from rulecheck.stage import Position
from rulecheck.values import Dimension, Span, Unknown, errors_of
from rulecheck.values.record import replace

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


def model(name: str, kind: str, **parameters: float | str) -> Model:
    return Model(name, kind, parameters, Span("hut.cir", 99))


def card(
    name: str,
    nets: str,
    text: str = "",
    value: float | None = None,
    kind: Model | None = None,
    **parameters: float | str,
) -> Element:
    """A hand-made element; `nets` with blanks between, the letter from the name."""
    number = Unknown(f"value of {name}", "the card") if value is None else value
    instance, _, local = name.rpartition(".")
    return Element(
        name,
        local[0].upper(),
        tuple(nets.split()),
        number,
        text,
        HERE,
        parameters,
        kind,
        instance=instance,
    )


def circuit(elements: Iterable[Element], **subcircuits: str) -> Circuit:
    """A circuit of hand-made elements; subcircuits by name with their ports."""
    defined = {n.lower(): Subcircuit(n, tuple(p.split()), HERE) for n, p in subcircuits.items()}
    return Circuit("hut.cir", "", tuple(elements), defined, (), (), ())


def identified(elements: Iterable[Element], parts_yaml: str = "", **subcircuits: str) -> PartList:
    """The part list of hand-made elements, checked for soundness."""
    sources = [SourceText("hut.parts.yaml", parts_yaml)] if parts_yaml else []
    found = identify_parts(circuit(elements, **subcircuits), read_part_data(sources))
    assert check_parts(found) == ()
    return found


def parts_of(netlist: str, parts_yaml: str = "") -> PartList:
    """The part list of a whole netlist (its first line is the title), checked for soundness."""
    read = read_circuit_text(SourceText("hut.cir", netlist))
    assert errors_of(read.problems) == ()
    sources = [SourceText("hut.parts.yaml", parts_yaml)] if parts_yaml else []
    found = identify_parts(read, read_part_data(sources))
    assert check_parts(found) == ()
    return found
