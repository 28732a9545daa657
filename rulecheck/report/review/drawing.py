"""The drawings of a review as data: shapes, symbols, lines, labels and marks in drawing units."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Mark:
    """A finding at the thing that it is about."""

    number: int
    anchor: str
    level: str


@dataclass(frozen=True, slots=True)
class Shape:
    """An SVG path in drawing units; `fill` is `none`, `solid` or `hollow`."""

    path: str
    fill: str


@dataclass(frozen=True, slots=True)
class Symbol:
    name: str
    shapes: tuple[Shape, ...]
    gate: tuple[float, float] | None
    """Where the gate is, in drawing units; None where the symbol has none."""


@dataclass(frozen=True, slots=True)
class Line:
    path: str
    kind: str
    """`rail` or `wire`."""


@dataclass(frozen=True, slots=True)
class PlacedSymbol:
    symbol: str
    transform: str
    standing: str


@dataclass(frozen=True, slots=True)
class Label:
    x: float
    y: float
    text: str
    whole: str
    anchor: str
    kind: str
    """`name`, `model`, `net`, `gate`."""


@dataclass(frozen=True, slots=True)
class PlacedMark:
    x: float
    y: float
    mark: Mark


@dataclass(frozen=True, slots=True)
class Schematic:
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


@dataclass(frozen=True, slots=True)
class BlockBox:
    kind: str
    x: float
    y: float
    width: float
    height: float
    texts: tuple[Label, ...]
    marks: tuple[PlacedMark, ...]


@dataclass(frozen=True, slots=True)
class BlockView:
    width: float
    height: float
    boxes: tuple[BlockBox, ...]
    lines: tuple[Line, ...]
    dots: tuple[tuple[float, float], ...]
    labels: tuple[Label, ...]
    description: str


@dataclass(frozen=True, slots=True)
class Schematics:
    drawings: tuple[Schematic, ...]
    symbols: tuple[Symbol, ...]
    """Those that the drawings use, each once."""
    drawn: frozenset[str]
    """Names whose findings have a place in one of the drawings."""
