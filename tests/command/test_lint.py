"""`lint`: statuses, formats, several netlists, the project file."""

import json
import re

import pytest

from tests.command.running import run, run_all_apart

TWIN = "battery-bus-faulty.cir"


@pytest.mark.parametrize(
    ("arguments", "status"),
    [
        (["battery-bus.cir"], 0),
        ([TWIN], 1),
        (["battery-bus.cir", TWIN], 1),
        ([], 1),
        (["battery-bus.cir", "no.cir"], 2),
        ([TWIN, "no.cir"], 2),
    ],
)
def test_the_exit_status(arguments, status, hut):
    assert run("lint", *arguments, folder=hut).returncode == status


def test_undecided_checks_fail_the_run_only_where_asked(hut):
    parts = hut / "hut.parts.yaml"
    text = parts.read_text(encoding="utf-8")
    parts.write_text(text.replace("{blocking: 200 V, ", "{"), encoding="utf-8")
    arguments = ["lint", "battery-bus.cir", "--format", "json"]
    loose, strict = run(*arguments, folder=hut), run(*arguments, "--undecided", "fail", folder=hut)
    tally = json.loads(loose.stdout)["tally"]
    assert tally["undecided"] > 0
    assert loose.returncode == 0
    assert strict.returncode == 1


def test_a_pipe_gets_lines_in_the_gnu_format(hut):
    lines = run("lint", TWIN, folder=hut).stdout.splitlines()
    errors = [line for line in lines if ": error: " in line]
    assert errors
    assert all(re.match(rf"{TWIN}:\d+:\d+: error: .+ \[[a-z0-9-]+\]\Z", line) for line in errors)


def test_several_formats_in_one_run(hut):
    done = run(
        "lint", TWIN, "--format", "sarif", "-o", "x.sarif", "-o", "x.md", "--format", "json",
        folder=hut,
    )  # fmt: skip
    assert done.returncode == 1
    log = json.loads((hut / "x.sarif").read_text(encoding="utf-8"))
    answer = json.loads(done.stdout)
    assert len(log["runs"][0]["results"]) == len(answer["findings"])
    assert (hut / "x.md").read_text(encoding="utf-8").startswith(f"## {TWIN}")


def test_jobs_change_nothing_but_the_time(hut):
    """Not a byte on either stream, with netlists that are sound, faulty, absent and unreadable."""
    (hut / "cut.cir").write_text("* cut off\nQ1 BUS G1\nR1 A\n.end\n", encoding="utf-8")
    names = ["battery-bus.cir", "no.cir", TWIN, "cut.cir"]
    one, *more = (
        run("lint", *names, "--format", "json", "--jobs", jobs, folder=hut) for jobs in (1, 2, 9)
    )
    assert more == [one, one]
    assert [report["netlist"] for report in json.loads(one.stdout)] == [names[0], TWIN]
    assert len(one.stderr.splitlines()) >= 2


def test_the_same_input_gives_the_same_bytes(hut):
    commands = [
        ["lint", TWIN, "--format", "json"],
        ["lint", TWIN, "--format", "table"],
        ["quadrants", TWIN],
        ["explain", TWIN, "--step", "facts"],
        ["explain", TWIN, "Q1"],
    ]
    outputs = {run_all_apart(commands, hut, seed) for seed in ("1", "77")}
    assert len(outputs) == 1


def test_colour_comes_only_where_it_is_wanted(hut):
    table = ["lint", TWIN, "--format", "table"]
    assert "\x1b[" not in run(*table, folder=hut).stdout
    assert "\x1b[" in run(*table, "--color", "always", folder=hut).stdout
    assert "\x1b[" not in run(*table, "--color", "never", folder=hut).stdout


def test_quiet_still_says_what_is_broken_and_what_is_open(hut):
    loud, quiet = run("lint", TWIN, folder=hut), run("lint", TWIN, "--quiet", folder=hut)
    assert [line for line in loud.stdout.splitlines() if ": error: " in line] == [
        line for line in quiet.stdout.splitlines() if ": error: " in line
    ]
    assert "undecided" in quiet.stdout
    assert len(quiet.stdout) < len(loud.stdout)


@pytest.mark.parametrize("width", ["80", "120"])
@pytest.mark.parametrize("options", [[], ["--ascii"]])
def test_the_tables_keep_to_the_terminal(width, options, hut):
    environment = {"COLUMNS": width}
    done = run("quadrants", TWIN, *options, folder=hut, environment=environment)
    assert max(map(len, done.stdout.splitlines())) <= int(width)
    assert done.stdout.isascii() is bool(options)
