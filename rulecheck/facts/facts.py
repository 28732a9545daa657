"""The product of this step: every subject a rule may judge, with its fields and links."""

from collections.abc import Iterator, Mapping

from rulecheck.values import Interval, Span, Unknown
from rulecheck.values.record import Record, field


class Bounds(Record):
    """A number known only within bounds until what is missing is supplied."""

    range: Interval
    missing: tuple[Unknown, ...]


Value = float | Interval | Bounds | bool | str | tuple[str, ...] | Unknown
"""A field's value: a number, a range, a number within bounds, a truth, words, or not known.

An Interval is a quantity that truly takes all its values; a Bounds or an Unknown is one number,
truth or word that nobody stated.
"""


class Subject(Record):
    """One thing that rules judge; its fields and links are those of its kind's vocabulary."""

    kind: str
    name: str
    values: Mapping[str, Value]
    links: Mapping[str, tuple[str, ...] | Unknown]
    """By link: names of subjects of the kind that the vocabulary says; Unknown: not known."""
    parts: tuple[str, ...]
    nets: tuple[str, ...]
    span: Span
    related: tuple[Span, ...] = ()
    """The places of the other parts, for a report."""


class Facts(Record):
    """All subjects of a stage, by kind in the order of the vocabulary, each kind by name."""

    netlist: str
    subjects: Mapping[str, tuple[Subject, ...]]
    by_name: Mapping[tuple[str, str], Subject] = field(default_factory=dict)

    def of_kind(self, kind: str) -> tuple[Subject, ...]:
        return self.subjects.get(kind, ())

    def __iter__(self) -> Iterator[Subject]:
        for subjects in self.subjects.values():
            yield from subjects
