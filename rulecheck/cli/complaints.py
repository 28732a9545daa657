"""Errors about the input, each one line on standard error."""

import sys
from collections.abc import Iterable

from rulecheck.values import USUAL, Gravity, Limits, Problem, harmless

UNUSABLE = 2
LONGEST = 2000
"""Characters of a line; a longer one quotes what nobody wrote by hand."""


def complain(problems: Iterable[Problem], limits: Limits = USUAL) -> int:
    """Print each error once, in the order of files and lines; return the exit status for them.

    Beyond the limit they are counted: nobody reads the thousandth, and it is no help to fix.
    """
    errors = sorted(
        {problem for problem in problems if problem.gravity is Gravity.ERROR},
        key=lambda problem: (problem.span, problem.what),
    )
    most = limits["errors"]
    for problem in errors[:most]:
        print(printable(problem.line()), file=sys.stderr)
    if len(errors) > most:
        left = len(errors) - most
        words = f"{left} more {'error is' if left == 1 else 'errors are'} not shown"
        print(f"rulecheck: error: {words}; --limit errors=N shows more", file=sys.stderr)
    return UNUSABLE


def refuse(what: str, remedy: str) -> int:
    """Print an error that stands in no file; return the exit status for it."""
    print(printable(f"rulecheck: error: {what}; {remedy}"), file=sys.stderr)
    return UNUSABLE


def printable(line: str) -> str:
    """One line without control signs, in what standard error can write."""
    clean = harmless(" ".join(line.split()), colored=False)
    if len(clean) > LONGEST:
        clean = f"{clean[: LONGEST // 2]} ... {clean[-LONGEST // 2 :]}"
    encoding = sys.stderr.encoding or "ascii"
    return clean.encode(encoding, "backslashreplace").decode(encoding)
