"""Deviations: broken rules that somebody accepted, for a reason, perhaps until a day.

    {rule: blocking-rating, subject: "Q*", reason: "clamped at 80 V", accepted-by: head of power}

A deviation that matches nothing, or whose day is past, is a finding itself.
"""

import datetime
import difflib
import fnmatch
from collections.abc import Iterable, Sequence

from rulecheck.rulebook.deviation_file import DeviationEntry
from rulecheck.rulebook.fingerprint import fingerprint_of
from rulecheck.rulebook.rulebook import Rulebook
from rulecheck.rulebook.verdicts import BROKEN, Excuse, Verdict, Verdicts
from rulecheck.rulebook.waiting import tally_of
from rulecheck.values import Problem, Span, error
from rulecheck.values.record import Record, replace

UNUSED, EXPIRED = "deviation-unused", "deviation-expired"
LEVEL = "warning"


class Deviation(Record):
    rule: str
    subject: str
    """A name or pattern, compared without regard to case."""
    reason: str
    accepted_by: str
    until: datetime.date | None
    netlist: str
    """A name or pattern; `*` for all."""
    span: Span

    def expired(self, today: datetime.date) -> bool:
        return self.until is not None and today > self.until

    def covers(self, netlist: str, verdict: Verdict) -> bool:
        return (
            verdict.verdict == BROKEN
            and verdict.rule == self.rule
            and _fits(self.subject, verdict.subject)
            and self.belongs_to(netlist)
        )

    def belongs_to(self, netlist: str) -> bool:
        name = netlist.replace("\\", "/")
        return _fits(self.netlist, name) or _fits(self.netlist, name.rpartition("/")[2])


def _fits(pattern: str, name: str) -> bool:
    """The very name, or the pattern; brackets in a name are no pattern."""
    plain, wanted = name.casefold(), pattern.casefold()
    return plain == wanted or fnmatch.fnmatchcase(plain, wanted.replace("[", "[[]"))


class DeviationReading(Record):
    deviations: tuple[Deviation, ...]
    problems: tuple[Problem, ...]


def read_deviations(
    entries: Sequence[DeviationEntry], spans: Sequence[Span], rulebook: Rulebook
) -> DeviationReading:
    """Check the entries of a project file, each with its place, against the rules in force."""
    known = {rule.id for rule in rulebook.rules} | {off.rule for off in rulebook.switched_off}
    deviations: list[Deviation] = []
    problems: list[Problem] = []
    for entry, span in zip(entries, spans, strict=True):
        flaw = _flaw(entry, span, known)
        if flaw is None:
            deviations.append(_deviation(entry, span))
        else:
            problems.append(flaw)
    return DeviationReading(tuple(deviations), tuple(problems))


def _flaw(entry: DeviationEntry, span: Span, known: Iterable[str]) -> Problem | None:
    if entry.rule not in known:
        close = difflib.get_close_matches(entry.rule, sorted(known), 1)
        remedy = f"did you mean '{close[0]}'?" if close else "`rulecheck rules` lists all of them"
        return error(span, f"no rule '{entry.rule}'", remedy)
    for key, text in (("reason", entry.reason), ("accepted-by", entry.accepted_by)):
        if not text.strip():
            return error(span, f"a deviation from '{entry.rule}' without '{key}'", "write it")
    if entry.until is not None and _date(entry.until) is None:
        return error(span, f"'{entry.until}' is no date", "write it as 2027-06-30")
    return None


def _date(text: str) -> datetime.date | None:
    try:
        return datetime.date.fromisoformat(text)
    except ValueError:
        return None


def _deviation(entry: DeviationEntry, span: Span) -> Deviation:
    until = None if entry.until is None else _date(entry.until)
    netlist = entry.netlist or "*"
    return Deviation(
        entry.rule, entry.subject, entry.reason, entry.accepted_by, until, netlist, span
    )


def apply_deviations(
    verdicts: Verdicts, deviations: Sequence[Deviation], today: datetime.date
) -> Verdicts:
    """Excuse what valid deviations cover; an expired one that would is a finding here."""
    valid = [deviation for deviation in deviations if not deviation.expired(today)]
    judged = tuple(_excused(verdicts.netlist, v, valid) for v in verdicts.verdicts)
    late = tuple(
        _expired(deviation)
        for deviation in deviations
        if deviation.expired(today) and _covers_any(deviation, verdicts)
    )
    everything = (*judged, *late)
    return replace(verdicts, verdicts=everything, tally=tally_of(everything))


def _excused(netlist: str, verdict: Verdict, deviations: Sequence[Deviation]) -> Verdict:
    for deviation in deviations:
        if deviation.covers(netlist, verdict):
            until = deviation.until.isoformat() if deviation.until else ""
            excuse = Excuse(deviation.reason, deviation.accepted_by, until)
            return replace(verdict, excuse=excuse)
    return verdict


def unused_deviations(
    runs: Sequence[Verdicts], deviations: Sequence[Deviation], today: datetime.date
) -> tuple[Verdict, ...]:
    """Deviations that cover nothing in any of the netlists of a run, as findings."""
    return tuple(
        _expired(deviation) if deviation.expired(today) else _unused(deviation)
        for deviation in deviations
        if not any(_covers_any(deviation, run) for run in runs)
    )


def _covers_any(deviation: Deviation, run: Verdicts) -> bool:
    return any(deviation.covers(run.netlist, verdict) for verdict in run.verdicts)


def _expired(deviation: Deviation) -> Verdict:
    until = deviation.until.isoformat() if deviation.until else ""
    message = (
        f"the deviation from {deviation.rule} on {deviation.subject} ended on {until}; "
        "settle the finding, or have it accepted anew"
    )
    return _finding(EXPIRED, deviation, message)


def _unused(deviation: Deviation) -> Verdict:
    message = (
        f"the deviation from {deviation.rule} on {deviation.subject} excuses nothing; delete it"
    )
    return _finding(UNUSED, deviation, message)


def _finding(rule: str, deviation: Deviation, message: str) -> Verdict:
    name = f"{deviation.rule} on {deviation.subject}"
    mark = fingerprint_of(rule, "deviation", name)
    return Verdict(
        rule,
        LEVEL,
        BROKEN,
        "deviation",
        name,
        (),
        (),
        message,
        {},
        (),
        deviation.span,
        (),
        None,
        mark,
    )
