"""The README's commands run as printed, and its YAML is what the program accepts."""

import os
import re
import shlex

import pytest
import yaml

from rulecheck.cli.project import read_project
from rulecheck.parts import read_part_data
from rulecheck.reading import SourceText
from rulecheck.rulebook import load_packs
from rulecheck.stage import read_sheet
from tests.command.running import ROOT, run

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


def test_two_commands_serve_a_fresh_machine():
    assert len(FRESH) == 2
    assert "rulecheck demo" in FRESH[0]
    assert FRESH[1].endswith("pytest -n auto")


def test_every_printed_command_ends_as_it_says(hut):
    commands = demo_commands()
    assert len(commands) > 8
    for command, status in commands:
        program, *arguments = shlex.split(command)
        done = run(*arguments, folder=hut)
        assert (program, command, done.returncode, done.stderr) == (
            "rulecheck", command, status, "",
        )  # fmt: skip


READERS = {
    "ports": read_sheet,
    "parts": lambda source: read_part_data([source]),
    "pack": lambda source: load_packs([source]),
    "netlists": read_project,
}


@pytest.mark.parametrize("text", blocks("yaml"))
def test_the_printed_yaml_is_accepted(text, hut):
    source = SourceText(str(hut / "printed.yaml"), text)
    read = READERS[next(iter(yaml.safe_load(text)))]
    assert read(source).problems == ()


def test_the_printed_pack_passes_its_own_examples(hut):
    (pack,) = (text for text in blocks("yaml") if text.startswith("pack:"))
    (hut / "printed.rules.yaml").write_text(pack, encoding="utf-8")
    assert run("rules", "--try", "printed.rules.yaml", folder=hut).returncode == 0


def console_blocks(text: str) -> list[tuple[str, str]]:
    """Each printed command with the output printed under it."""
    found = re.findall(r"```console\n\$ rulecheck (.*?)\n(.*?)```", text, re.DOTALL)
    return [(str(command), str(output)) for command, output in found]


def test_the_printed_output_is_what_the_commands_print(hut):
    """`RULECHECK_REGENERATE=1` rewrites the README's blocks; read what changed, then commit."""
    text = README
    for command, printed in console_blocks(README):
        shown = run(*command.split(), folder=hut).stdout
        text = text.replace(
            f"$ rulecheck {command}\n{printed}```", f"$ rulecheck {command}\n{shown}```"
        )
    if os.environ.get("RULECHECK_REGENERATE"):
        (ROOT / "README.md").write_text(text, encoding="utf-8")
        return
    assert console_blocks(README)
    assert without_counts(text) == without_counts(README)


def without_counts(text: str) -> str:
    """How many checks hold grows with every rule that is added."""
    return re.sub(r"\d+ hold", "N hold", text)
