"""What the command line means."""

import pytest

from rulecheck.cli.arguments import read_arguments
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
    assert "rulecheck" in capsys.readouterr().err.splitlines()[-1]


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
