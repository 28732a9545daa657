"""The rulebook: all rules in force with their parameters, and what packs changed."""

from collections.abc import Mapping

from rulecheck.rulebook.scope import Bound, Parameter
from rulecheck.rulebook.tree import Node
from rulecheck.values import Problem, Span
from rulecheck.values.record import Record, field


class Example(Record):
    """A small stage as text, and the verdict that the rule must give on it."""

    netlist: str
    sheet: str | None
    parts: str | None
    expect: str
    of: str | None
    shows: str
    span: Span


class Piece(Record):
    """A stretch of a message: plain words, or an expression to be written out."""

    words: str
    expression: Node | None = None
    at: int = 0


class Rule(Record):
    """A rule as its pack states it, after later packs have had their say."""

    id: str
    subject: str
    level: str
    applies: Node | None
    requires: Node
    graver_when: Node | None
    graver_level: str
    message: tuple[Piece, ...]
    values: Mapping[str, Node]
    why: str
    remedy: str
    source: str
    parameters: Mapping[str, Parameter]
    examples: tuple[Example, ...]
    pack: str
    span: Span
    texts: Mapping[str, str] = field(default_factory=dict)
    """By key (`applies`, `requires`, `message`, `values.NAME`): as written."""
    places: Mapping[str, Span] = field(default_factory=dict)
    """By the same key: where the text starts."""


class ReadyRule(Record):
    """A rule bound to the vocabulary and to its parameters' values."""

    rule: Rule
    applies: Bound | None
    requires: Bound
    graver_when: Bound | None
    message: tuple[tuple[str, Bound | None], ...]
    values: Mapping[str, Bound]


class SwitchedOff(Record):
    """A rule that a pack switched off, and why."""

    rule: str
    reason: str
    pack: str
    span: Span


class PackInForce(Record):
    """Which text of a pack was read: what a review names, so that it can be repeated."""

    name: str
    version: str
    file: str
    digest: str
    """SHA-256 of the text, hexadecimal."""


class Rulebook(Record):
    """What `judge` works with; with errors among the problems it must not be used."""

    rules: tuple[Rule, ...]
    ready: tuple[ReadyRule, ...]
    parameters: Mapping[str, Parameter]
    switched_off: tuple[SwitchedOff, ...]
    changes: tuple[str, ...]
    """Levels and parameters that a later pack changed, one sentence each."""
    problems: tuple[Problem, ...]
    packs: tuple[PackInForce, ...] = ()
    """In the order in which they were laid on each other."""
