"""Errors about the input, each one line on standard error."""

import sys
from collections.abc import Iterable

from rulecheck.values import Gravity, Problem

UNUSABLE = 2


def complain(problems: Iterable[Problem]) -> int:
    """Print every error once, in the order of files and lines; return the exit status for them."""
    errors = sorted(
        {problem for problem in problems if problem.gravity is Gravity.ERROR},
        key=lambda problem: (problem.span, problem.what),
    )
    for problem in errors:
        print(printable(problem.line()), file=sys.stderr)
    return UNUSABLE


def printable(line: str) -> str:
    """One line without control signs, in what standard error can write."""
    clean = "".join(
        sign if sign.isprintable() else f"\\x{ord(sign):02x}" for sign in " ".join(line.split())
    )
    encoding = sys.stderr.encoding or "ascii"
    return clean.encode(encoding, "backslashreplace").decode(encoding)
