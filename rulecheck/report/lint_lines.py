"""Findings as lines in the GNU error format, for editors, hooks and plain logs.

`FILE:LINE:COLUMN: error: Q1: what is wrong [rule]`; what belongs to no line of the file is
`FILE: note: ...`.
"""

from collections.abc import Iterator
from typing import TextIO

from rulecheck.report.cautions import CAUTIONS
from rulecheck.report.lint_result import (
    Finding,
    LintReport,
    LintRun,
    tally_line,
    wanted_line,
)
from rulecheck.report.look import PLAIN, Look
from rulecheck.report.one_line import one_line


def render(run: LintRun, stream: TextIO, look: Look = PLAIN) -> None:
    """Write one line a finding, then what is open, and the tally."""
    for report in run.reports:
        for line in _lines(report, look):
            stream.write(one_line(line, look) + "\n")
    for off in run.switched_off:
        stream.write(one_line(f"rulecheck: note: rule switched off: {off}", look) + "\n")
    if not look.quiet:
        for caution in CAUTIONS:
            stream.write(f"rulecheck: note: {caution[0].lower()}{caution[1:].rstrip('.')}\n")


def finding_line(finding: Finding) -> str:
    """The finding as one line; an undecided or excused one is a note that says so."""
    text = f"{finding.sentence.rstrip('.')} [{finding.rule}]"
    if finding.excuse is not None:
        return f"{finding.where}: note: excused: {text}; {excuse_text(finding)}"
    if finding.verdict == "undecided":
        return f"{finding.where}: note: undecided: {text}"
    return f"{finding.where}: {finding.level}: {text}"


def excuse_text(finding: Finding) -> str:
    """Who accepted the deviation, why, and until when."""
    excuse = finding.excuse
    if excuse is None:
        return ""
    until = f", until {excuse.until}" if excuse.until else ""
    return f"accepted by {excuse.accepted_by}{until}: {excuse.reason}"


def _lines(report: LintReport, look: Look) -> Iterator[str]:
    name = report.netlist
    if not look.quiet:
        yield from (problem.line() for problem in report.remarks)
    yield from (finding_line(finding) for finding in report.findings)
    yield from (f"{name}: note: {wanted_line(item)}" for item in report.wanted)
    for item in report.undetermined:
        yield f"{name}: note: undetermined: {item.what}; settle with {item.settle_with}"
    yield from (f"{name}: note: not covered: {line}" for line in report.not_covered)
    if not look.quiet:
        yield from (f"{name}: note: assumed: {line}" for line in report.assumed)
    yield f"{name}: note: {tally_line(report.tally)}"
