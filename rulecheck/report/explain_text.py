"""An explanation as indented text, wrapped to the width at hand."""

import textwrap
from typing import TextIO

from rulecheck.report.cautions import CAUTIONS
from rulecheck.report.explanation import Entry, Explanation
from rulecheck.report.look import PLAIN, Look
from rulecheck.report.one_line import one_line, visible

_MARGIN = 2
_STEP = 2
_WIDEST_LABEL = 24


def render(explanation: Explanation, stream: TextIO, look: Look = PLAIN) -> None:
    """Write the title, one aligned entry a line, and the cautions."""
    stream.write(visible(explanation.title, look) + "\n")
    column = _text_column(explanation.entries)
    for entry in explanation.entries:
        for line in _entry_lines(entry, column, look):
            stream.write(line + "\n")
    if not look.quiet:
        stream.write("\n" + textwrap.fill(" ".join(CAUTIONS), look.width) + "\n")


def _text_column(entries: tuple[Entry, ...]) -> int:
    ends = [_MARGIN + _STEP * entry.depth + len(entry.label) for entry in entries]
    return min(max(ends, default=0), _WIDEST_LABEL) + 2


def _entry_lines(entry: Entry, column: int, look: Look) -> list[str]:
    lead = " " * (_MARGIN + _STEP * entry.depth) + one_line(entry.label, look)
    lead = f"{lead:<{column}}" if len(lead) < column else f"{lead}  "
    return textwrap.wrap(
        one_line(entry.text, look),
        max(look.width, column + 20),
        initial_indent=lead,
        subsequent_indent=" " * column,
        break_on_hyphens=False,
    ) or [lead.rstrip()]
