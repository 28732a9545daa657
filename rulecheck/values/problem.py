"""A mistake in the input, or a reading worth a remark, as a value."""

from enum import StrEnum

from rulecheck.values.record import Record
from rulecheck.values.span import Span


class Gravity(StrEnum):
    """An error means that the input could not be used as it stands; a note, that it was read."""

    ERROR = "error"
    NOTE = "note"


class Problem(Record):
    """One message about the input: where, what is wrong, and what to do about it."""

    span: Span
    gravity: Gravity
    what: str
    remedy: str = ""

    def line(self) -> str:
        """The message as one line in the GNU error format."""
        tail = f"; {self.remedy}" if self.remedy else ""
        return f"{self.span}: {self.gravity}: {self.what}{tail}"


def error(span: Span, what: str, remedy: str) -> Problem:
    return Problem(span, Gravity.ERROR, what, remedy)


def note(span: Span, what: str, remedy: str = "") -> Problem:
    return Problem(span, Gravity.NOTE, what, remedy)


def errors_of(problems: tuple[Problem, ...]) -> tuple[Problem, ...]:
    return tuple(p for p in problems if p.gravity is Gravity.ERROR)
