"""Hand-made findings of every verdict."""

from rulecheck.demand import Undetermined
from rulecheck.report.lint_result import (
    Excuse,
    Finding,
    LintReport,
    LintRun,
    RuleText,
    Tally,
    in_order,
    most_wanted,
)
from rulecheck.values import Span, note

RATING = Undetermined("blocking of Q2", "ratings.blocking of part SW-N100-7 (in hut.parts.yaml)")
BROKEN = Finding(
    "reverse-current-path",
    "error",
    "broken",
    "Q1",
    ("Q1", "D1"),
    ("BUS", "SW"),
    "Q1 must carry -86 A from BUS to SW but no drawn device can.",
    {"needs": -86.0, "has": 0.0, "path": ("Q1",), "limit": float("inf")},
    (),
    Span("hut.cir", 14, 3),
    fingerprint="ab12",
    related=(Span("hut.cir", 15),),
    remedy="add a diode from SW to BUS",
)
UNDECIDED = Finding(
    "blocking-rating",
    "error",
    "undecided",
    "Q2",
    ("Q2",),
    ("SW", "PGND"),
    "Q2 must block 58 V; its rating is not known.",
    {"needs": 58.0, "has": None},
    (RATING,),
    Span("hut.cir", 16),
)
EXCUSED = Finding(
    "unlike-devices",
    "warning",
    "broken",
    "SW",
    ("Q1", "Q2"),
    ("SW",),
    "the devices of the leg differ.",
    {},
    (),
    Span("hut.cir", 14),
    Excuse("last of the old stock", "the power group", "2027-06-30"),
)
RULES = (
    RuleText(
        "blocking-rating", "error", "It breaks down.", "Take a higher one.", "common practice"
    ),
    RuleText("reverse-current-path", "error", "It has no path.", "Add a diode.", "common practice"),
    RuleText("single-pin-net", "warning", "It is open.", "Connect it.", "common practice"),
    RuleText("unlike-devices", "warning", "They differ.", "Take the same.", "common practice"),
)


def lint_run(*findings: Finding, fail_at: str = "error", undecided_fails: bool = False) -> LintRun:
    shown = in_order(findings or (EXCUSED, UNDECIDED, BROKEN))
    report = LintReport(
        "hut.cir",
        shown,
        Tally(212, 1, 1, 1),
        most_wanted(shown),
        (Undetermined("current of L3", "set: {L3: {current: [LOW, HIGH]}}"),),
        ("C12 read as a snubber of Q1",),
        ("the spike of the leakage inductance of T1",),
        (note(Span("hut.cir", 3, 9), "'4k7' is read as 4.7k"),),
    )
    return LintRun((report,), RULES, fail_at, undecided_fails, ("stacking: not our job",))
