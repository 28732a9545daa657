"""What the names in a condition stand for, and what a bound condition is run on."""

from collections.abc import Callable, Mapping
from typing import Any

from rulecheck.facts import VOCABULARY, Facts, FieldTerm, Form, LinkTerm, Subject
from rulecheck.rulebook.tree import Flaw
from rulecheck.rulebook.units import OF_DIMENSION, PLAIN, Unit
from rulecheck.values import Dimension, Span
from rulecheck.values.record import Mutable, Record, field, replace

NAME_FIELD = FieldTerm("name", Form.TEXT, "Its name.")
OWN = ""
"""The word under which the rule's own subject is known: none."""


OTHER = "other"
"""The row of a parameter that stands for every word without a row of its own."""


class Row(Record):
    value: float
    source: str


class Parameter(Record):
    """A number that packs set, or a table of numbers by word; each row has its own source."""

    name: str
    rows: Mapping[str, Row]
    """With a row `other`, unless it is to be laid over the rows of an earlier pack."""
    dimension: Dimension
    meaning: str
    span: Span

    @property
    def plain(self) -> bool:
        """One number for all words."""
        return set(self.rows) == {OTHER}

    def row_for(self, words: tuple[str, ...]) -> Row:
        """The smallest row over the words, the first by word where two are equal."""
        rows = [self.rows.get(word, self.rows[OTHER]) for word in sorted(words)]
        return min(rows, key=lambda row: row.value, default=self.rows[OTHER])


class TooManyStepsError(Exception):
    """Raised where a rule has bound more subjects to its words than it may on one netlist."""


class Steps(Mutable):
    """How many subjects one rule may still bind: quantifiers within each other multiply."""

    left: int

    def take(self) -> None:
        self.left -= 1
        if self.left < 0:
            raise TooManyStepsError


class Scene(Record):
    """The facts and the subjects that the bound words stand for at the moment."""

    facts: Facts
    subjects: Mapping[str, Subject]
    steps: Steps | None = None

    def with_subject(self, name: str, subject: Subject) -> "Scene":
        if self.steps is not None:
            self.steps.take()
        return Scene(self.facts, {**self.subjects, name: subject}, self.steps)


class Bound(Record):
    """A checked expression: its form, its unit, and how to compute it."""

    form: Form
    run: Callable[[Scene], Any]
    unit: Unit = PLAIN


class Scope(Record):
    """The kinds of the bound words, the parameters in force, and the flaws found so far."""

    kinds: Mapping[str, str]
    parameters: Mapping[str, Parameter]
    flaws: list[Flaw] = field(default_factory=list)

    def fail(self, at: int, what: str, remedy: str) -> None:
        self.flaws.append(Flaw(at, what, remedy))

    def inside(self, name: str, kind: str) -> "Scope":
        return replace(self, kinds={**self.kinds, name: kind})

    def split(self, words: tuple[str, ...]) -> tuple[str, str]:
        """The bound word that a path starts with (or the rule's own subject), and the rest."""
        if len(words) > 1 and words[0] in self.kinds:
            return words[0], ".".join(words[1:])
        return OWN, ".".join(words)

    def field(self, words: tuple[str, ...]) -> tuple[str, FieldTerm] | None:
        owner, name = self.split(words)
        term = NAME_FIELD if name == "name" else VOCABULARY[self.kinds[owner]].field(name)
        return None if term is None else (owner, term)

    def link(self, words: tuple[str, ...]) -> tuple[str, LinkTerm] | None:
        owner, name = self.split(words)
        term = VOCABULARY[self.kinds[owner]].link(name)
        return None if term is None else (owner, term)

    def known_names(self) -> tuple[str, ...]:
        """Everything that a path may say here, for suggestions."""
        names = ["name", *self.parameters]
        for word, kind in self.kinds.items():
            term = VOCABULARY[kind]
            lead = f"{word}." if word else ""
            names += [lead + item.name for item in term.fields]
            names += [lead + item.name for item in term.links]
        return tuple(names)


def unit_of(dimension: Dimension) -> Unit:
    return OF_DIMENSION[dimension]
