"""A condition as a tree of plain records; `at` is the place of each in its text, from 0."""

from collections.abc import Callable
from typing import Any

from rulecheck.values.record import Record, replace


class Path(Record):
    """A name of a field, link, parameter or bound word: `device.kind`, `derate.blocking`."""

    at: int
    words: tuple[str, ...]

    @property
    def dotted(self) -> str:
        return ".".join(self.words)


class QuantityOf(Record):
    at: int
    written: str


class Text(Record):
    at: int
    text: str


class Truth(Record):
    at: int
    truth: bool


class Arithmetic(Record):
    at: int
    sign: str
    left: "Node"
    right: "Node"


class Opposite(Record):
    at: int
    operand: "Node"


class Compared(Record):
    at: int
    sign: str
    left: "Node"
    right: "Node"


class Member(Record):
    """`kind in ["igbt", "mosfet"]` or `"IV" in needs`."""

    at: int
    item: "Node"
    listed: tuple[str, ...] | None
    held: Path | None


class Matched(Record):
    at: int
    item: "Node"
    pattern: str


class Negated(Record):
    at: int
    operand: "Node"


class Joined(Record):
    """`and`, `or`, `implies`."""

    at: int
    word: str
    left: "Node"
    right: "Node"


class Quantified(Record):
    """`every` or `some` WORD among a link has a condition."""

    at: int
    word: str
    name: str
    among: Path
    condition: "Node"


class Gathered(Record):
    """`count`, `sum`, `min`, `max` over a link; `count` gathers no value."""

    at: int
    word: str
    value: "Node | None"
    name: str
    among: Path
    where: "Node | None"


class LookedUp(Record):
    """The smallest entry of a parameter's table for the words of a field."""

    at: int
    parameter: Path
    words: Path


class SourceOf(Record):
    """The source of a parameter's value, or of its row for the words of a field."""

    at: int
    parameter: Path
    words: Path | None = None


class Call(Record):
    at: int
    function: str
    arguments: "tuple[Node, ...]"


Node = (
    Path
    | QuantityOf
    | Text
    | Truth
    | Arithmetic
    | Opposite
    | Compared
    | Member
    | Matched
    | Negated
    | Joined
    | Quantified
    | Gathered
    | LookedUp
    | SourceOf
    | Call
)


class Flaw(Record):
    """What is wrong with a condition, where in its text, and what to do."""

    at: int
    what: str
    remedy: str


def inner_nodes(node: Node) -> tuple[Node, ...]:
    """The nodes directly below."""
    found: list[Node] = []
    for name in node.__struct_fields__:
        value = getattr(node, name)
        items = value if isinstance(value, tuple) else (value,)
        found += [item for item in items if isinstance(item, Node)]
    return tuple(found)


def rewritten(node: Node, change: Callable[[Node], Node]) -> Node:
    """The tree with `change` applied to every node, from the leaves up."""
    changes: dict[str, Any] = {}
    for name in node.__struct_fields__:
        value = getattr(node, name)
        if isinstance(value, Node):
            changes[name] = rewritten(value, change)
        elif isinstance(value, tuple) and any(isinstance(item, Node) for item in value):
            changes[name] = tuple(rewritten(item, change) for item in value)
    return change(replace(node, **changes) if changes else node)
