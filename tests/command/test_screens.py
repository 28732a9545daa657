"""What people see on a terminal: 80 and 120 columns, with and without Unicode, and in colour.

`RULECHECK_REGENERATE=1` rewrites the files in `screens`; read what changed, then commit. How many
checks hold is left out: it grows with every rule.
"""

import os
import re
from pathlib import Path

import pytest

from tests.command.running import run

SCREENS = Path(__file__).parent / "screens"
COMMANDS = {
    "quadrants": ["quadrants", "transfer-switch-faulty.cir", "--quiet"],
    "lint": ["lint", "pump-inverter-faulty.cir", "--quiet", "--format", "table"],
    "explain": ["explain", "battery-bus-faulty.cir", "Q1", "--quiet"],
    "rule": ["help", "reverse-current-path"],
}
LOOKS = {
    "unicode": [],
    "ascii": ["--ascii"],
    "colour": ["--color", "always"],
    "ascii-colour": ["--ascii", "--color", "always"],
}
COLOURED = ("quadrants", "lint")
_ESCAPE = re.compile(r"\x1b\[[0-9;]*m")


@pytest.mark.parametrize("name", COMMANDS)
def test_a_terminal_shows_what_it_should(name, written_demo):
    for width in (80, 120):
        for look, options in looks_of(name).items():
            done = run(
                *COMMANDS[name], *options,
                folder=written_demo, environment={"COLUMNS": str(width)},
            )  # fmt: skip
            text = re.sub(r"\d+ hold", "N hold", done.stdout)
            compare(SCREENS / f"{name}-{width}-{look}.txt", text)
            plain = _ESCAPE.sub("", text)
            assert max(map(len, plain.splitlines())) <= width
            assert plain.isascii() or "ascii" not in look
            assert (plain != text) is ("colour" in look)


def looks_of(name):
    return {k: v for k, v in LOOKS.items() if name in COLOURED or "colour" not in k}


def compare(file, text):
    if os.environ.get("RULECHECK_REGENERATE"):
        file.parent.mkdir(exist_ok=True)
        file.write_text(text, encoding="utf-8")
    assert text == file.read_text(encoding="utf-8")
