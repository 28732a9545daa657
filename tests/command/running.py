"""Run the command as a user does: in this process, which is quick, or in one of its own."""

import contextlib
import io
import os
import subprocess
import sys
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from pathlib import Path
from unittest import mock

from rulecheck.cli import main

ROOT = Path(__file__).resolve().parents[2]
PLAIN = {"COLUMNS": "100"}
UNSET = ("NO_COLOR", "RULECHECK_TRACEBACK")


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


def run_apart(
    *arguments: object, folder: Path, environment: Mapping[str, str] | None = None
) -> subprocess.CompletedProcess[str]:
    """The same in a process of its own."""
    return subprocess.run(
        [sys.executable, "-m", "rulecheck", *map(str, arguments)],
        cwd=folder,
        env=clean_environment() | dict(environment or {}),
        capture_output=True,
        encoding="utf-8",
        check=False,
    )


def clean_environment() -> dict[str, str]:
    kept = {name: value for name, value in os.environ.items() if name not in UNSET}
    return kept | PLAIN | {"PYTHONPATH": str(ROOT), "PYTHONUTF8": "1"}


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
