"""How a report may look on the stream at hand."""

import os
import shutil
from typing import TextIO

from rulecheck.cli.request import Request
from rulecheck.report.look import Look

_NARROWEST = 60
_UNBOUNDED = 100
_SIGNS = "▝▘▖▗▐▌▀▄█▞▚▛▜▙▟─…±→"
"""What the tables are drawn with."""


def look_for(stream: TextIO, request: Request) -> Look:
    """Width from the terminal or COLUMNS; colour and signs as asked and as the stream can."""
    return Look(
        max(shutil.get_terminal_size((_UNBOUNDED, 24)).columns, _NARROWEST),
        request.ascii or not can_draw(stream),
        _colored(stream, request.color),
        request.quiet,
    )


def _colored(stream: TextIO, asked: str) -> bool:
    if asked != "auto":
        return asked == "always"
    silent = os.environ.get("NO_COLOR") or os.environ.get("TERM") == "dumb"
    return stream.isatty() and not silent


def can_draw(stream: TextIO) -> bool:
    """Whether the stream takes the signs of the tables and a terminal behind it shows them."""
    if stream.isatty() and os.environ.get("TERM") == "dumb":
        return False
    try:
        _SIGNS.encode(stream.encoding or "ascii")
    except (UnicodeEncodeError, LookupError):
        return False
    return True
