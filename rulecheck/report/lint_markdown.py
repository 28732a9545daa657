"""Findings for a merge request or a document."""

from typing import TextIO

from rulecheck.report.cautions import CAUTIONS
from rulecheck.report.lint_result import (
    LintReport,
    LintRun,
    changed_sections,
    excuse_text,
    off_line,
    tally_line,
    undecided_lines,
    unusable_line,
)
from rulecheck.report.look import PLAIN, Look
from rulecheck.report.markdown_text import bullets, escaped, heading_rule, row
from rulecheck.report.open_points import open_sections
from rulecheck.rulebook import Verdict

_HEADER = ("level", "subject", "finding", "rule", "place")


def render(run: LintRun, stream: TextIO, look: Look = PLAIN) -> None:
    """Write a heading, a table of findings and the open points for each netlist."""
    for report in run.reports:
        stream.write(f"## {escaped(report.netlist)}: {tally_line(report.tally)}\n\n")
        _write_findings(run, report, stream)
        _write_open_points(report, stream, look)
    if run.unusable:
        lines = bullets(tuple(unusable_line(netlist) for netlist in run.unusable))
        stream.write(f"### Not analysed\n\n{lines}\n")
    if run.switched_off:
        lines = bullets(tuple(off_line(off) for off in run.switched_off))
        stream.write(f"### Rules switched off\n\n{lines}\n")
    if not look.quiet:
        stream.write(f"{' '.join(CAUTIONS)}\n")


def _write_findings(run: LintRun, report: LintReport, stream: TextIO) -> None:
    shown = (*report.broken, *report.excused)
    if not shown:
        stream.write("Nothing broken.\n\n")
        return
    stream.write(row(*_HEADER) + heading_rule(len(_HEADER)))
    for finding in shown:
        stream.write(row(*(escaped(cell) for cell in _cells(run, report, finding))))
    stream.write("\n")


def _cells(run: LintRun, report: LintReport, finding: Verdict) -> tuple[str, ...]:
    place = (finding.rule, str(finding.span))
    if finding.excuse is not None:
        text = f"{finding.message} ({excuse_text(finding)})"
        return ("excused", finding.subject, text, *place)
    remedy = run.remedies.get(finding.rule)
    text = f"{finding.message} To do: {remedy}" if remedy else finding.message
    level = f"{finding.level}, recorded" if report.is_recorded(finding) else finding.level
    return (level, finding.subject, text, *place)


def _write_open_points(report: LintReport, stream: TextIO, look: Look) -> None:
    assumed = () if look.quiet else report.assumed
    sections = (
        *changed_sections(report),
        ("Undecided, and what would decide it", undecided_lines(report)),
        *open_sections(report.undetermined, assumed, report.not_covered),
    )
    for heading, lines in sections:
        if lines:
            stream.write(f"### {heading}\n\n{bullets(lines)}\n")
