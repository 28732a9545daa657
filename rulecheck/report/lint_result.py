"""What the lint reports show: findings, the data that others wait for, and the tally."""

from collections.abc import Mapping
from dataclasses import dataclass

from rulecheck.demand import Undetermined
from rulecheck.values import Problem, Span, natural_key

LEVELS = ("error", "warning", "note")
"""From the gravest to the lightest, as SARIF names them."""


@dataclass(frozen=True, slots=True)
class Excuse:
    """A deviation: the broken rule is accepted, why, by whom, and until when (ISO date)."""

    reason: str
    accepted_by: str
    until: str


@dataclass(frozen=True, slots=True)
class Finding:
    """One rule's answer on one subject, other than `holds`."""

    rule: str
    level: str
    verdict: str
    """`broken` or `undecided`."""
    subject: str
    parts: tuple[str, ...]
    nets: tuple[str, ...]
    message: str
    values: Mapping[str, object]
    missing: tuple[Undetermined, ...]
    where: Span
    excuse: Excuse | None = None
    fingerprint: str = ""
    related: tuple[Span, ...] = ()
    remedy: str = ""

    @property
    def excused(self) -> bool:
        return self.excuse is not None

    @property
    def sentence(self) -> str:
        """The message, led by the subject unless it names it at once."""
        named = self.message.startswith(self.subject)
        return self.message if named else f"{self.subject}: {self.message}"


@dataclass(frozen=True, slots=True)
class RuleText:
    """A rule's manual page, as far as a report hands it on."""

    id: str
    level: str
    why: str
    remedy: str
    source: str


@dataclass(frozen=True, slots=True)
class Tally:
    holds: int
    broken: int
    undecided: int
    excused: int


@dataclass(frozen=True, slots=True)
class Wanted:
    """One missing datum and how many checks wait for it."""

    checks: int
    datum: str


@dataclass(frozen=True, slots=True)
class LintReport:
    """One netlist's answer."""

    netlist: str
    findings: tuple[Finding, ...]
    tally: Tally
    wanted: tuple[Wanted, ...] = ()
    undetermined: tuple[Undetermined, ...] = ()
    assumed: tuple[str, ...] = ()
    not_covered: tuple[str, ...] = ()
    remarks: tuple[Problem, ...] = ()
    """How doubtful cards were read."""

    @property
    def broken(self) -> tuple[Finding, ...]:
        return tuple(f for f in self.findings if f.verdict == "broken" and not f.excused)

    @property
    def undecided(self) -> tuple[Finding, ...]:
        return tuple(f for f in self.findings if f.verdict == "undecided")

    @property
    def excused(self) -> tuple[Finding, ...]:
        return tuple(f for f in self.findings if f.excused)


@dataclass(frozen=True, slots=True)
class LintRun:
    """The answers on all netlists of a run, and the rules that were asked."""

    reports: tuple[LintReport, ...]
    rules: tuple[RuleText, ...] = ()
    fail_at: str = "error"
    undecided_fails: bool = False
    switched_off: tuple[str, ...] = ()
    """Rules that a pack switched off, each with its reason."""

    def fails(self, finding: Finding) -> bool:
        """Whether this finding turns the run's exit status to 1."""
        if finding.excused:
            return False
        if finding.verdict == "undecided":
            return self.undecided_fails
        return LEVELS.index(finding.level) <= LEVELS.index(self.fail_at)

    @property
    def failed(self) -> bool:
        return any(self.fails(f) for report in self.reports for f in report.findings)


def in_order(findings: tuple[Finding, ...]) -> tuple[Finding, ...]:
    """Gravest first, then by place in the file, rule and subject."""
    return tuple(sorted(findings, key=_rank))


def _rank(finding: Finding) -> tuple[object, ...]:
    grade = LEVELS.index(finding.level)
    settled = finding.verdict != "broken" or finding.excused
    return (settled, grade, finding.where, finding.rule, natural_key(finding.subject))


def most_wanted(findings: tuple[Finding, ...]) -> tuple[Wanted, ...]:
    """The data that undecided checks wait for, the one that settles most first."""
    counts: dict[str, int] = {}
    for finding in findings:
        for settle in dict.fromkeys(item.settle_with for item in finding.missing):
            counts[settle] = counts.get(settle, 0) + 1
    order = sorted(counts, key=lambda datum: (-counts[datum], natural_key(datum)))
    return tuple(Wanted(counts[datum], datum) for datum in order)


def tally_line(tally: Tally) -> str:
    return (
        f"{tally.holds} hold, {tally.broken} broken, "
        f"{tally.undecided} undecided, {tally.excused} excused"
    )


def undecided_lines(report: LintReport) -> tuple[str, ...]:
    """What the undecided checks wait for; a check that cannot say stands for itself."""
    unexplained = tuple(
        f"{finding.rule} on {finding.subject}: {finding.message}"
        for finding in report.undecided
        if not finding.missing
    )
    return (*(wanted_line(item) for item in report.wanted), *unexplained)


def wanted_line(item: Wanted) -> str:
    checks = "1 check waits" if item.checks == 1 else f"{item.checks} checks wait"
    return f"{checks} for {item.datum}"
