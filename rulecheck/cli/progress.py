"""Tell somebody who waits how far the work is: on a terminal, and only after a second.

The bar itself is in a module that is loaded when it is first shown, so that a quick run never
pays for it.
"""

import importlib
import os
import sys
import threading
from types import TracebackType
from typing import Protocol

from rulecheck.cli.request import Request

_PATIENCE = 1.0
"""Seconds without a sign that nobody minds."""
_BAR = "rulecheck.cli.progress_bar"


class Progress:
    """Takes word of each step and netlist, and keeps quiet about it."""

    def step(self, name: str) -> None:
        """A step of the analysis of one netlist begins."""

    def netlist_done(self) -> None:
        """One netlist is finished."""

    def __enter__(self) -> "Progress":
        return self

    def __exit__(
        self,
        kind: type[BaseException] | None,
        failure: BaseException | None,
        trace: TracebackType | None,
    ) -> None:
        """Leave no trace on the terminal."""


class Bar(Protocol):
    """What the module of the bar offers."""

    def show(self, step: str, done: int) -> None: ...

    def stop(self) -> None: ...


class Delayed(Progress):
    """Shows a bar on standard error once the work has taken a second."""

    def __init__(self, netlists: int) -> None:
        self._netlists = netlists
        self._done = 0
        self._step = ""
        self._bar: Bar | None = None
        self._lock = threading.Lock()
        self._timer = threading.Timer(_PATIENCE, self._open)
        self._timer.daemon = True

    def step(self, name: str) -> None:
        self._step = name
        self._show()

    def netlist_done(self) -> None:
        self._done += 1
        self._show()

    def __enter__(self) -> Progress:
        self._timer.start()
        return self

    def __exit__(
        self,
        kind: type[BaseException] | None,
        failure: BaseException | None,
        trace: TracebackType | None,
    ) -> None:
        self._timer.cancel()
        with self._lock:
            if self._bar is not None:
                self._bar.stop()

    def _open(self) -> None:
        module = importlib.import_module(_BAR)
        with self._lock:
            if not self._timer.finished.is_set():
                self._bar = module.open_bar(self._netlists)
        self._show()

    def _show(self) -> None:
        with self._lock:
            if self._bar is not None:
                self._bar.show(self._step, self._done)


def progress_for(request: Request, netlists: int) -> Progress:
    """A bar where somebody sees it; silence in a pipe, a log, a dumb terminal or by `--quiet`."""
    seen = sys.stderr.isatty() and os.environ.get("TERM") != "dumb" and not request.quiet
    return Delayed(netlists) if seen else Progress()
