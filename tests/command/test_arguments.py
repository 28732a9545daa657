"""What the command line means."""

import re
import shlex

import pytest

from rulecheck.cli.arguments import read_arguments
from rulecheck.cli.entry import COMMANDS
from rulecheck.cli.request import Output


@pytest.mark.parametrize(
    ("arguments", "outputs"),
    [
        ([], [Output(None, None)]),
        (["--format", "json"], [Output("json", None)]),
        (["-o", "a.txt"], [Output(None, "a.txt")]),
        (
            ["--format", "sarif", "-o", "x.sarif", "--format", "table"],
            [Output("sarif", "x.sarif"), Output("table", None)],
        ),
        (
            ["--format", "json", "-o", "a", "-o", "b"],
            [Output("json", "a"), Output(None, "b")],
        ),
    ],
)
def test_each_file_belongs_to_the_format_before_it(arguments, outputs):
    assert list(read_arguments(["lint", "hut.cir", *arguments]).outputs) == outputs


@pytest.mark.parametrize(
    "arguments",
    [
        [],
        ["nothing"],
        ["lint", "--format", "html"],
        ["lint", "--format", "json", "--format", "lines"],
        ["lint", "--fail-at", "fatal"],
        ["lint", "--jobs", "-1"],
        ["lint", "--jobs", "many"],
        ["lint", "a.cir", "b.cir", "--stage", "a.stage.yaml"],
        ["quadrants"],
        ["schema", "netlist"],
    ],
)
def test_a_mistake_is_a_line_on_standard_error_and_status_2(arguments, capsys):
    with pytest.raises(SystemExit) as stop:
        read_arguments(arguments)
    assert stop.value.code == 2
    (line,) = capsys.readouterr().err.splitlines()
    assert re.fullmatch(
        r"rulecheck: error: .+; `rulecheck( \w+)? --help` shows how to call it", line
    )


@pytest.mark.parametrize(
    ("arguments", "meant"),
    [
        (["lnit"], "lint"),
        (["lint", "--formt", "json"], "--format"),
        (["lint", "--format=jsn"], "json"),
        (["quadrants", "a.cir", "--stag=x"], "--stage"),
        (["schema", "sheets"], "sheet"),
    ],
)
def test_a_slip_is_answered_with_what_was_meant(arguments, meant, capsys):
    with pytest.raises(SystemExit):
        read_arguments(arguments)
    assert f"did you mean '{meant}'?" in capsys.readouterr().err


@pytest.mark.parametrize("command", COMMANDS)
def test_the_help_of_each_command_ends_with_an_example_that_is_understood(command, capsys):
    with pytest.raises(SystemExit) as stop:
        read_arguments([command, "--help"])
    assert stop.value.code == 0
    program, *words = shlex.split(capsys.readouterr().out.splitlines()[-1].removeprefix("example:"))
    assert program == "rulecheck"
    assert read_arguments(words).command == command


def test_options_reach_the_request():
    request = read_arguments(
        ["lint", "a.cir", "--parts", "p", "--parts", "q", "--rules", "r", "--fail-at", "note",
         "--undecided", "fail", "--jobs", "0", "--color", "never", "--quiet", "--ascii"]
    )  # fmt: skip
    assert request.names == ("a.cir",)
    assert request.parts == ("p", "q")
    assert request.rules == ("r",)
    assert (request.fail_at, request.undecided, request.jobs) == ("note", "fail", 0)
    assert (request.color, request.quiet, request.ascii) == ("never", True, True)
