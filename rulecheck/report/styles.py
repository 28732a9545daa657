"""The named styles of the terminal, and the console that draws with them."""

from typing import TextIO

from rich.console import Console
from rich.text import Text
from rich.theme import Theme

from rulecheck.report.look import Look
from rulecheck.report.one_line import visible

STYLES = {
    "quadrant.missing": "bold red",
    "finding.error": "bold red",
    "finding.warning": "yellow",
    "finding.note": "cyan",
    "finding.recorded": "dim",
    "finding.excused": "dim",
    "heading": "bold",
    "place": "dim",
    "caution": "italic",
}


def console_for(stream: TextIO, look: Look) -> Console:
    """A console that writes exactly `look.width` columns, colours only where `look` says so."""
    return Console(
        file=stream,
        width=look.width,
        theme=Theme(STYLES),
        force_terminal=look.color,
        color_system="standard" if look.color else None,
        no_color=not look.color,
        highlight=False,
        markup=False,
        emoji=False,
        legacy_windows=False,
    )


def hanging(console: Console, lead: str, text: str, look: Look) -> None:
    """Print `lead` and then `text`, later lines indented under the first word of the text."""
    words = Text(visible(text.strip(), look))
    room = max(look.width - len(lead), 20)
    for number, line in enumerate(words.wrap(console, room)):
        line.rstrip()
        console.print(Text(lead if number == 0 else " " * len(lead)).append_text(line))
