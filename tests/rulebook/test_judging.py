"""Verdicts: three values, one message, what undecided ones wait for, deviations and records."""

import datetime

import pytest

from rulecheck.facts import Bounds
from rulecheck.reading import SourceText
from rulecheck.rulebook import (
    DeviationEntry,
    apply_deviations,
    judge,
    load_packs,
    new_since,
    read_deviations,
    read_record,
    record_text,
    unused_deviations,
)
from rulecheck.values import Interval, Limits, Problem, Span
from rulecheck.values.record import replace
from tests.rulebook.making import facts, missing, pack, subject

AT_LEAST_100 = Bounds(Interval(100.0, float("inf")), (missing("rating"),))
TODAY = datetime.date(2026, 12, 1)
PACK = """pack: team
parameters:
  share: {value: 0.8, source: team handbook}
rules:
  - id: margin
    subject: position
    level: warning
    graver: {level: error, when: asked-forward-voltage > blocks-forward}
    applies: needs-forward-blocking
    requires: asked-forward-voltage <= share * blocks-forward
    message: "{name} takes {asked-forward-voltage}, has {blocks-forward} ({source of share})"
    values: {needs: asked-forward-voltage, has: blocks-forward, range: off-voltage, gate: gated}
    why: w
    remedy: r
    source: common practice
    examples:
      - {expect: holds, netlist: "* none"}
      - {expect: broken, netlist: "* none"}
"""
RULEBOOK = load_packs([pack(PACK)])


def q(name, asked=58.0, blocks=100.0, needs=True):
    return subject("position", name, asked_forward_voltage=asked, blocks_forward=blocks,
                   needs_forward_blocking=needs, off_voltage=Interval(36.0, 58.0))  # fmt: skip


def verdicts(*subjects):
    return judge(RULEBOOK, facts(*subjects))


def test_the_pack_is_sound():
    assert RULEBOOK.problems == ()


@pytest.mark.parametrize(
    ("position", "expected"),
    [
        (q("Q1"), [("holds", "warning")]),
        (q("Q1", asked=90.0), [("broken", "warning")]),
        (q("Q1", asked=120.0), [("broken", "error")]),
        (q("Q1", asked=80.0), [("holds", "warning")]),
        (q("Q1", blocks=missing("rating")), [("undecided", "warning")]),
        (q("Q1", blocks=AT_LEAST_100), [("holds", "warning")]),
        (q("Q1", needs=False, asked=900.0), []),
        (q("Q1", needs=missing("voltage")), []),
        (q("Q1", needs=missing("voltage"), asked=90.0), [("undecided", "warning")]),
    ],
)
def test_each_verdict(position, expected):
    assert [(v.verdict, v.level) for v in verdicts(position).verdicts] == expected


def test_a_broken_verdict_says_everything_with_units():
    verdict = verdicts(q("Q1", asked=90.0)).verdicts[0]
    assert verdict.message == "Q1 takes 90 V, has 100 V (team handbook)"
    assert verdict.values == {"needs": 90.0, "has": 100.0, "range": (36.0, 58.0), "gate": False}
    assert (verdict.kind, verdict.subject, verdict.parts) == ("position", "Q1", ("Q1",))
    assert verdict.missing == ()


def test_an_undecided_verdict_says_what_it_waits_for():
    verdict = verdicts(q("Q1", blocks=missing("rating of Q1"))).verdicts[0]
    assert verdict.message == "not known: rating of Q1"
    assert verdict.missing == (missing("rating of Q1"),)
    assert verdict.values["has"] is None


def test_the_data_waited_for_are_merged_the_most_wanted_first():
    shared = missing("rating of FET")
    found = verdicts(
        q("Q1", blocks=shared), q("Q2", blocks=missing("rating of Q2")), q("Q3", blocks=shared),
        q("Q4", blocks=shared, asked=missing("voltage")),
    )  # fmt: skip
    assert [(w.datum.what, w.checks, w.alone) for w in found.waiting] == [
        ("rating of FET", 3, 2),
        ("rating of Q2", 1, 1),
        ("voltage", 1, 0),
    ]
    assert found.tally.undecided == 4


def deviation(**changes):
    entry = DeviationEntry(rule="margin", subject="Q1", reason="clamped", accepted_by="head")
    return replaced(entry, changes)


def replaced(entry, changes):
    fields = {name: getattr(entry, name) for name in entry.__struct_fields__}
    return DeviationEntry(**{**fields, **changes})


def read(*entries):
    spans = [Span("rulecheck.yaml", number) for number in range(1, len(entries) + 1)]
    return read_deviations(entries, spans, RULEBOOK)


@pytest.mark.parametrize("pattern", ["Q1", "q1", "Q*", "*"])
def test_a_deviation_excuses_what_it_names(pattern):
    judged = verdicts(q("Q1", asked=90.0), q("Q2"))
    known = read(deviation(subject=pattern, until="2027-06-30")).deviations
    excused = apply_deviations(judged, known, TODAY)
    assert (excused.tally.broken, excused.tally.excused, excused.tally.holds) == (0, 1, 1)
    excuse = excused.verdicts[0].excuse
    assert (excuse.reason, excuse.accepted_by, excuse.until) == ("clamped", "head", "2027-06-30")
    assert unused_deviations([excused], known, TODAY) == ()


def test_brackets_in_a_name_are_no_pattern():
    judged = verdicts(q("Q[1]", asked=90.0))
    excused = apply_deviations(judged, read(deviation(subject="Q[1]")).deviations, TODAY)
    assert excused.tally.excused == 1


@pytest.mark.parametrize("changes", [{"subject": "Q9"}, {"netlist": "other.cir"}])
def test_a_deviation_that_matches_nothing_is_a_finding(changes):
    judged = verdicts(q("Q1", asked=90.0))
    known = read(deviation(**changes)).deviations
    left = apply_deviations(judged, known, TODAY)
    assert left.tally.broken == 1
    (unused,) = unused_deviations([left], known, TODAY)
    assert (unused.rule, unused.level, unused.verdict) == ("deviation-unused", "warning", "broken")
    assert unused.span == Span("rulecheck.yaml", 1)


def test_a_deviation_for_one_netlist_may_name_its_path():
    judged = replace(verdicts(q("Q1", asked=90.0)), netlist="hut/battery.cir")
    for name in ("battery.cir", "hut/battery.cir", "hut/*"):
        known = read(deviation(netlist=name)).deviations
        assert apply_deviations(judged, known, TODAY).tally.excused == 1


def test_an_expired_deviation_excuses_nothing_and_is_a_finding():
    judged = verdicts(q("Q1", asked=90.0))
    known = read(deviation(until="2026-11-30")).deviations
    late = apply_deviations(judged, known, TODAY)
    assert [v.rule for v in late.verdicts if v.verdict == "broken"] == [
        "margin",
        "deviation-expired",
    ]
    assert late.tally.broken == 2
    assert unused_deviations([late], known, TODAY) == ()
    last_day = read(deviation(until="2026-12-01")).deviations
    assert apply_deviations(judged, last_day, TODAY).tally.excused == 1


def test_an_expired_deviation_that_covers_nothing_is_a_finding_of_the_run():
    runs = [replace(verdicts(q("Q1")), netlist=name) for name in ("a.cir", "b.cir")]
    known = read(deviation(until="2026-11-30")).deviations
    late = [apply_deviations(run, known, TODAY) for run in runs]
    assert [run.tally.broken for run in late] == [0, 0]
    assert [v.rule for v in unused_deviations(late, known, TODAY)] == ["deviation-expired"]


@pytest.mark.parametrize(
    ("changes", "what"),
    [
        ({"rule": "margins"}, "no rule 'margins'; did you mean 'margin'?"),
        ({"reason": " "}, "without 'reason'"),
        ({"accepted_by": ""}, "without 'accepted-by'"),
        ({"until": "30.6.2027"}, "'30.6.2027' is no date"),
    ],
)
def test_a_deviation_has_to_be_sound(changes, what):
    reading = read(deviation(**changes))
    assert reading.deviations == ()
    assert what in reading.problems[0].line()


def test_a_record_keeps_what_is_broken_and_only_the_new_counts_later():
    before = verdicts(q("Q1", asked=90.0), q("Q2"), q("Q3", blocks=missing("x")))
    known = read_record(SourceText("old.json", record_text([before])))
    assert not isinstance(known, Problem)
    assert new_since(known, "hut.cir", before.verdicts) == ()
    moved = replace(before.verdicts[0], span=Span("hut.cir", 99), message="other words")
    assert new_since(known, "./hut.cir", [moved]) == ()
    after = verdicts(q("Q1", asked=90.0), q("Q2", asked=90.0))
    assert [v.subject for v in new_since(known, "hut.cir", after.verdicts)] == ["Q2"]
    assert [v.subject for v in new_since(known, "other.cir", after.verdicts)] == ["Q1", "Q2"]


def test_an_excused_finding_is_not_recorded():
    judged = verdicts(q("Q1", asked=90.0))
    excused = apply_deviations(judged, read(deviation()).deviations, TODAY)
    known = read_record(SourceText("old.json", record_text([excused])))
    assert len(new_since(known, "hut.cir", judged.verdicts)) == 1


@pytest.mark.parametrize("text", ["", "[]", "{}", '{"format": "rulecheck record 1"}', "{" * 5000])
def test_what_is_no_record_is_a_problem(text):
    assert isinstance(read_record(SourceText("old.json", text)), Problem)


def test_fingerprints_tell_rule_kind_and_subject_apart():
    broken = verdicts(q("Q1", asked=90.0), q("Q2", asked=90.0)).verdicts
    assert len({v.fingerprint for v in broken}) == 2
    again = verdicts(q("q1", asked=120.0)).verdicts[0]
    assert again.fingerprint == broken[0].fingerprint


def test_a_rule_that_takes_too_many_steps_is_undecided_and_names_the_limit():
    parts = [subject("part", f"D{number}") for number in range(30)]
    names = tuple(part.name for part in parts)
    own = subject("position", "Q1", {"devices": names})
    condition = (
        "every a among devices has every b among devices has every c among devices has"
        ' (a.name = "D1" or a.name != "D1")'
    )
    book = load_packs([SourceText("p.rules.yaml", PACK_OF_ONE.format(condition=condition))])
    assert [verdict.verdict for verdict in judge(book, facts(own, *parts)).verdicts] == ["holds"]
    few = Limits((("condition-steps", 20_000),))
    (verdict,) = judge(book, facts(own, *parts), few).verdicts
    assert verdict.verdict == "undecided"
    assert "--limit condition-steps=N" in verdict.missing[0].settle


PACK_OF_ONE = """pack: p
rules:
  - id: r
    subject: position
    level: error
    requires: '{condition}'
    message: m
    why: w
    remedy: r
    source: s
    examples:
      - {{expect: holds, netlist: "* t"}}
      - {{expect: broken, netlist: "* t"}}
"""


@pytest.mark.parametrize("written", ["1e999", "1e999 V", "-1e999 V", ".5e400 %"])
def test_a_number_beyond_all_bounds_is_an_error_in_a_pack(written):
    condition = PACK_OF_ONE.format(condition=f"highest(off-voltage) / 1 V < {written}")
    value = PACK_OF_ONE.format(condition="yes")
    value += f"parameters: {{k: {{value: {written}, source: s}}}}"
    for text in (condition, value):
        problems = load_packs([SourceText("p.rules.yaml", text)]).problems
        assert any("what a number can hold" in problem.what for problem in problems)
