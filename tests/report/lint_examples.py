"""Hand-made findings of every verdict."""

from rulecheck.demand import Undetermined
from rulecheck.report.lint_result import LintReport, LintRun, in_order
from rulecheck.rulebook import Excuse, Rule, SwitchedOff, Tally, Verdict, Waiting
from rulecheck.rulebook.tree import Truth
from rulecheck.values import Span, Unknown, note
from rulecheck.values.record import replace

RATING = Unknown("blocking of Q2", "ratings.blocking of part SW-N100-7 (in hut.parts.yaml)")
BROKEN = Verdict(
    "reverse-current-path",
    "error",
    "broken",
    "position",
    "Q1",
    ("Q1", "D1"),
    ("BUS", "SW"),
    "Q1 must carry -86 A from BUS to SW but no drawn device can.",
    {"needs": -86.0, "has": 0.0, "path": ("Q1",), "limit": float("inf")},
    (),
    Span("hut.cir", 14, 3),
    (Span("hut.cir", 15),),
    None,
    "ab12",
)
UNDECIDED = replace(
    BROKEN,
    rule="blocking-rating",
    verdict="undecided",
    subject="Q2",
    message="Q2 must block 58 V; its rating is not known.",
    values={"needs": 58.0, "has": None},
    missing=(RATING,),
    span=Span("hut.cir", 16),
    related=(),
    fingerprint="cd34",
)
EXCUSED = replace(
    BROKEN,
    rule="unlike-devices",
    level="warning",
    kind="leg",
    subject="SW",
    message="the devices of the leg differ.",
    values={},
    span=Span("hut.cir", 14),
    related=(),
    excuse=Excuse("last of the old stock", "the power group", "2027-06-30"),
    fingerprint="ef56",
)


def rule(name: str, level: str) -> Rule:
    return Rule(
        id=name, subject="position", level=level, applies=None, requires=ANYTHING,
        graver_when=None, graver_level=level, message=(), values={}, why="It breaks down.",
        remedy=f"mend {name}", source="common practice", parameters={}, examples=(),
        pack="position", span=Span("position.rules.yaml", 1),
    )  # fmt: skip


ANYTHING = Truth(0, True)
RULES = (
    rule("blocking-rating", "error"),
    rule("reverse-current-path", "error"),
    rule("single-pin-net", "warning"),
    rule("unlike-devices", "warning"),
)


def lint_run(
    *findings: Verdict,
    fail_at: str = "error",
    undecided_fails: bool = False,
    recorded: frozenset[str] | None = None,
) -> LintRun:
    shown = in_order(findings or (EXCUSED, UNDECIDED, BROKEN))
    report = LintReport(
        "hut.cir",
        shown,
        Tally(212, 1, 1, 1),
        (Waiting(RATING, 1, 1),),
        (Undetermined("current of L3", "set: {L3: {current: [LOW, HIGH]}}"),),
        ("C12 read as a snubber of Q1",),
        ("the spike of the leakage inductance of T1",),
        (note(Span("hut.cir", 3, 9), "'4k7' is read as 4.7k"),),
        recorded,
    )
    off = SwitchedOff("stacking", "not our job", "hut", Span("hut.rules.yaml", 7))
    remedies = {rule.id: rule.remedy for rule in RULES}
    return LintRun((report,), RULES, fail_at, undecided_fails, (off,), remedies)
