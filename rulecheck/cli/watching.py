"""`--watch`: run the command again whenever a file that it depends on has changed.

The files are looked at twice a second, which works on every disk and needs no library.
"""

import os
import sys
import time
from collections.abc import Callable, Iterable, Mapping
from pathlib import Path

from rulecheck.cli.analysing import Answer
from rulecheck.cli.project import PROJECT_NAME, find_project
from rulecheck.cli.request import Request
from rulecheck.pipeline import SHEET_SUFFIX

_PAUSE = 0.5
_SETTLED = 0.05
"""Seconds: between two looks, and for an editor to finish writing."""
_CLEAR = "\x1b[2J\x1b[3J\x1b[H"

Snapshot = Mapping[str, tuple[int, int, int] | None]
"""By file: when it was written, its size and its number on the disk; None where there is none."""


def watch(request: Request, answer_to: Callable[[Request], Answer]) -> int:
    """Answer, wait for a change, answer again; Ctrl-C ends it with the last answer's status."""
    answer = Answer(0)
    try:
        while True:
            _clear_terminal()
            before = _snapshot(_files(request, answer.inputs))
            fresh = answer_to(request)
            # a run that failed early has not read all of what the one before did
            answer = fresh if fresh.inputs else Answer(fresh.status, answer.inputs)
            after = _snapshot(_files(request, answer.inputs))
            _tell(sum(state is not None for state in after.values()))
            # what changed while it was being read counts as a change
            _wait({f: before.get(f, state) for f, state in after.items()}, request, answer.inputs)
    except KeyboardInterrupt:
        sys.stderr.write("\n")
        return answer.status


def _clear_terminal() -> None:
    if sys.stdout.isatty() and os.environ.get("TERM") != "dumb":
        sys.stdout.write(_CLEAR)


def _tell(count: int) -> None:
    sys.stdout.flush()
    noun = "file" if count == 1 else "files"
    print(f"rulecheck: watching {count} {noun}; Ctrl-C ends it", file=sys.stderr, flush=True)


def _wait(before: Snapshot, request: Request, inputs: tuple[str, ...]) -> None:
    while _snapshot(_files(request, inputs)) == before:
        time.sleep(_PAUSE)
    time.sleep(_SETTLED)


def _files(request: Request, inputs: Iterable[str]) -> tuple[str, ...]:
    """What was read, what is named, and what would be read if it were there."""
    project = find_project(request.project)
    netlists = [Path(name) for name in request.names] or list(project.netlists)
    sheets = [netlist.parent / (netlist.stem + SHEET_SUFFIX) for netlist in netlists]
    named = (*request.parts, *request.rules, *(name for name in (request.stage,) if name))
    files = (*inputs, *map(str, netlists), *map(str, sheets), *named, *project.packs)
    return tuple(sorted({*files, request.project or PROJECT_NAME}))


def _snapshot(files: Iterable[str]) -> Snapshot:
    return {file: _state(file) for file in files}


def _state(file: str) -> tuple[int, int, int] | None:
    try:
        found = os.stat(file)
    except OSError:
        return None
    return found.st_mtime_ns, found.st_size, found.st_ino
