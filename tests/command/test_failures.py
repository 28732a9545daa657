"""Bad input is one line each and status 2; our own faults say so; nothing shows a traceback."""

import re
import shlex
import subprocess
import sys

import pytest

from rulecheck.cli import entry
from tests.command.running import clean_environment, run

COMMAND = f"{shlex.quote(sys.executable)} -m rulecheck"
ERROR_LINE = re.compile(r"[^:]+:\d+:\d+: error: .+; .+\Z")


def errors(done):
    lines = done.stderr.splitlines()
    assert done.returncode == 2
    assert lines
    assert all(ERROR_LINE.match(line) for line in lines), lines
    return lines


@pytest.mark.parametrize("command", [["lint", "no.cir"], ["quadrants", "no.cir"],
                                     ["explain", "no.cir", "Q1"], ["lint", "."]])  # fmt: skip
def test_a_file_that_is_not_there(command, tmp_path):
    assert "no.cir" in errors(run(*command, folder=tmp_path))[0] or command[1] == "."


def test_a_sheet_and_part_data_with_mistakes_give_all_of_them_at_once(hut):
    sheet = hut / "battery-bus.stage.yaml"
    text = sheet.read_text(encoding="utf-8")
    sheet.write_text(text.replace("58 V", "58 A").replace("efficiency", "eficiency"), "utf-8")
    (hut / "more.parts.yaml").write_text("parts:\n  X: {kind: mosfett}\n", encoding="utf-8")
    done = run("quadrants", "battery-bus.cir", "--parts", "more.parts.yaml", folder=hut)
    lines = errors(done)
    assert len(lines) == 3
    assert any("did you mean" in line for line in lines)
    assert done.stdout == ""


def test_a_card_that_cannot_be_read_is_an_error_and_the_rest_is_still_analysed(hut):
    netlist = hut / "battery-bus.cir"
    text = netlist.read_text(encoding="utf-8")
    netlist.write_text(text.replace("R2 SW SN2 4.7", "R2 SW"), encoding="utf-8")
    done = run("quadrants", "battery-bus.cir", folder=hut)
    assert "battery-bus.cir:26:" in errors(done)[0]
    assert "R2 is missing from the analysis" in " ".join(done.stdout.split())


@pytest.mark.parametrize("text", ["", "\n", "* only a title\n.end\n"])
def test_an_empty_netlist_is_an_error(text, tmp_path):
    (tmp_path / "a.cir").write_text(text, encoding="utf-8")
    errors(run("lint", "a.cir", folder=tmp_path))


def test_a_name_that_is_not_there_is_corrected(hut):
    done = run("explain", "battery-bus.cir", "Q33", folder=hut)
    assert "did you mean 'Q3'?" in errors(done)[0]


def test_a_project_file_with_mistakes(hut):
    (hut / "rulecheck.yaml").write_text("netlist: [a.cir]\n", encoding="utf-8")
    assert "rulecheck.yaml:1:1: error:" in errors(run("lint", folder=hut))[0]


def test_lint_without_netlist_and_project_says_what_to_name(tmp_path):
    assert "rulecheck.yaml" in errors(run("lint", folder=tmp_path))[0]


def test_a_pattern_that_matches_nothing(tmp_path):
    (tmp_path / "rulecheck.yaml").write_text("netlists: ['*.cir']\n", encoding="utf-8")
    assert "no file matches" in errors(run("lint", folder=tmp_path))[0]


def test_an_output_over_an_input_is_refused_and_nothing_is_written(hut):
    before = (hut / "battery-bus.stage.yaml").read_bytes()
    done = run(
        "lint", "battery-bus.cir", "--format", "json", "-o", "new.json",
        "--format", "lines", "-o", "battery-bus.stage.yaml", folder=hut,
    )  # fmt: skip
    assert "overwrite an input" in errors(done)[0]
    assert (hut / "battery-bus.stage.yaml").read_bytes() == before
    assert not (hut / "new.json").exists()


def test_our_own_fault_is_one_line_and_keeps_the_traceback_for_whoever_asks(monkeypatch, capsys):
    def fail(request):
        raise ZeroDivisionError("in the\nmiddle")

    monkeypatch.setattr(entry, "_run", fail)
    monkeypatch.delenv(entry.TRACE_VARIABLE, raising=False)
    assert entry.main(["demo", "x"]) == 2
    message = capsys.readouterr().err
    assert message.startswith("rulecheck: internal error: ZeroDivisionError: in the middle; ")
    assert message.count("\n") == 1
    monkeypatch.setenv(entry.TRACE_VARIABLE, "1")
    assert entry.main(["demo", "x"]) == 2
    assert "Traceback" in capsys.readouterr().err


def test_a_reader_that_leaves_early_is_no_error(hut):
    pipe = subprocess.run(
        ["sh", "-c", f"{COMMAND} explain battery-bus.cir --step facts | head -1"],
        cwd=hut, env=clean_environment(), capture_output=True, text=True, check=False,
    )  # fmt: skip
    assert (pipe.returncode, pipe.stderr) == (0, "")
    assert pipe.stdout.count("\n") == 1


def test_a_closed_standard_output_is_no_traceback(hut):
    closed = subprocess.run(
        ["sh", "-c", f"{COMMAND} quadrants battery-bus.cir >&-"],
        cwd=hut, env=clean_environment(), capture_output=True, text=True, check=False,
    )  # fmt: skip
    assert "Traceback" not in closed.stderr
