"""The terms of the vocabulary: subject kinds, their fields and their links.

number("blocks-forward", V, "Voltage that it withstands from start to end.")
"""

from enum import StrEnum

from rulecheck.values import Dimension
from rulecheck.values.record import Record


class Form(StrEnum):
    """What a field's value is."""

    NUMBER = "number"
    RANGE = "range"
    TEXT = "text"
    TEXTS = "texts"
    YES_NO = "yes-no"


class FieldTerm(Record):
    name: str
    form: Form
    sentence: str
    dimension: Dimension = Dimension.NUMBER

    @property
    def unit(self) -> str:
        """What the listing prints: the unit, or the form where there is none."""
        if self.form not in (Form.NUMBER, Form.RANGE):
            return self.form.value
        unit = self.dimension.value or "1"
        return f"{unit}, range" if self.form is Form.RANGE else unit


class LinkTerm(Record):
    name: str
    to: str
    """The kind of the linked subjects."""
    sentence: str


class SubjectTerm(Record):
    name: str
    sentence: str
    fields: tuple[FieldTerm, ...]
    links: tuple[LinkTerm, ...] = ()

    def field(self, name: str) -> FieldTerm | None:
        return next((term for term in self.fields if term.name == name), None)

    def link(self, name: str) -> LinkTerm | None:
        return next((term for term in self.links if term.name == name), None)


def number(name: str, dimension: Dimension, sentence: str) -> FieldTerm:
    return FieldTerm(name, Form.NUMBER, sentence, dimension)


def count(name: str, sentence: str) -> FieldTerm:
    return FieldTerm(name, Form.NUMBER, sentence)


def span_of(name: str, dimension: Dimension, sentence: str) -> FieldTerm:
    return FieldTerm(name, Form.RANGE, sentence, dimension)


def text(name: str, sentence: str) -> FieldTerm:
    return FieldTerm(name, Form.TEXT, sentence)


def texts(name: str, sentence: str) -> FieldTerm:
    return FieldTerm(name, Form.TEXTS, sentence)


def yes_no(name: str, sentence: str) -> FieldTerm:
    return FieldTerm(name, Form.YES_NO, sentence)


def link(name: str, to: str, sentence: str) -> LinkTerm:
    return LinkTerm(name, to, sentence)
