"""The named styles of the terminal, and the console that draws with them."""

from typing import TextIO

from rich.console import Console
from rich.text import Text
from rich.theme import Theme

from rulecheck.report.look import Look

STYLES = {
    "quadrant.missing": "bold red",
    "level.error": "bold red",
    "level.warning": "yellow",
    "level.note": "cyan",
    "verdict.undecided": "magenta",
    "verdict.excused": "dim",
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


def shown(text: str, look: Look) -> str:
    """The text with control signs made visible, and in seven-bit signs where asked."""
    clean = "".join(sign if sign.isprintable() or sign == "\n" else _visible(sign) for sign in text)
    return clean if not look.ascii else _seven_bit(clean)


def hanging(console: Console, lead: str, text: str, look: Look) -> None:
    """Print `lead` and then `text`, later lines indented under the first word of the text."""
    words = Text(shown(text, look))
    room = max(look.width - len(lead), 20)
    for number, line in enumerate(words.wrap(console, room)):
        line.rstrip()
        console.print(Text(lead if number == 0 else " " * len(lead)).append_text(line))


def _visible(sign: str) -> str:
    return f"\\x{ord(sign):02x}"


_SUBSTITUTES = str.maketrans({"…": "..", "±": "+-", "→": "->", "µ": "u", "Ω": "ohm", "·": "-"})


def _seven_bit(text: str) -> str:
    return text.translate(_SUBSTITUTES).encode("ascii", "backslashreplace").decode("ascii")
