"""Words set for Markdown: nothing that a file says can become markup or another table cell."""

import re

from rulecheck.report.look import PLAIN
from rulecheck.report.one_line import one_line

_SPECIAL = re.compile(r"([\\`*_\[\]<>|~&]|^[#+-])")


def escaped(text: str) -> str:
    """Every sign that Markdown could read as markup, with a backslash before it; one line."""
    return _SPECIAL.sub(r"\\\1", one_line(text, PLAIN))


def row(*cells: str) -> str:
    return f"| {' | '.join(cells)} |\n"


def heading_rule(columns: int) -> str:
    return row(*["---"] * columns)


def bullets(lines: tuple[str, ...]) -> str:
    return "".join(f"- {escaped(line)}\n" for line in lines)
