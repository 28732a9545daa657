"""The drawings of a review as data: shapes, symbols, lines, labels and marks in drawing units."""

from rulecheck.values.record import Record


class Mark(Record):
    """A finding at the thing that it is about."""

    number: int
    anchor: str
    level: str


class Shape(Record):
    """An SVG path in drawing units; `fill` is `none`, `solid` or `hollow`."""

    path: str
    fill: str


class Symbol(Record):
    name: str
    shapes: tuple[Shape, ...]
    gate: tuple[float, float] | None
    """Where the gate is, in drawing units; None where the symbol has none."""


class Line(Record):
    path: str
    kind: str
    """`rail` or `wire`."""


class PlacedSymbol(Record):
    symbol: str
    transform: str
    standing: str


class Label(Record):
    x: float
    y: float
    text: str
    whole: str
    anchor: str
    kind: str
    """`name`, `model`, `net`, `gate`."""


class PlacedMark(Record):
    x: float
    y: float
    mark: Mark


class Schematic(Record):
    name: str
    title: str
    description: str
    width: float
    height: float
    lines: tuple[Line, ...]
    dots: tuple[tuple[float, float], ...]
    symbols: tuple[PlacedSymbol, ...]
    labels: tuple[Label, ...]
    marks: tuple[PlacedMark, ...]
    found: tuple[Mark, ...]
    notes: tuple[str, ...]


class BlockBox(Record):
    kind: str
    x: float
    y: float
    width: float
    height: float
    texts: tuple[Label, ...]
    marks: tuple[PlacedMark, ...]


class BlockView(Record):
    width: float
    height: float
    boxes: tuple[BlockBox, ...]
    lines: tuple[Line, ...]
    dots: tuple[tuple[float, float], ...]
    labels: tuple[Label, ...]
    description: str


class Schematics(Record):
    drawings: tuple[Schematic, ...]
    symbols: tuple[Symbol, ...]
    """Those that the drawings use, each once."""
    drawn: frozenset[str]
    """Names whose findings have a place in one of the drawings."""
