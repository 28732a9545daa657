"""Findings as lines in the GNU error format, for editors, hooks and plain logs.

`FILE:LINE:COLUMN: error: Q1: what is wrong [rule]`; what belongs to no line of the file is
`FILE: note: ...`.
"""

from collections.abc import Iterator
from typing import TextIO

from rulecheck.report.cautions import CAUTIONS
from rulecheck.report.changes import change_line
from rulecheck.report.lint_result import (
    LintReport,
    LintRun,
    excuse_text,
    off_line,
    sentence,
    tally_line,
    undecided_lines,
    unusable_line,
)
from rulecheck.report.look import PLAIN, Look
from rulecheck.report.one_line import one_line
from rulecheck.report.open_points import merged
from rulecheck.rulebook import Verdict


def render(run: LintRun, stream: TextIO, look: Look = PLAIN) -> None:
    """Write one line a finding, then what is open, and the tally."""
    for report in run.reports:
        for line in _lines(report, look):
            stream.write(one_line(line, look) + "\n")
    for netlist in run.unusable:
        stream.write(one_line(f"rulecheck: error: {unusable_line(netlist)}", look) + "\n")
    for off in run.switched_off:
        line = f"{off.span}: note: rule switched off: {off_line(off)}"
        stream.write(one_line(line, look) + "\n")
    if not look.quiet:
        for caution in CAUTIONS:
            stream.write(f"rulecheck: note: {caution[0].lower()}{caution[1:].rstrip('.')}\n")


def finding_line(finding: Verdict, recorded: bool = False) -> str:
    """The finding as one line; an undecided, excused or recorded one is a note that says so."""
    text = f"{sentence(finding).rstrip('.')} [{finding.rule}]"
    if finding.excuse is not None:
        return f"{finding.span}: note: excused: {text}; {excuse_text(finding)}"
    if finding.verdict == "undecided":
        return f"{finding.span}: note: undecided: {text}"
    if recorded:
        return f"{finding.span}: note: in the record: {text}"
    return f"{finding.span}: {finding.level}: {text}"


def _change_lines(report: LintReport) -> Iterator[str]:
    if report.changes is None:
        return
    for _, group in report.changes.groups:
        yield from (f"{change.span}: note: changed: {change_line(change)}" for change in group)
    if not report.changes.groups:
        yield f"{report.netlist}: note: nothing changed since {report.changes.old}"


def _lines(report: LintReport, look: Look) -> Iterator[str]:
    name = report.netlist
    if not look.quiet:
        yield from (problem.line() for problem in report.remarks)
    for finding in report.findings:
        yield finding_line(finding, report.is_recorded(finding))
    yield from (f"{name}: note: {line}" for line in undecided_lines(report))
    for item in report.undetermined:
        yield f"{name}: note: undetermined: {item.what}; settle with {item.settle_with}"
    yield from (f"{name}: note: not covered: {line}" for line in report.not_covered)
    if not look.quiet:
        yield from (f"{name}: note: assumed: {line}" for line in merged(report.assumed))
    yield from _change_lines(report)
    yield f"{name}: note: {tally_line(report.tally)}"
