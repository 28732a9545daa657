"""Findings for a merge request or a document."""

from typing import TextIO

from rulecheck.report.cautions import CAUTIONS
from rulecheck.report.lint_lines import excuse_text
from rulecheck.report.lint_result import (
    Finding,
    LintReport,
    LintRun,
    tally_line,
    undecided_lines,
)
from rulecheck.report.look import PLAIN, Look
from rulecheck.report.markdown_text import bullets, escaped, heading_rule, row
from rulecheck.report.open_points import open_sections

_HEADER = ("level", "subject", "finding", "rule", "place")


def render(run: LintRun, stream: TextIO, look: Look = PLAIN) -> None:
    """Write a heading, a table of findings and the open points for each netlist."""
    for report in run.reports:
        stream.write(f"## {escaped(report.netlist)}: {tally_line(report.tally)}\n\n")
        _write_findings(report, stream)
        _write_open_points(report, stream, look)
    if run.switched_off:
        stream.write(f"### Rules switched off\n\n{bullets(run.switched_off)}\n")
    if not look.quiet:
        stream.write(f"{' '.join(CAUTIONS)}\n")


def _write_findings(report: LintReport, stream: TextIO) -> None:
    shown = (*report.broken, *report.excused)
    if not shown:
        stream.write("Nothing broken.\n\n")
        return
    stream.write(row(*_HEADER) + heading_rule(len(_HEADER)))
    for finding in shown:
        stream.write(row(*(escaped(cell) for cell in _cells(finding))))
    stream.write("\n")


def _cells(finding: Finding) -> tuple[str, ...]:
    level = "excused" if finding.excused else finding.level
    text = finding.message
    if finding.excused:
        text = f"{text} ({excuse_text(finding)})"
    elif finding.remedy:
        text = f"{text} To do: {finding.remedy}"
    return (level, finding.subject, text, finding.rule, str(finding.where))


def _write_open_points(report: LintReport, stream: TextIO, look: Look) -> None:
    waiting = undecided_lines(report)
    assumed = () if look.quiet else report.assumed
    sections = (
        ("Undecided, and what would decide it", waiting),
        *open_sections(report.undetermined, assumed, report.not_covered),
    )
    for heading, lines in sections:
        if lines:
            stream.write(f"### {heading}\n\n{bullets(lines)}\n")
