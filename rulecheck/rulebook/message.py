"""Messages: a template with expressions in braces becomes a sentence with units.

"blocks {blocks-forward}, {asked-forward-voltage} asked"  ->  "blocks 100 V, 58 V asked"
"""

import math
from collections.abc import Iterable, Mapping
from typing import Any

from rulecheck.facts import Form
from rulecheck.rulebook.estimate import Estimate, Spread
from rulecheck.rulebook.kleene import Answer
from rulecheck.rulebook.parsing import parse_condition
from rulecheck.rulebook.rulebook import Piece
from rulecheck.rulebook.scope import Bound, Scene
from rulecheck.rulebook.tree import Flaw
from rulecheck.rulebook.units import Unit, dimension_of, unit_text
from rulecheck.values import Unknown, write_quantity

_DIGITS = 4


def read_template(text: str) -> tuple[tuple[Piece, ...], tuple[Flaw, ...]]:
    """Split a template at its braces; a brace that is not closed is a flaw."""
    pieces: list[Piece] = []
    flaws: list[Flaw] = []
    at = 0
    while at < len(text):
        start = text.find("{", at)
        if start < 0:
            pieces.append(Piece(text[at:]))
            break
        pieces.append(Piece(text[at:start]))
        end = text.find("}", start)
        if end < 0:
            flaws.append(Flaw(start, "a brace that is not closed", "write `{field}`"))
            break
        piece = _expression(text[start + 1 : end], start + 1)
        if isinstance(piece, Flaw):
            flaws.append(piece)
        else:
            pieces.append(piece)
        at = end + 1
    return tuple(piece for piece in pieces if piece.words or piece.expression), tuple(flaws)


def _expression(text: str, at: int) -> Piece | Flaw:
    node = parse_condition(text)
    if isinstance(node, Flaw):
        return Flaw(at + node.at, f"in '{{{text}}}': {node.what}", node.remedy)
    return Piece(text, node, at)


def write_message(pieces: Iterable[tuple[str, Bound | None]], scene: Scene) -> str:
    """The sentence, with every expression computed and written with its unit."""
    words = (text if bound is None else written(bound, scene) for text, bound in pieces)
    return " ".join("".join(words).split())


def written(bound: Bound, scene: Scene) -> str:
    value = bound.run(scene)
    if isinstance(value, Unknown):
        return "unknown"
    return str(_WRITERS[bound.form](value, bound.unit))


def _number(value: Estimate, unit: Unit) -> str:
    if value.exact:
        return _figure(value.low, unit)
    if math.isfinite(value.low) and not math.isfinite(value.high) and value.low > 0.0:
        return f"at least {_figure(value.low, unit)}"
    if math.isfinite(value.low) and math.isfinite(value.high):
        return f"between {_figure(value.low, unit)} and {_figure(value.high, unit)}"
    return "unknown"


def _figure(value: float, unit: Unit) -> str:
    dimension = dimension_of(unit)
    if dimension is None:
        return f"{value:.{_DIGITS}g} {unit_text(unit)}"
    return write_quantity(value + 0.0, dimension.value, _DIGITS)


def _range(value: Spread, unit: Unit) -> str:
    low, high = _number(value.low, unit), _number(value.high, unit)
    return low if low == high else f"{low} to {high}"


def _truth(value: Answer, unit: Unit) -> str:
    del unit
    return "unknown" if value.truth is None else "yes" if value.truth else "no"


_WRITERS: Mapping[Form, Any] = {
    Form.NUMBER: _number,
    Form.RANGE: _range,
    Form.YES_NO: _truth,
    Form.TEXT: lambda value, unit: value,
    Form.TEXTS: lambda value, unit: ", ".join(value) or "none",
}


def plain_value(bound: Bound, scene: Scene) -> object:
    """A value for a report: a float, a list of two, a word, a truth, or None for unknown."""
    value = bound.run(scene)
    if isinstance(value, Estimate):
        return _plain(value)
    if isinstance(value, Spread):
        return (_plain(value.low), _plain(value.high))
    if isinstance(value, Answer):
        return value.truth
    return None if isinstance(value, Unknown) else value


def _plain(value: Estimate) -> float | None:
    return value.low if value.exact and math.isfinite(value.low) else None
