"""The block view: ports, filters and legs as boxes between the nets that join them.

Boxes and nets alternate in columns, by their distance from the first port, so that every join runs
between neighbouring columns. Ground is left out: everything stands on it.
"""

from collections.abc import Mapping, Sequence

from rulecheck.report.review.drawing import BlockBox, BlockView, Label, Line, Mark, PlacedMark
from rulecheck.values import natural_key
from rulecheck.values.record import Record

MOST = 40
_WIDTH, _LINE_HEIGHT, _PAD = 148.0, 14.0, 8.0
_GAP, _BAR_STEP, _LETTER = 18.0, 18.0, 6.3
_LONGEST = 22


class Block(Record):
    """A thing with nets: its name and further lines, and what was found on it."""

    name: str
    kind: str
    """`port`, `leg`, `filter` or `position`."""
    lines: tuple[str, ...]
    nets: tuple[str, ...]
    marks: tuple[Mark, ...] = ()

    @property
    def height(self) -> float:
        return max(_LINE_HEIGHT * (len(self.lines) + 1), 14.0 * len(self.nets)) + 2 * _PAD


class _Grid(Record):
    """Columns of boxes and of nets in turn, boxes first, each in order from the top."""

    boxes: tuple[tuple[int, ...], ...]
    nets: tuple[tuple[str, ...], ...]


def draw_blocks(blocks: Sequence[Block], words: Mapping[str, str]) -> BlockView | None:
    """The view, or None where there are too many blocks to be read; `words` tell of a net."""
    if not blocks or len(blocks) > MOST:
        return None
    grid = _grid(blocks)
    xs, bars, width = _columns(grid, words)
    places = _places(blocks, grid)
    ends: dict[str, list[tuple[float, float]]] = {}
    for number, block in enumerate(blocks):
        column, top = places[number]
        for net, side, y in _sides(block, column, grid, top):
            ends.setdefault(net, []).append((xs[column] + (_WIDTH if side else 0.0), y))
    height = max(top + blocks[k].height for k, (_, top) in places.items()) + _GAP
    joins = [_join(net, ends[net], bars[net], words.get(net, "")) for net in bars if net in ends]
    return BlockView(
        width,
        height,
        tuple(_box(block, xs[places[k][0]], places[k][1]) for k, block in enumerate(blocks)),
        tuple(line for lines, _, _ in joins for line in lines),
        tuple(dot for _, dots, _ in joins for dot in dots),
        tuple(label for _, _, labels in joins for label in labels),
        "; ".join(f"{block.name} at {', '.join(block.nets) or 'ground'}" for block in blocks),
    )


def _grid(blocks: Sequence[Block]) -> _Grid:
    """Walk outwards from the first block; what nothing joins begins a walk of its own."""
    at_net: dict[str, list[int]] = {}
    for number, block in enumerate(blocks):
        for net in block.nets:
            at_net.setdefault(net, []).append(number)
    boxes: dict[int, list[int]] = {}
    nets: dict[int, list[str]] = {}
    seen: set[int] = set()
    known: set[str] = set()
    for first in range(len(blocks)):
        layer, depth = [] if first in seen else [first], 0
        while layer:
            seen.update(layer)
            boxes.setdefault(depth, []).extend(layer)
            reached = [n for k in layer for n in blocks[k].nets if n not in known]
            known.update(reached)
            reached = list(dict.fromkeys(reached))
            nets.setdefault(depth, []).extend(reached)
            following = (k for net in reached for k in at_net[net] if k not in seen)
            layer, depth = list(dict.fromkeys(following)), depth + 1
    return _Grid(
        tuple(tuple(boxes[depth]) for depth in sorted(boxes)),
        tuple(tuple(nets[depth]) for depth in sorted(nets)),
    )


def _columns(grid: _Grid, words: Mapping[str, str]) -> tuple[list[float], dict[str, float], float]:
    """Where each column of boxes starts, where each net stands, and the width of it all."""
    xs: list[float] = []
    bars: dict[str, float] = {}
    x = _GAP
    for nets in grid.nets:
        xs.append(x)
        x += _WIDTH + _GAP
        for net in nets:
            bars[net] = x
            x += _BAR_STEP
        longest = max((len(_titled(net, words.get(net, ""))) for net in nets), default=0)
        x += max(min(longest, _LONGEST + 8) * _LETTER - _BAR_STEP, 0.0) if nets else 0.0
    return xs, bars, x + _GAP


def _titled(net: str, words: str) -> str:
    return f"{_short(net)} {words}".rstrip()


def _short(text: str) -> str:
    return text if len(text) <= _LONGEST else f"{text[: _LONGEST - 1]}…"


def _places(blocks: Sequence[Block], grid: _Grid) -> dict[int, tuple[int, float]]:
    """By block: its column and its upper edge; a column leaves room for the names of its nets."""
    places = {}
    for column, numbers in enumerate(grid.boxes):
        y = _GAP + 14.0 * max(len(nets) for nets in grid.nets)
        for number in numbers:
            places[number] = (column, y)
            y += blocks[number].height + _GAP
    return places


def _sides(block: Block, column: int, grid: _Grid, top: float) -> list[tuple[str, int, float]]:
    """Each net of a block with its side (1: right) and the height at which it leaves."""
    right = [net for net in block.nets if net in grid.nets[column]]
    left = [net for net in block.nets if net not in right]
    ends = []
    for side, nets in ((1, right), (0, left)):
        step = block.height / (len(nets) + 1)
        ends += [(net, side, top + step * (k + 1)) for k, net in enumerate(nets)]
    return ends


def _join(
    net: str, ends: Sequence[tuple[float, float]], x: float, words: str
) -> tuple[list[Line], list[tuple[float, float]], list[Label]]:
    """The net as an upright bar with a line to each of its blocks, and its name above it."""
    heights = [y for _, y in ends]
    top, bottom = min(heights), max(heights)
    lines = [Line(f"M{end:g} {y:g}H{x:g}", "wire") for end, y in ends]
    lines.append(Line(f"M{x:g} {top - 6.0:g}V{bottom + 6.0:g}", "rail"))
    dots = [(x, y) for y in heights] if len(ends) > 2 else []
    label = _titled(net, words)
    at = round(top - 10.0, 2)
    return lines, dots, [Label(x - 3.0, at, label, f"{net} {words}".rstrip(), "start", "net")]


def _box(block: Block, x: float, y: float) -> BlockBox:
    texts = [Label(x + _PAD, y + _PAD + 11.0, _short(block.name), block.name, "start", "name")]
    texts += [
        Label(x + _PAD, y + _PAD + 11.0 + _LINE_HEIGHT * k, _short(line), line, "start", "model")
        for k, line in enumerate(block.lines, 1)
    ]
    marks = tuple(
        PlacedMark(x + _WIDTH - 30.0 * (k + 1), y - 2.0, mark)
        for k, mark in enumerate(block.marks[:3])
    )
    return BlockBox(block.kind, x, y, _WIDTH, block.height, tuple(texts), marks)


def in_natural_order(blocks: Sequence[Block]) -> list[Block]:
    """Ports in their own order, the rest by name."""
    ports = [block for block in blocks if block.kind == "port"]
    rest = sorted(
        (block for block in blocks if block.kind != "port"), key=lambda b: natural_key(b.name)
    )
    return [*ports, *rest]
