"""A condition as a tree of plain records; `at` is the place of each in its text, from 0."""

from collections.abc import Callable
from dataclasses import dataclass, fields, replace
from typing import Any


@dataclass(frozen=True, slots=True)
class Path:
    """A name of a field, link, parameter or bound word: `device.kind`, `derate.blocking`."""

    at: int
    words: tuple[str, ...]

    @property
    def dotted(self) -> str:
        return ".".join(self.words)


@dataclass(frozen=True, slots=True)
class QuantityOf:
    at: int
    written: str


@dataclass(frozen=True, slots=True)
class Text:
    at: int
    text: str


@dataclass(frozen=True, slots=True)
class Truth:
    at: int
    truth: bool


@dataclass(frozen=True, slots=True)
class Arithmetic:
    at: int
    sign: str
    left: "Node"
    right: "Node"


@dataclass(frozen=True, slots=True)
class Opposite:
    at: int
    operand: "Node"


@dataclass(frozen=True, slots=True)
class Compared:
    at: int
    sign: str
    left: "Node"
    right: "Node"


@dataclass(frozen=True, slots=True)
class Member:
    """`kind in ["igbt", "mosfet"]` or `"IV" in needs`."""

    at: int
    item: "Node"
    listed: tuple[str, ...] | None
    held: Path | None


@dataclass(frozen=True, slots=True)
class Matched:
    at: int
    item: "Node"
    pattern: str


@dataclass(frozen=True, slots=True)
class Negated:
    at: int
    operand: "Node"


@dataclass(frozen=True, slots=True)
class Joined:
    """`and`, `or`, `implies`."""

    at: int
    word: str
    left: "Node"
    right: "Node"


@dataclass(frozen=True, slots=True)
class Quantified:
    """`every` or `some` WORD among a link has a condition."""

    at: int
    word: str
    name: str
    among: Path
    condition: "Node"


@dataclass(frozen=True, slots=True)
class Gathered:
    """`count`, `sum`, `min`, `max` over a link; `count` gathers no value."""

    at: int
    word: str
    value: "Node | None"
    name: str
    among: Path
    where: "Node | None"


@dataclass(frozen=True, slots=True)
class LookedUp:
    """The smallest entry of a parameter's table for the words of a field."""

    at: int
    parameter: Path
    words: Path


@dataclass(frozen=True, slots=True)
class SourceOf:
    """The source of a parameter's value, or of its row for the words of a field."""

    at: int
    parameter: Path
    words: Path | None = None


@dataclass(frozen=True, slots=True)
class Call:
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


@dataclass(frozen=True, slots=True)
class Flaw:
    """What is wrong with a condition, where in its text, and what to do."""

    at: int
    what: str
    remedy: str


def inner_nodes(node: Node) -> tuple[Node, ...]:
    """The nodes directly below."""
    found: list[Node] = []
    for term in fields(node):
        value = getattr(node, term.name)
        items = value if isinstance(value, tuple) else (value,)
        found += [item for item in items if isinstance(item, Node)]
    return tuple(found)


def rewritten(node: Node, change: Callable[[Node], Node]) -> Node:
    """The tree with `change` applied to every node, from the leaves up."""
    changes: dict[str, Any] = {}
    for term in fields(node):
        value = getattr(node, term.name)
        if isinstance(value, Node):
            changes[term.name] = rewritten(value, change)
        elif isinstance(value, tuple) and any(isinstance(item, Node) for item in value):
            changes[term.name] = tuple(rewritten(item, change) for item in value)
    return change(replace(node, **changes) if changes else node)
