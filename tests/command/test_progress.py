"""The progress bar: for who waits at a terminal, and for nobody else."""

import contextlib
import io
import time

import pytest

from rulecheck.cli import progress
from rulecheck.cli.progress import progress_for
from rulecheck.cli.request import Request


class Terminal(io.StringIO):
    encoding = "utf-8"

    def isatty(self) -> bool:
        return True


@pytest.fixture
def terminal(monkeypatch):
    stream = Terminal()
    monkeypatch.setenv("TERM", "xterm")
    monkeypatch.setattr(progress, "_PATIENCE", 0.0)
    return stream


def shown(request, terminal, netlists=3):
    with contextlib.redirect_stderr(terminal), progress_for(request, netlists) as told:
        deadline = time.monotonic() + 60
        while isinstance(told, progress.Delayed) and not terminal.getvalue():
            told.step("stage")
            time.sleep(0.01)
            assert time.monotonic() < deadline
        told.netlist_done()
    return terminal.getvalue()


def test_a_long_run_counts_netlists_and_wipes_the_line_at_the_end(terminal):
    text = shown(Request("lint"), terminal)
    assert "of 3" in text
    assert text.endswith("\x1b[2K")


def test_a_single_netlist_shows_its_step(terminal):
    assert "of 7" in shown(Request("quadrants"), terminal, 1)


def test_a_quick_run_shows_nothing(terminal, monkeypatch):
    monkeypatch.setattr(progress, "_PATIENCE", 60.0)
    with contextlib.redirect_stderr(terminal), progress_for(Request("lint"), 3) as told:
        told.netlist_done()
    assert terminal.getvalue() == ""


def test_quiet_shows_nothing(terminal):
    assert shown(Request("lint", quiet=True), terminal) == ""


def test_a_dumb_terminal_shows_nothing(terminal, monkeypatch):
    monkeypatch.setenv("TERM", "dumb")
    assert shown(Request("lint"), terminal) == ""


def test_a_pipe_gets_nothing(terminal, monkeypatch):
    monkeypatch.setattr(Terminal, "isatty", lambda self: False)
    assert shown(Request("lint"), terminal) == ""
