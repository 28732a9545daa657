"""The answer to "why?": a title and entries, each a label, a text and a depth."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Entry:
    """One line of an explanation; a deeper one supports the one above it."""

    label: str
    text: str
    depth: int = 0


@dataclass(frozen=True, slots=True)
class Explanation:
    title: str
    entries: tuple[Entry, ...]
