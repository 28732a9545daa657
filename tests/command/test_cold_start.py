"""What each command loads: nothing that it does not use."""

import json
import subprocess
import sys

import pytest

from tests.command.running import clean_environment

HEAVY = {"lark", "yaml", "networkx", "rich", "numpy", "dataclasses"}
PROBE = """
import atexit, json, sys
def tell():
    print(json.dumps(sorted(sys.modules)), file=sys.stderr)
atexit.register(tell)
from rulecheck.cli import main
sys.exit(main(sys.argv[1:]))
"""


def loaded(*arguments, folder):
    done = subprocess.run(
        [sys.executable, "-c", PROBE, *arguments],
        cwd=folder,
        env=clean_environment(),
        capture_output=True,
        encoding="utf-8",
        check=False,
    )
    return set(json.loads(done.stderr.splitlines()[-1]))


@pytest.mark.parametrize("arguments", [["--version"], ["--help"], ["lint", "--help"], ["nothing"]])
def test_a_run_without_work_loads_no_library(arguments, tmp_path):
    assert loaded(*arguments, folder=tmp_path) & HEAVY == set()


@pytest.mark.parametrize("command", ["lint", "quadrants"])
def test_json_does_without_the_terminal_library(command, hut):
    modules = loaded(command, "battery-bus.cir", "--format", "json", folder=hut)
    assert "rich" not in modules
    assert "networkx" in modules


def test_the_table_loads_the_terminal_library(hut):
    assert "rich" in loaded("quadrants", "battery-bus.cir", folder=hut)
