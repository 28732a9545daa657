"""Lists under a heading, and the cautions, on a terminal."""

from rich.console import Console
from rich.text import Text

from rulecheck.report.cautions import CAUTIONS
from rulecheck.report.look import Look
from rulecheck.report.styles import hanging


def print_sections(
    console: Console, sections: tuple[tuple[str, tuple[str, ...]], ...], look: Look
) -> None:
    """Print each heading with its lines as a list; an empty section is left out."""
    for heading, lines in sections:
        if not lines:
            continue
        console.print()
        console.print(Text(heading, style="heading"))
        for line in lines:
            hanging(console, "  - ", line, look)


def print_cautions(console: Console, look: Look) -> None:
    console.print()
    hanging(console, "", " ".join(CAUTIONS), look)
