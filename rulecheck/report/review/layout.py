"""Where the parts of a schematic stand: nets are rows, two-terminal parts columns between them.

Nothing here knows a circuit by name. A net's height comes from its neighbours: the rails are
fixed, every other net has the mean height of the nets that its parts lead to, as a chain of equal
resistors would give it. Parts then fall into columns so that none covers another, a part going
on below the one that ends at its net.
"""

from collections.abc import Iterable, Mapping, Sequence

from rulecheck.values import natural_key
from rulecheck.values.record import Record

_ROUNDS = 400
_ALIKE = 0.06
"""Nets inside chains whose heights differ by less share a row."""
_HANGING = 0.45
"""Height of a net that only one part leads to: a little below the middle."""


class TwoTerminal(Record):
    """A part to be placed; current of its first edge enters at `start`."""

    name: str
    start: str
    end: str


class Place(Record):
    """Column, first and last row; `turned` where the part's start is its lower end."""

    column: int
    top: int
    bottom: int
    turned: bool


class Layout(Record):
    rows: Mapping[str, int]
    """By net, from the top."""
    places: Mapping[str, Place]
    """By part."""
    columns: int
    inside: frozenset[str]
    """Nets between two parts of one column: drawn without a line or a name."""


def lay_out(
    parts: Sequence[TwoTerminal], heights: Mapping[str, float], named: frozenset[str]
) -> Layout:
    """Place the parts in their order; `heights` fixes some nets, 1 is the top; `named` nets are
    drawn with a row and a name of their own."""
    rows, private = _rows(parts, _heights(parts, heights), named | set(heights))
    places: dict[str, Place] = {}
    ends: dict[str, tuple[str, str]] = {}
    for part in parts:
        turned = rows[part.start] > rows[part.end]
        upper, lower = (part.end, part.start) if turned else (part.start, part.end)
        top, bottom = rows[upper], rows[lower]
        column = _column(upper, lower, (top, bottom), places, ends)
        places[part.name] = Place(column, top, bottom, turned)
        ends[part.name] = (upper, lower)
    columns = 1 + max((place.column for place in places.values()), default=-1)
    inside = {net for net in private if _in_one_column(net, places, ends)}
    return Layout(rows, places, columns, frozenset(inside))


def _heights(parts: Sequence[TwoTerminal], fixed: Mapping[str, float]) -> dict[str, float]:
    """Relax the free nets to the mean of their neighbours; linear in parts, rounds are fixed."""
    neighbours: dict[str, list[str]] = {}
    for part in parts:
        neighbours.setdefault(part.start, []).append(part.end)
        neighbours.setdefault(part.end, []).append(part.start)
    ends = {net: _HANGING for net, near in neighbours.items() if len(set(near)) == 1}
    held = {**ends, **fixed}
    heights = {net: held.get(net, 0.5) for net in sorted(neighbours, key=natural_key)}
    free = [net for net in heights if net not in held]
    for _ in range(_ROUNDS):
        for net in free:
            heights[net] = sum(heights[near] for near in neighbours[net]) / len(neighbours[net])
    return heights


def _rows(
    parts: Sequence[TwoTerminal], heights: Mapping[str, float], named: frozenset[str]
) -> tuple[dict[str, int], set[str]]:
    """A row a net; nets inside chains share one where they stand equally high."""
    private = _private(parts, named)
    joined = {frozenset((part.start, part.end)) for part in parts}
    rows: dict[str, int] = {}
    row, shared, level = -1, [""], 2.0
    for net in sorted(heights, key=lambda net: (-heights[net], net in private, natural_key(net))):
        alike = abs(heights[net] - level) < _ALIKE
        meets = any(frozenset((net, other)) in joined for other in shared)
        if not (net in private and alike and shared[0] in private and not meets):
            row, shared, level = row + 1, [], heights[net]
        shared.append(net)
        rows[net] = row
    return rows, private


def _private(parts: Iterable[TwoTerminal], named: frozenset[str]) -> set[str]:
    """Nets at which exactly two parts meet and that have no name."""
    count: dict[str, int] = {}
    for part in parts:
        for net in (part.start, part.end):
            count[net] = count.get(net, 0) + 1
    return {net for net, number in count.items() if number == 2 and net not in named}


def _column(
    upper: str,
    lower: str,
    rows: tuple[int, int],
    places: Mapping[str, Place],
    ends: Mapping[str, tuple[str, str]],
) -> int:
    """The column of a part that ends at this one's net, else the first that has room."""
    blocked: set[int] = set()
    continuing: list[int] = []
    for name, place in places.items():
        above, below = place.bottom == rows[0], place.top == rows[1]
        meets = (above and ends[name][1] == upper) or (below and ends[name][0] == lower)
        if (place.top < rows[1] and rows[0] < place.bottom) or ((above or below) and not meets):
            blocked.add(place.column)
        elif meets:
            continuing.append(place.column)
    free = [column for column in continuing if column not in blocked]
    return free[0] if free else next(k for k in range(len(places) + 1) if k not in blocked)


def _in_one_column(
    net: str, places: Mapping[str, Place], ends: Mapping[str, tuple[str, str]]
) -> bool:
    columns = {places[name].column for name, pair in ends.items() if net in pair}
    return len(columns) == 1
