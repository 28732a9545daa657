"""The README's commands run as printed, and its YAML is what the program accepts."""

import re
import shlex
import subprocess
import sys
from pathlib import Path

import pytest
import yaml

from rulecheck.parts import read_part_data
from rulecheck.reading import SourceText
from rulecheck.stage import read_sheet
from tests.command.running import ROOT, clean_environment

README = (ROOT / "README.md").read_text(encoding="utf-8")
FRESH = [line for line in README.splitlines() if line.startswith("python3 -m venv .venv && ")]
_EXITS = re.compile(r"(.*?)\s+# exits (\d)\Z")


def blocks(language: str) -> list[str]:
    return re.findall(rf"```{language}\n(.*?)```", README, re.DOTALL)


def demo_commands() -> list[tuple[str, int]]:
    """Each line to be run in the demo's folder, with the exit status that it promises."""
    lines = [line for block in blocks("sh") for line in block.splitlines() if line not in FRESH]
    matches = [(line, _EXITS.match(line)) for line in lines]
    return [(m[1], int(m[2])) if m else (line, 0) for line, m in matches]


@pytest.fixture(scope="module")
def path_with_command(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A folder whose `rulecheck` is this checkout's."""
    folder = tmp_path_factory.mktemp("bin")
    script = folder / "rulecheck"
    script.write_text(f'#!/bin/sh\nexec {shlex.quote(sys.executable)} -m rulecheck "$@"\n')
    script.chmod(0o755)
    return folder


def test_two_commands_serve_a_fresh_machine():
    assert len(FRESH) == 2
    assert "rulecheck demo" in FRESH[0]
    assert FRESH[1].endswith("pytest -n auto")


def test_every_printed_command_ends_as_it_says(hut, path_with_command):
    environment = clean_environment()
    environment["PATH"] = f"{path_with_command}:{environment['PATH']}"
    commands = demo_commands()
    assert len(commands) > 8
    for command, status in commands:
        done = subprocess.run(
            ["sh", "-c", command], cwd=hut, env=environment, capture_output=True, text=True,
            check=False,
        )  # fmt: skip
        assert (command, done.returncode, done.stderr) == (command, status, "")


@pytest.mark.parametrize("text", blocks("yaml"))
def test_the_printed_yaml_is_accepted(text):
    source = SourceText("printed.yaml", text)
    first = next(iter(yaml.safe_load(text)))
    read = {"ports": read_sheet, "parts": lambda source: read_part_data([source])}[first]
    assert read(source).problems == ()
