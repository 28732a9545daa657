"""A manual page in plain text: what a word is, a table of labels and texts, and examples."""

import textwrap
from collections.abc import Iterator, Sequence
from typing import TextIO

from rulecheck.report.look import PLAIN, Look
from rulecheck.report.one_line import visible
from rulecheck.values.record import Record

_MARGIN = "  "
_BLOCK = "      "
_WIDEST = 100
"""Columns; a longer line of prose is hard to read."""


class Block(Record):
    """Lines that keep their line ends, under a heading."""

    heading: str
    lines: tuple[str, ...]


class ManualPage(Record):
    word: str
    about: str
    """What sort of word it is: `fact of a position, in V`."""
    rows: tuple[tuple[str, str], ...] = ()
    """Label and text; a text without a label is the sentence that says what the word means."""
    blocks: tuple[Block, ...] = ()


def render(pages: Sequence[ManualPage], stream: TextIO, look: Look = PLAIN) -> None:
    """Write the pages one under the other, wrapped to the width."""
    for number, page in enumerate(pages):
        stream.write("\n" if number else "")
        for line in _lines(page, min(look.width, _WIDEST)):
            stream.write(visible(line, look).rstrip() + "\n")


def _lines(page: ManualPage, width: int) -> Iterator[str]:
    yield from _wrapped(f"{page.word}  ({page.about})", "", "    ", width)
    labels = max((len(label) for label, _ in page.rows if label), default=0)
    for label, text in page.rows:
        lead = f"{_MARGIN}{label:<{labels}}  " if label else _MARGIN
        yield from _wrapped(text, lead, " " * len(lead), width)
    for block in page.blocks:
        yield from _wrapped(block.heading, _MARGIN, _BLOCK, width) if block.heading else ()
        yield from (f"{_BLOCK}{line}" for line in block.lines)


def _wrapped(text: str, lead: str, indent: str, width: int) -> list[str]:
    words = " ".join(text.split())
    return textwrap.wrap(
        words, width, initial_indent=lead, subsequent_indent=indent,
        break_long_words=False, break_on_hyphens=False,
    ) or [lead]  # fmt: skip
