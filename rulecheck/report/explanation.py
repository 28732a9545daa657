"""The answer to "why?": a title and entries, each a label, a text and a depth."""

from rulecheck.values.record import Record


class Entry(Record):
    """One line of an explanation; a deeper one supports the one above it."""

    label: str
    text: str
    depth: int = 0


class Explanation(Record):
    title: str
    entries: tuple[Entry, ...]
