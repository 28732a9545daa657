"""`rulecheck`: read the arguments, hand them to the command's module, answer with its status."""

import gc
import importlib
import io
import os
import sys
import traceback
from collections.abc import Callable, Sequence

from rulecheck.cli.arguments import read_arguments
from rulecheck.cli.request import Request

UNUSABLE = 2
TRACE_VARIABLE = "RULECHECK_TRACEBACK"
RECORDS_BETWEEN_COLLECTIONS = 200_000
"""Records hold no cycles; looking for some after every 700 of them, as usual, finds nothing."""

# named, not imported: a command loads what it needs when it is called
COMMANDS = {
    "lint": "rulecheck.cli.lint_command",
    "quadrants": "rulecheck.cli.quadrants_command",
    "explain": "rulecheck.cli.explain_command",
    "report": "rulecheck.cli.report_command",
    "rules": "rulecheck.cli.rules_command",
    "help": "rulecheck.cli.help_command",
    "schema": "rulecheck.cli.schema_command",
    "demo": "rulecheck.cli.demo_command",
    "completion": "rulecheck.cli.completion_command",
}
_WATCHING = "rulecheck.cli.watching"


def main(argv: Sequence[str] | None = None) -> int:
    """Exit status 0: nothing broken; 1: something broken; 2: the input could not be used."""
    _open_streams()
    request = read_arguments(argv)
    gc.set_threshold(RECORDS_BETWEEN_COLLECTIONS)
    try:
        status = _run(request)
        sys.stdout.flush()
    except BrokenPipeError:
        # the reader has left (`| head`): no complaint, and none at interpreter exit either
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return 0
    except KeyboardInterrupt:
        print("rulecheck: error: interrupted; nothing was decided", file=sys.stderr)
        return UNUSABLE
    except OSError as failure:
        # standard output is full or gone; what can be said about a file is said where it is used
        return _own_fault(failure) if failure.filename else _no_output(failure)
    except Exception as failure:
        return _own_fault(failure)
    return status


def _open_streams() -> None:
    """A closed stream swallows what is written; a sign that one cannot write becomes its code."""
    for name in ("stdout", "stderr"):
        stream = getattr(sys, name)
        if stream is None:
            setattr(sys, name, open(os.devnull, "w", encoding="utf-8"))  # noqa: SIM115 - until exit
        elif isinstance(stream, io.TextIOWrapper):
            stream.reconfigure(errors="backslashreplace")


def _run(request: Request) -> int:
    command = importlib.import_module(COMMANDS[request.command])
    if request.watch:
        watch: Callable[..., int] = importlib.import_module(_WATCHING).watch
        return watch(request, command.answer)
    run: Callable[[Request], int] = command.run
    return run(request)


def _no_output(failure: OSError) -> int:
    print(f"rulecheck: error: standard output: {failure.strerror}; free some room", file=sys.stderr)
    os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
    return UNUSABLE


def _own_fault(failure: Exception) -> int:
    """One line that owns up to the bug; the traceback is kept for whoever asks."""
    if os.environ.get(TRACE_VARIABLE):
        traceback.print_exception(failure)
    kind, words = type(failure).__name__, " ".join(str(failure).split())
    print(
        f"rulecheck: internal error: {kind}: {words}; this is a fault of rulecheck, not of your"
        f" files: report it with the output of a run with {TRACE_VARIABLE}=1",
        file=sys.stderr,
    )
    return UNUSABLE
