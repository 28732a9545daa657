"""The product of this step as one canonical text, for golden tests and `explain --step parts`.

M1 mosfet drain=BUS gate=G source=SW
  drain->source gated blocks 100 carries 120
  source->drain free blocks 0 carries 120
  ratings.blocking 100 V (model FET)
"""

from collections.abc import Iterator

from rulecheck.parts.part import Core, Datum, Edge, Part, PartList
from rulecheck.values import Interval, Unknown


def parts_text(parts: PartList) -> str:
    """Every part with its pins, edges and figures, then cores, what was assumed and problems."""
    return "\n".join(_lines(parts)) + "\n"


def _lines(parts: PartList) -> Iterator[str]:
    for part in parts.parts:
        yield from _part(part)
    for core in parts.cores:
        yield _core(core)
    for name in parts.not_understood:
        yield f"not understood: {name}"
    for sentence in parts.assumed:
        yield f"assumed: {sentence}"
    for problem in parts.problems:
        yield problem.line()


def _part(part: Part) -> Iterator[str]:
    pins = " ".join(f"{pin.role}={pin.net}" for pin in part.pins)
    value = "" if isinstance(part.value, Unknown) else f" {part.value:g}"
    yield f"{part.name} {part.kind}{value} {pins}".rstrip()
    for edge in part.edges:
        yield f"  {_edge(edge, part)}"
    for path, datum in part.data.items():
        yield f"  {path} {_datum(datum)} ({datum.stated_in})"
    for path, word in sorted(part.facts.items()):
        yield f"  {path} {word}"


def _edge(edge: Edge, part: Part) -> str:
    role = {pin.net: pin.role for pin in reversed(part.pins)}
    way = f"{role[edge.tail]}->{role[edge.head]}"
    return f"{way} {edge.conduction} blocks {_rating(edge.blocks)} carries {_rating(edge.current)}"


def _rating(rating: float | Unknown) -> str:
    return "?" if isinstance(rating, Unknown) else f"{rating:g}"


def _datum(datum: Datum) -> str:
    value = datum.value
    number = f"{value.low:g} ... {value.high:g}" if isinstance(value, Interval) else f"{value:g}"
    return f"{number} {datum.dimension.value}".rstrip()


def _core(core: Core) -> str:
    windings = " ".join(f"{n}={t:g}" for n, t in zip(core.windings, core.turns, strict=True))
    return f"core {core.name} {windings}"
