"""`--watch`: every change of an input is answered, and Ctrl-C ends it without a word too much."""

import os
import signal
import subprocess
import sys
import threading

import pytest

from rulecheck.cli import watching
from rulecheck.cli.analysing import Answer
from rulecheck.cli.request import Request
from rulecheck.cli.watching import watch
from tests.command.running import clean_environment

WHOLE = "watching 3 files; Ctrl-C ends it"


class Command:
    """Answers with a status each time; then does something to the files, in the end Ctrl-C."""

    def __init__(self, *deeds, inputs=(), status=1):
        self.deeds, self.inputs, self.status, self.answers = list(deeds), inputs, status, 0

    def __call__(self, request):
        self.answers += 1
        if not self.deeds:
            raise KeyboardInterrupt
        self.deeds.pop(0)()
        return Answer(self.status, self.inputs)


@pytest.fixture
def netlist(tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    monkeypatch.setattr(watching, "_PAUSE", 0.01)
    (tmp_path / "leg.cir").write_text("* leg", encoding="utf-8")
    (tmp_path / "models.inc").write_text("* models", encoding="utf-8")
    return Request("lint", ("leg.cir",), watch=True)


def writing(file, text="changed"):
    def write():
        with open(file, "w", encoding="utf-8") as stream:
            stream.write(text)

    return write


def later(deed):
    return lambda: threading.Timer(0.1, deed).start()


@pytest.mark.parametrize("file", ["leg.cir", "leg.stage.yaml", "rulecheck.yaml", "models.inc"])
def test_a_change_of_anything_that_was_read_or_would_be_is_answered(netlist, file):
    command = Command(later(writing(file, "netlists: []")), inputs=("leg.cir", "models.inc"))
    assert watch(netlist, command) == 1
    assert command.answers == 2


def test_a_change_during_the_run_is_answered_too(netlist):
    command = Command(writing("leg.cir", "* another leg"), inputs=("leg.cir",))
    watch(netlist, command)
    assert command.answers == 2


def test_a_file_that_is_taken_away_is_a_change(netlist):
    command = Command(later(lambda: os.unlink("models.inc")), inputs=("models.inc",))
    watch(netlist, command)
    assert command.answers == 2


def test_a_run_that_failed_early_still_watches_what_the_last_one_read(netlist):
    command = Command(writing("leg.cir", "* broken"), later(writing("models.inc")))
    command.inputs = ("leg.cir", "models.inc")

    def answer(request):
        found = command(request)
        return found if command.answers == 1 else Answer(2)

    assert watch(netlist, answer) == 2
    assert command.answers == 3


def test_the_files_are_counted_and_the_end_is_quiet(netlist, capsys):
    watch(netlist, Command(writing("leg.stage.yaml"), inputs=("leg.cir", "models.inc")))
    assert WHOLE in capsys.readouterr().err


def test_ctrl_c_ends_every_process_with_the_last_status(hut):
    """As from a terminal: the signal goes to the whole process group."""
    command = ["lint", "--jobs", "2", "--format", "lines", "--quiet", "--watch"]
    process = subprocess.Popen(
        [sys.executable, "-m", "rulecheck", *command],
        cwd=hut,
        env=clean_environment(),
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        encoding="utf-8",
        start_new_session=True,
    )
    assert process.stderr is not None
    assert "watching" in process.stderr.readline()
    os.killpg(process.pid, signal.SIGINT)
    out, err = process.communicate(timeout=60)
    assert process.returncode == 1
    assert err.strip() == ""
    assert "error: Q1" in out
