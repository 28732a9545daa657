"""The product of this step: every rule's answer on every subject that it applies to."""

from collections.abc import Mapping

from rulecheck.rulebook.rulebook import SwitchedOff
from rulecheck.values import Span, Unknown
from rulecheck.values.record import Record, field

HOLDS, BROKEN, UNDECIDED = "holds", "broken", "undecided"


class Excuse(Record):
    """A deviation that covers a broken rule: why, by whom, and until when (ISO date)."""

    reason: str
    accepted_by: str
    until: str


class Verdict(Record):
    """One rule's answer on one subject; the message is empty where the rule holds."""

    rule: str
    level: str
    verdict: str
    kind: str
    """The subject's kind."""
    subject: str
    parts: tuple[str, ...]
    nets: tuple[str, ...]
    message: str
    values: Mapping[str, object]
    missing: tuple[Unknown, ...]
    """The data that would decide an undecided verdict."""
    span: Span
    related: tuple[Span, ...] = ()
    excuse: Excuse | None = None
    fingerprint: str = ""


class Waiting(Record):
    """One missing datum and how many verdicts wait for it."""

    datum: Unknown
    checks: int
    alone: int
    """Of these, the verdicts that this datum alone would decide."""


class Tally(Record):
    holds: int
    broken: int
    undecided: int
    excused: int


class Verdicts(Record):
    netlist: str
    verdicts: tuple[Verdict, ...]
    waiting: tuple[Waiting, ...]
    """What undecided verdicts wait for, the datum that decides most first."""
    tally: Tally
    switched_off: tuple[SwitchedOff, ...] = field(default=())
