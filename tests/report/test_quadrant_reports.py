"""The quadrant table in its four forms, from hand-made results."""

import csv
import io
import json

import pytest

from rulecheck.report import (
    Look,
    quadrant_csv,
    quadrant_json,
    quadrant_markdown,
    quadrant_table,
)
from rulecheck.values import Interval, QuadrantSet, Unknown
from tests.report.examples import (
    MISSING_RATING,
    ONE,
    demand,
    direction,
    leg_result,
    rendered,
    result_row,
)

NOT_KNOWN = Unknown("current of L3", "set: {L3: {current: [LOW, HIGH]}}")
LACKING = result_row("Q3", has=ONE, reverse=direction(0.0, 0.0))
OPEN = result_row("Q4", demand("Q4", NOT_KNOWN, NOT_KNOWN, NOT_KNOWN))
WEAK = result_row("Q5", forward=direction(50.0))
UNRATED = result_row("Q6", forward=direction(MISSING_RATING))


def test_the_json_object_has_exactly_the_promised_keys_and_values():
    assert json.loads(rendered(quadrant_json.render, leg_result())) == {
        "netlist": "hut.cir",
        "positions": [
            {
                "name": "Q1",
                "parts": ["Q1"],
                "from": "BUS",
                "to": "SW",
                "demand": {
                    "off_voltage": [36.0, 58.0],
                    "on_current": [-86.0, 86.0],
                    "quadrants": ["I", "IV"],
                    "class": "current-bidirectional",
                },
                "capability": {
                    "quadrants": ["I", "IV"],
                    "class": "current-bidirectional",
                    "blocks": {"forward": 100.0, "reverse": 0.0},
                    "carries": {"forward": 120.0, "reverse": 120.0},
                },
                "covered": True,
            }
        ],
        "legs": [
            {
                "name": "SW",
                "kind": "half-bridge leg",
                "midpoint": "SW",
                "rails": ["BUS", "PGND"],
                "high": ["Q1"],
                "low": ["Q2"],
                "levels": 2,
            }
        ],
        "groups": [
            {"positions": ["Q1", "Q2"], "legal_states": 2},
            {"positions": ["Q8"], "legal_states": None},
        ],
        "undetermined": [
            {"what": "current of L3", "settle_with": "set: {L3: {current: [LOW, HIGH]}}"}
        ],
        "assumed": ["C12 read as a snubber of Q1"],
        "not_covered": ["the spike of the leakage inductance of T1"],
    }


def test_json_says_null_for_what_is_not_known_and_never_infinity():
    half = result_row("Q7", demand("Q7", Interval(0.0, float("inf")), Interval(-1.0, 1.0)))
    rows = json.loads(rendered(quadrant_json.render, leg_result(OPEN, UNRATED, half)))["positions"]
    assert rows[0]["demand"] == {
        "off_voltage": None,
        "on_current": None,
        "quadrants": None,
        "class": None,
    }
    assert rows[0]["covered"] is None
    assert rows[1]["capability"]["blocks"] == {"forward": None, "reverse": 0.0}
    assert rows[2]["demand"]["off_voltage"] == [0.0, None]


def test_csv_has_one_row_a_position_with_empty_cells_for_the_unknown():
    rows = list(
        csv.DictReader(io.StringIO(rendered(quadrant_csv.render, leg_result(LACKING, OPEN))))
    )
    assert [row["covered"] for row in rows] == ["no", "unknown"]
    assert rows[0]["missing"] == "IV"
    assert rows[1]["off voltage low (V)"] == ""


def test_csv_keeps_a_spreadsheet_from_computing_a_net_name():
    row = result_row()
    named = type(row)(
        type(row.position)("Q1", ("Q1",), "=1+1", "-24V", (), True, False, True, row.position.span),
        row.demand,
        row.capability,
    )
    cells = next(csv.DictReader(io.StringIO(rendered(quadrant_csv.render, leg_result(named)))))
    assert (cells["from"], cells["to"]) == ("'=1+1", "'-24V")


@pytest.mark.parametrize(
    ("row", "words"),
    [
        (result_row(), "covered"),
        (LACKING, "lacks IV"),
        (OPEN, "demand unknown"),
        (WEAK, "rating short"),
        (UNRATED, "rating unknown"),
    ],
)
@pytest.mark.parametrize("renderer", [quadrant_table, quadrant_markdown])
def test_human_tables_say_how_each_position_stands(row, words, renderer):
    assert words in rendered(renderer.render, leg_result(row))


@pytest.mark.parametrize("width", [60, 80, 100, 120, 160])
@pytest.mark.parametrize("in_ascii", [False, True])
def test_the_table_keeps_to_the_width(width, in_ascii):
    text = rendered(
        quadrant_table.render,
        leg_result(result_row(), LACKING, OPEN, WEAK, UNRATED),
        Look(width, in_ascii),
    )
    assert max(len(line) for line in text.splitlines()) <= width
    assert text.isascii() is in_ascii


def test_the_table_draws_needed_and_available_as_quadrant_blocks():
    text = rendered(quadrant_table.render, leg_result(LACKING))
    assert "▐ I+IV" in text
    assert "▝ I" in text


def test_only_the_missing_quadrant_is_in_colour():
    text = rendered(quadrant_table.render, leg_result(LACKING), Look(100, color=True))
    assert "\x1b[1;31mIV\x1b[0m" in text
    assert text.count("\x1b[1;31m") == 1
    assert "\x1b[1;31m" not in rendered(quadrant_table.render, leg_result(), Look(100, color=True))


@pytest.mark.parametrize("renderer", [quadrant_table, quadrant_markdown])
def test_human_tables_end_with_what_is_open_and_the_cautions(renderer):
    text = " ".join(rendered(renderer.render, leg_result()).replace("\\", "").split())
    for words in (
        "current of L3: set: {L3: {current: [LOW, HIGH]}}",
        "C12 read as a snubber of Q1",
        "the spike of the leakage inductance of T1",
        "no safety approval",
        "keep their charge",
        "licensed practice",
    ):
        assert words in text


def test_control_signs_in_names_never_reach_the_terminal():
    row = result_row("Q\x1b[31m1")
    assert "\x1b" not in rendered(quadrant_table.render, leg_result(row))


def test_markdown_cannot_be_broken_out_of_by_a_name():
    text = rendered(quadrant_markdown.render, leg_result(result_row("Q|<b>[x](y)")))
    assert "Q\\|\\<b\\>\\[x\\](y)" in text


def test_a_position_that_needs_nothing_shows_a_dash():
    text = rendered(
        quadrant_table.render, leg_result(result_row("Q1", demand("Q1", quadrants=QuadrantSet())))
    )
    assert "none" in text
