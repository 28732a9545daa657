"""The derivation for a name, from hand-made steps."""

import pytest

from rulecheck.report import Look, explain_text
from rulecheck.report.explain import explain, known_names
from tests.report.examples import rendered
from tests.report.stage_example import battery_leg


def explained(name: str, look: Look | None = None) -> str:
    look = look or Look(140)
    explanation = explain(name, *battery_leg(), look)
    assert explanation is not None
    return rendered(explain_text.render, explanation, look)


def test_a_position_says_what_it_must_do_why_and_what_it_can():
    text = explained("Q1")
    for words in (
        "Q1  switch position from BUS to SW  (leg.cir:14:1)",
        "Q1 (mosfet SW-N100-7)",
        "36 … 58 V",
        "while Q2 is on: v(bus), at v(bus) = 58 V",
        "±86 A",
        "while Q1 is on: i(L1), at i(L1) = -86 A",
        "mean supplies(battery); ±6 A of ripple in it; no DC current through the capacitors",
        "supplies(battery)",
        "▐ I+IV, current-bidirectional",
        "100 V, 58 V asked, 58 % of the rating, Q1 decides",
        "no: current flows freely that way",
        "rating unknown, 86 A asked",
        "ratings.current of part SW-N100-7",
        "covered, rating unknown",
        "SW, half-bridge leg on BUS, PGND",
        "2 legal states",
        "spikes of the loop inductance",
    ):
        assert words in text


def test_a_leg_lists_its_states_and_what_happens_beyond_them():
    text = explained("sw")
    for words in (
        "half-bridge leg, midpoint SW",
        "BUS, PGND",
        "20 kHz",
        "Q2, from 86 A against 58 V, when Q1 turns on",
        "with all gates off L1, BAT -> SW, 0 … 86 A, finds no free path",
    ):
        assert words in text


def test_an_inductor_says_where_its_current_comes_from_and_where_it_goes():
    text = explained("l1")
    assert "±86 A; mean supplies(battery)" in text
    assert "Q2" in text
    assert "therefore must carry ±86 A" in text


def test_any_other_part_says_its_role():
    assert "snubber of Q1" in explained("R7")


def test_a_part_shows_each_figure_and_who_stated_it():
    stage, capabilities, demands = battery_leg()
    assert "Q2" in known_names(stage, demands)
    assert explain("nothing", stage, capabilities, demands) is None


def test_a_port_shows_what_it_states():
    assert "42 … 58 V" in explained("battery")


@pytest.mark.parametrize("width", [60, 80, 120])
@pytest.mark.parametrize("name", ["Q1", "SW", "L1", "battery"])
def test_the_text_keeps_to_the_width(width, name):
    assert max(map(len, explained(name, Look(width)).splitlines())) <= width


def test_seven_bit_text_where_asked():
    assert explained("Q1", Look(100, ascii=True)).isascii()
