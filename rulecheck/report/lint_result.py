"""What the lint reports show: findings, the data that others wait for, and the tally."""

import re
from collections.abc import Iterable, Mapping

from rulecheck.demand import Demands, Undetermined
from rulecheck.report.changes import Changes, change_lines
from rulecheck.report.quadrant_result import assumptions, open_questions, what_is_not_covered
from rulecheck.rulebook import Rule, SwitchedOff, Tally, Verdict, Verdicts, Waiting
from rulecheck.stage import Stage
from rulecheck.values import Gravity, Problem, natural_key
from rulecheck.values.record import Record, field

LEVELS = ("error", "warning", "note")
"""From the gravest to the lightest, as SARIF names them."""
_OF_A_CARD = re.compile(r"(.* of the card )(\S+ \(.*\))", re.DOTALL)


class LintReport(Record):
    """One netlist's answer."""

    netlist: str
    findings: tuple[Verdict, ...]
    """Every verdict but `holds`, gravest first."""
    tally: Tally
    waiting: tuple[Waiting, ...] = ()
    undetermined: tuple[Undetermined, ...] = ()
    assumed: tuple[str, ...] = ()
    not_covered: tuple[str, ...] = ()
    remarks: tuple[Problem, ...] = ()
    """How doubtful cards were read."""
    recorded: frozenset[str] | None = None
    """With a record at hand: the fingerprints of findings that it has, which fail no run."""
    changes: Changes | None = None
    """With an earlier netlist at hand: what changed since."""

    @property
    def broken(self) -> tuple[Verdict, ...]:
        return tuple(f for f in self.findings if f.verdict == "broken" and f.excuse is None)

    @property
    def undecided(self) -> tuple[Verdict, ...]:
        return tuple(f for f in self.findings if f.verdict == "undecided")

    @property
    def excused(self) -> tuple[Verdict, ...]:
        return tuple(f for f in self.findings if f.excuse is not None)

    def is_recorded(self, finding: Verdict) -> bool:
        return self.recorded is not None and finding.fingerprint in self.recorded


class LintRun(Record):
    """The answers on all netlists of a run, and the rules that were asked."""

    reports: tuple[LintReport, ...]
    rules: tuple[Rule, ...] = ()
    fail_at: str = "error"
    undecided_fails: bool = False
    switched_off: tuple[SwitchedOff, ...] = ()
    remedies: Mapping[str, str] = field(default_factory=dict)
    """By rule: what to do."""
    unusable: tuple[str, ...] = ()
    """Netlists that could not be analysed at all: nothing is known of them."""

    def fails(self, report: LintReport, finding: Verdict) -> bool:
        """Whether this finding turns the run's exit status to 1."""
        if finding.excuse is not None or report.is_recorded(finding):
            return False
        if finding.verdict == "undecided":
            return self.undecided_fails
        return LEVELS.index(finding.level) <= LEVELS.index(self.fail_at)

    @property
    def failed(self) -> bool:
        return any(self.fails(report, f) for report in self.reports for f in report.findings)


class OpenPoints(Record):
    """What the analysis of a netlist left open, took on trust or found doubtful to read."""

    undetermined: tuple[Undetermined, ...]
    assumed: tuple[str, ...]
    not_covered: tuple[str, ...]
    remarks: tuple[Problem, ...]


def open_points(stage: Stage, demands: Demands, problems: tuple[Problem, ...]) -> OpenPoints:
    """Gather them from the steps' products; of the problems the notes, as remarks."""
    return OpenPoints(
        open_questions(stage, demands),
        assumptions(stage, demands),
        what_is_not_covered(stage, demands),
        tuple(problem for problem in problems if problem.gravity is Gravity.NOTE),
    )


def lint_report(
    verdicts: Verdicts, points: OpenPoints, recorded: frozenset[str] | None = None
) -> LintReport:
    """What a report on one netlist shows."""
    return LintReport(
        verdicts.netlist,
        in_order(verdict for verdict in verdicts.verdicts if verdict.verdict != "holds"),
        verdicts.tally,
        verdicts.waiting,
        points.undetermined,
        points.assumed,
        points.not_covered,
        points.remarks,
        recorded,
    )


def in_order(findings: Iterable[Verdict]) -> tuple[Verdict, ...]:
    """What is broken first, gravest first, then by place in the file, rule and subject."""
    return tuple(sorted(findings, key=_rank))


def _rank(finding: Verdict) -> tuple[object, ...]:
    settled = finding.verdict != "broken" or finding.excuse is not None
    grade = LEVELS.index(finding.level)
    return (settled, grade, finding.span, finding.rule, natural_key(finding.subject))


def sentence(finding: Verdict) -> str:
    """The message, led by the subject unless it names it at once."""
    named = finding.message.startswith(finding.subject)
    return finding.message if named else f"{finding.subject}: {finding.message}"


def undecided_lines(report: LintReport) -> tuple[str, ...]:
    """What the undecided checks wait for; a check that cannot say stands for itself."""
    unexplained = tuple(
        f"{finding.rule} on {finding.subject}: {finding.message}"
        for finding in report.undecided
        if not finding.missing
    )
    return (*waiting_lines(report.waiting), *unexplained)


def waiting_lines(waiting: Iterable[Waiting]) -> tuple[str, ...]:
    """What checks wait for; the same datum of several cards is one line."""
    checks: dict[str, int] = {}
    cards: dict[str, list[str]] = {}
    for item in waiting:
        match = _OF_A_CARD.fullmatch(item.datum.settle)
        datum, card = (match[1], match[2]) if match else (item.datum.settle, "")
        checks[datum] = checks.get(datum, 0) + item.checks
        cards.setdefault(datum, []).append(card)
    return tuple(_waiting_line(checks[datum], datum, cards[datum]) for datum in checks)


def _waiting_line(checks: int, datum: str, cards: list[str]) -> str:
    lead = "1 check waits for" if checks == 1 else f"{checks} checks wait for"
    return f"{lead} {datum}{', '.join(cards)}"


def changed_sections(report: LintReport) -> tuple[tuple[str, tuple[str, ...]], ...]:
    """Headings with lines of what changed; nothing where nothing was compared."""
    changes = report.changes
    if changes is None:
        return ()
    if not changes.groups:
        return ((f"Changed since {changes.old}", ("nothing",)),)
    return tuple(
        (f"Changed since {changes.old}: {heading[0].lower()}{heading[1:]}", lines)
        for heading, lines in change_lines(changes)
    )


def unusable_line(netlist: str) -> str:
    return f"{netlist} could not be analysed: nothing in it was checked"


def off_line(off: SwitchedOff) -> str:
    return f"{off.rule}, by {off.pack}: {off.reason}"


def tally_line(tally: Tally) -> str:
    return (
        f"{tally.holds} hold, {tally.broken} broken, "
        f"{tally.undecided} undecided, {tally.excused} excused"
    )


def excuse_text(finding: Verdict) -> str:
    """Who accepted the deviation, why, and until when."""
    excuse = finding.excuse
    if excuse is None:
        return ""
    until = f", until {excuse.until}" if excuse.until else ""
    return f"accepted by {excuse.accepted_by}{until}: {excuse.reason}"
