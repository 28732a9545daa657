"""Where something stands in a file."""

from rulecheck.values.record import Record


class Span(Record, order=True):
    """A place in a file; line and column start at 1."""

    file: str
    line: int
    column: int = 1

    def __str__(self) -> str:
        return f"{self.file}:{self.line}:{self.column}"
