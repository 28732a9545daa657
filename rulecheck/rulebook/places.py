"""Where a character of a YAML text stands in the file, so that a flaw points at it.

requires: >
  blocks-forward >=          the flaw is at character 18 of the condition
    asked + 3 A              -> the place of that blank-free character in the file
"""

import re

from rulecheck.reading import SourceText
from rulecheck.values import Span

_BLOCK = re.compile(r"[|>][-+0-9]*[ \t]*(?:#[^\n]*)?\n")


def place_in_text(source: SourceText, start: Span, text: str, at: int) -> Span:
    """The place of character `at` of `text`, whose scalar starts at `start` in the file.

    Blanks are where folding and indentation differ, so the other characters are counted.
    """
    offset = _offset(source.text, start)
    block = _BLOCK.match(source.text, offset)
    if block:
        offset = block.end()
    elif source.text[offset : offset + 1] in ("'", '"'):
        offset += 1
    seen = sum(not character.isspace() for character in text[:at])
    behind = at >= len(text.rstrip()) and seen > 0
    position = _skip(source.text, offset, seen - behind)
    if position is not None:
        position += behind
    return _span(source, position) if position is not None else start


def _offset(text: str, span: Span) -> int:
    offset = 0
    for _ in range(span.line - 1):
        offset = text.find("\n", offset) + 1
    return offset + span.column - 1


def _skip(text: str, offset: int, count: int) -> int | None:
    """Past `count` characters that are no blanks, and up to the next such one."""
    for position in range(offset, len(text)):
        if text[position].isspace():
            continue
        if count == 0:
            return position
        count -= 1
    return None


def _span(source: SourceText, position: int) -> Span:
    before = source.text[:position]
    return Span(source.file, before.count("\n") + 1, position - before.rfind("\n"))
