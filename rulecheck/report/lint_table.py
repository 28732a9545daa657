"""Findings on a terminal: each with its place, its rule and what to do."""

from typing import TextIO

from rich.console import Console
from rich.text import Text

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
from rulecheck.report.one_line import visible
from rulecheck.report.open_points import open_sections
from rulecheck.report.styles import console_for, hanging
from rulecheck.report.terminal_sections import print_cautions, print_sections
from rulecheck.rulebook import Verdict

_LEVEL_WIDTH = len("undecided")


def render(run: LintRun, stream: TextIO, look: Look = PLAIN) -> None:
    """Print each netlist's findings, gravest first, then what is open, and the tally."""
    console = console_for(stream, look)
    for number, report in enumerate(run.reports):
        if number:
            console.print()
        _print_report(console, run, report, look)
    sections = (
        ("Not analysed", tuple(unusable_line(netlist) for netlist in run.unusable)),
        ("Rules switched off", tuple(off_line(off) for off in run.switched_off)),
    )
    print_sections(console, sections, look)
    if not look.quiet:
        print_cautions(console, look)


def _print_report(console: Console, run: LintRun, report: LintReport, look: Look) -> None:
    title = f"{report.netlist}: {tally_line(report.tally)}"
    console.print(Text(visible(title, look), style="heading"), soft_wrap=True)
    for finding in report.broken:
        word = "recorded" if report.is_recorded(finding) else finding.level
        _print_finding(console, finding, word, run.remedies.get(finding.rule, ""), look)
    for finding in report.excused:
        _print_finding(console, finding, "excused", excuse_text(finding), look)
    print_sections(console, _sections(report, look), look)


def _print_finding(console: Console, finding: Verdict, word: str, advice: str, look: Look) -> None:
    head = Text().append(f"{word:<{_LEVEL_WIDTH}} ", style=f"finding.{word}")
    head.append(visible(f"{finding.subject}  {finding.rule}", look), style="heading")
    place = visible(str(finding.span), look)
    room = look.width - head.cell_len - len(place)
    head.append(
        f"  {place}" if room >= 2 else f"\n{' ' * (_LEVEL_WIDTH + 1)}{place}", style="place"
    )
    console.print()
    console.print(head, soft_wrap=True)
    margin = " " * (_LEVEL_WIDTH + 1)
    hanging(console, margin, finding.message, look)
    if advice:
        hanging(console, f"{margin}{'' if finding.excuse else 'to do: '}", advice, look)


def _sections(report: LintReport, look: Look) -> tuple[tuple[str, tuple[str, ...]], ...]:
    assumed = () if look.quiet else report.assumed
    remarks = () if look.quiet else tuple(problem.line() for problem in report.remarks)
    return (
        *changed_sections(report),
        ("Undecided, and what would decide it", undecided_lines(report)),
        *open_sections(report.undetermined, assumed, report.not_covered),
        ("Remarks on the reading", remarks),
    )
