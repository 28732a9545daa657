"""The arguments of every command, as argparse knows them."""

import argparse
import re
from collections.abc import Sequence
from typing import Any

from rulecheck import __version__
from rulecheck.cli.formats import LINT, QUADRANTS
from rulecheck.cli.parser import Parser
from rulecheck.cli.request import Output, Request
from rulecheck.values import BOUNDS

STEPS = ("circuit", "parts", "stage", "capability", "demand", "facts")
SCHEMAS = ("sheet", "parts", "rules", "project")
LEVELS = ("error", "warning", "note")
SHELLS = ("bash", "zsh", "fish")


class _Format(argparse.Action):
    """`--format X` opens an output; a later `-o FILE` gives it its file."""

    def __call__(
        self,
        parser: argparse.ArgumentParser,
        namespace: argparse.Namespace,
        values: str | Sequence[Any] | None,
        option_string: str | None = None,
    ) -> None:
        namespace.outputs = [*(namespace.outputs or []), Output(str(values), None)]


class _File(argparse.Action):
    def __call__(
        self,
        parser: argparse.ArgumentParser,
        namespace: argparse.Namespace,
        values: str | Sequence[Any] | None,
        option_string: str | None = None,
    ) -> None:
        outputs: list[Output] = list(namespace.outputs or [])
        waiting = outputs.pop() if outputs and outputs[-1].file is None else Output(None, None)
        namespace.outputs = [*outputs, Output(waiting.format, str(values))]


def read_arguments(argv: Sequence[str] | None) -> Request:
    """Parse the command line; a mistake in it prints one line and exits with 2."""
    parser = command_parser()
    values = vars(parser.parse_args(argv))
    outputs = tuple(values.pop("outputs", None) or [Output(None, None)])
    known = {name: _frozen(value) for name, value in values.items() if value is not None}
    request = Request(outputs=outputs, **known)
    fault = _fault(request)
    if fault:
        parser.of_command(request.command).error(fault)
    return request


def _fault(request: Request) -> str | None:
    """What argparse cannot see: arguments that do not go together."""
    if sum(output.file is None for output in request.outputs) > 1:
        return "two formats for standard output; give each but one a file with -o FILE"
    if request.command == "lint" and request.stage and len(request.names) != 1:
        return "--stage is the sheet of one netlist; name that netlist alone"
    if request.command == "lint" and request.against and len(request.names) != 1:
        return "--against compares one netlist with an earlier one; name the new one alone"
    if request.against and any(output.format == "junit" for output in request.outputs):
        return "JUnit has no place for changes; leave --against or --format junit out"
    if request.command == "explain" and request.step and len(request.names) != 1:
        return "--step explains a whole netlist; leave the name out"
    if request.command == "explain" and not request.step and len(request.names) != 2:
        return "name what to explain: a position, leg, part or port; or a step with --step"
    if request.command == "rules" and len(request.names) > 1 and not request.try_packs:
        return "one rule at a time"
    return None


def _frozen(value: object) -> Any:
    return tuple(value) if isinstance(value, list) else value


def command_parser() -> Parser:
    """The parser of the whole command line, with every command and option."""
    parser = Parser(
        prog="rulecheck",
        description="Checks the netlist of a power stage: what every switch position must block\n"
        "and carry, and whether the drawn devices can.",
        epilog="First run:  rulecheck demo hut && cd hut && rulecheck lint\n"
        "Then:       rulecheck help WORD  for a rule, a fact or a key of a file\n\n"
        "Exit status: 0 nothing broken, 1 something broken, 2 the input could not be used.",
    )
    parser.add_argument("--version", action="version", version=f"rulecheck {__version__}")
    commands = parser.add_subparsers(
        dest="command", required=True, metavar="COMMAND", parser_class=Parser
    )
    for add in (_lint, _quadrants, _explain, _report, _rules, _help, _schema, _demo, _completion):
        add(commands)
    return parser


def _command(commands: Any, name: str, does: str, example: str) -> Parser:
    """A command whose help says what it does and ends with one example."""
    sentence = f"{does[0].upper()}{does[1:]}."
    command: Parser = commands.add_parser(
        name, help=does, description=sentence, epilog=f"example:  rulecheck {example}"
    )
    return command


def _lint(commands: Any) -> None:
    command = _command(
        commands,
        "lint",
        "check and print the findings and what is open",
        "lint hut.cir --format sarif -o findings.sarif --format lines",
    )
    command.add_argument("names", nargs="*", metavar="NETLIST", help="default: rulecheck.yaml's")
    _add_inputs(command)
    _add_packs(command)
    _add_outputs(command, tuple(LINT))
    command.add_argument("--fail-at", choices=LEVELS, help="lowest level that fails the run")
    command.add_argument(
        "--undecided", choices=("pass", "fail"), help="whether undecided checks fail the run"
    )
    command.add_argument("--jobs", type=_jobs, metavar="N", help="netlists at once; 0: all cores")
    command.add_argument("--record", metavar="FILE", help="write today's broken findings there")
    command.add_argument("--since", metavar="FILE", help="fail only on what this record lacks")
    _add_against(command)
    _add_watch(command)


def _add_against(command: argparse.ArgumentParser) -> None:
    command.add_argument("--against", metavar="OLD", help="an earlier netlist: show what changed")


def _quadrants(commands: Any) -> None:
    command = _command(
        commands,
        "quadrants",
        "show what each position must cover and covers",
        "quadrants hut.cir --stage winter.stage.yaml",
    )
    command.add_argument("names", nargs=1, metavar="NETLIST")
    _add_inputs(command)
    _add_outputs(command, tuple(QUADRANTS))
    _add_watch(command)


def _explain(commands: Any) -> None:
    command = _command(
        commands,
        "explain",
        "say why: the derivation for a position, leg, part or port, or one step's result",
        "explain hut.cir Q1",
    )
    command.add_argument("names", nargs="+", metavar="NETLIST [NAME]")
    command.add_argument("--step", choices=STEPS, help="print what this step found instead")
    _add_inputs(command)
    _add_outputs(command, ())


def _report(commands: Any) -> None:
    command = _command(
        commands,
        "report",
        "write the review document: one HTML file to read",
        "report hut.cir -o review.html",
    )
    command.add_argument("names", nargs=1, metavar="NETLIST")
    _add_inputs(command)
    _add_packs(command)
    _add_outputs(command, ())
    _add_against(command)


def _rules(commands: Any) -> None:
    command = _command(
        commands, "rules", "list the rules in force, or explain one", "rules reverse-current-path"
    )
    command.add_argument("names", nargs="*", metavar="ID", help="a rule; with --try a pack")
    command.add_argument(
        "--try", dest="try_packs", action="store_true", help="run the examples that packs carry"
    )
    command.add_argument(
        "--facts", action="store_true", help="print every subject and field a rule may ask for"
    )
    _add_project(command)
    _add_packs(command)
    _add_outputs(command, ())


def _help(commands: Any) -> None:
    command = _command(
        commands,
        "help",
        "print the page on a command, a rule, a fact, a parameter or a key of a YAML file",
        "help dead-time",
    )
    command.add_argument("names", nargs="*", metavar="WORD", help="default: list all words")
    _add_project(command)
    _add_packs(command)
    _add_outputs(command, ())


def _schema(commands: Any) -> None:
    command = _command(
        commands,
        "schema",
        "print the JSON Schema of a YAML file, with which an editor completes it",
        "schema sheet -o sheet.schema.json",
    )
    command.add_argument("names", nargs=1, choices=SCHEMAS, metavar="|".join(SCHEMAS))
    _add_file(command, "write it there")


def _demo(commands: Any) -> None:
    command = _command(
        commands, "demo", "write the demo, four stages and their faulty twins", "demo hut"
    )
    command.add_argument("names", nargs=1, metavar="DIR", help="a new or empty folder")
    command.add_argument("--quiet", action="store_true", help="print nothing")


def _completion(commands: Any) -> None:
    command = _command(
        commands,
        "completion",
        "print the script that lets a shell complete this command, or install it",
        "completion fish --install",
    )
    command.add_argument("names", nargs=1, choices=SHELLS, metavar="|".join(SHELLS))
    command.add_argument(
        "--install", action="store_true", help="write it where the shell looks for it"
    )
    _add_file(command, "write it there")


def _add_inputs(command: Parser) -> None:
    command.add_argument("--stage", metavar="FILE", help="the stage sheet; default: beside it")
    command.add_argument(
        "--include-dir", action="append", dest="include_dirs", metavar="DIR",
        help="files there may be included, too; may be given again",
    )  # fmt: skip
    command.add_argument(
        "--parts", action="append", metavar="FILE", help="part data; may be given again"
    )
    _add_project(command)


def _add_project(command: Parser) -> None:
    command.add_argument(
        "--limit", action="append", dest="changed_limits", type=_limit, metavar="NAME=N",
        help=f"change how much is taken in: {', '.join(BOUNDS)}",
    )  # fmt: skip
    command.add_argument(
        "--project", metavar="FILE", help="the project file; default: rulecheck.yaml if there"
    )


def _add_packs(command: Parser) -> None:
    command.add_argument(
        "--rules", action="append", metavar="PACK", help="one more pack of rules, name or file"
    )


def _add_outputs(command: Parser, formats: tuple[str, ...]) -> None:
    if formats:
        command.add_argument(
            "--format", action=_Format, dest="outputs", choices=formats, help="form of the report"
        )
    _add_file(command, "write the report there")
    command.add_argument(
        "--color", choices=("auto", "always", "never"), help="default auto; NO_COLOR is honoured"
    )
    command.add_argument("--ascii", action="store_true", help="seven-bit signs only")
    command.add_argument(
        "--quiet", action="store_true", help="only what is broken or open, and the tally"
    )


def _add_file(command: Parser, does: str) -> None:
    command.add_argument("-o", action=_File, dest="outputs", metavar="FILE", help=does)


def _add_watch(command: Parser) -> None:
    command.add_argument(
        "--watch", action="store_true", help="run again whenever an input changes; Ctrl-C ends it"
    )


def _jobs(text: str) -> int:
    if not text.isdecimal():
        raise argparse.ArgumentTypeError(f"'{text}' is no number of netlists, 0 or more")
    return int(text)


def _limit(text: str) -> tuple[str, int]:
    """`elements=400000`; the name is one of the table, the number within its bounds."""
    name, _, written = text.partition("=")
    bound = BOUNDS.get(name)
    if bound is None:
        raise argparse.ArgumentTypeError(f"no limit '{name}'; the limits are {', '.join(BOUNDS)}")
    if not re.fullmatch(r"[0-9]{1,12}", written) or not 1 <= int(written) <= bound.most:
        what = f"'{name}' takes a number from 1 to {bound.most} ({bound.counts})"
        raise argparse.ArgumentTypeError(f"{what}, not '{written}'")
    return name, int(written)
