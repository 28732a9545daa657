"""Run the command as a user does: in this process, which is quick, or in one of its own."""

import contextlib
import io
import json
import os
import subprocess
import sys
import tempfile
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from unittest import mock

from rulecheck.cli import main

ROOT = Path(__file__).resolve().parents[2]
PLAIN = {"COLUMNS": "100"}
UNSET = ("NO_COLOR", "RULECHECK_TRACEBACK", "PYTHONDONTWRITEBYTECODE")
COMPILED = Path(tempfile.gettempdir()) / f"rulecheck-tests-{os.getuid()}"
"""Compiled modules of the processes apart: they start several times faster."""

_SEVERAL = """
import json, sys
from rulecheck.cli import main
for command in json.loads(sys.argv[1]):
    print(command, main(command))
"""


@dataclass(frozen=True)
class Done:
    returncode: int
    stdout: str
    stderr: str


def run(*arguments: object, folder: Path, environment: Mapping[str, str] | None = None) -> Done:
    """`rulecheck ARGUMENTS` in that folder, into a pipe, at 100 columns."""
    out, err = (io.TextIOWrapper(io.BytesIO(), encoding="utf-8", newline="") for _ in range(2))
    with (
        _in_folder(folder),
        _environment(environment or {}),
        contextlib.redirect_stdout(out),
        contextlib.redirect_stderr(err),
    ):
        status = _status([str(argument) for argument in arguments])
    return Done(status, _written(out), _written(err))


def _status(arguments: list[str]) -> int:
    try:
        return main(arguments)
    except SystemExit as stop:
        return int(stop.code or 0)


def run_all_apart(commands: Sequence[Sequence[str]], folder: Path, seed: str) -> str:
    """What the commands print, one after the other, in a process with that hash seed."""
    done = subprocess.run(
        [sys.executable, "-c", _SEVERAL, json.dumps(commands)],
        cwd=folder,
        env=clean_environment() | {"PYTHONHASHSEED": seed},
        capture_output=True,
        encoding="utf-8",
        check=True,
    )
    return done.stdout


def clean_environment() -> dict[str, str]:
    kept = {name: value for name, value in os.environ.items() if name not in UNSET}
    own = {"PYTHONPATH": str(ROOT), "PYTHONUTF8": "1", "PYTHONPYCACHEPREFIX": str(COMPILED)}
    return kept | PLAIN | own


def _written(stream: io.TextIOWrapper) -> str:
    stream.flush()
    assert isinstance(stream.buffer, io.BytesIO)
    return stream.buffer.getvalue().decode("utf-8")


@contextlib.contextmanager
def _in_folder(folder: Path) -> Iterator[None]:
    before = Path.cwd()
    os.chdir(folder)
    try:
        yield
    finally:
        os.chdir(before)


@contextlib.contextmanager
def _environment(changes: Mapping[str, str]) -> Iterator[None]:
    kept = {name: value for name, value in os.environ.items() if name not in UNSET}
    with mock.patch.dict(os.environ, kept | PLAIN | dict(changes), clear=True):
        yield
