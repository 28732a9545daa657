"""Facts of small stages: what a rule reads there, and what is unknown with what settles it."""

from pathlib import Path

import pytest

from rulecheck.facts import VOCABULARY, Bounds, Facts, Form, facts_text, vocabulary_text
from rulecheck.pipeline import Analysis, analyse, analyse_text
from rulecheck.reading import SourceText
from rulecheck.values import Interval, Unknown
from tests.facts.checking import flaws_of

CIRCUITS = Path(__file__).resolve().parent.parent / "circuits"
LEG = """* battery leg
C1 BAT 0 470u
L1 BAT SW 33u current=150
M1 BUS G1 SW SW FET blocking=200 current=120
M2 SW G2 0 0 FET blocking=200 current=120
C2 BUS 0 470u
.model FET NMOS
"""
SHEET = """ports:
  battery: {between: [BAT, 0], voltage: [42 V, 58 V], supplies: [-80 A, 80 A]}
  bus: {between: [BUS, 0], voltage: [90 V, 120 V]}
switching: {frequency: 50 kHz, dead-time: 300 ns}
"""


def facts_of(netlist: str, sheet: str = SHEET, parts: str = "") -> Facts:
    extra = [SourceText("hut.parts.yaml", parts)] if parts else []
    analysis = analyse_text(
        SourceText("hut.cir", netlist), SourceText("hut.stage.yaml", sheet), extra
    )
    assert isinstance(analysis, Analysis)
    return analysis.facts


def value(facts: Facts, kind: str, name: str, field: str):
    return facts.by_name[kind, name].values[field]


@pytest.mark.parametrize(
    "netlist",
    [
        "sound/battery-leg-380.cir", "sound/matrix-selector.cir", "sound/dual-active-bridge.cir",
        "sound/vienna-rectifier.cir", "sound/hut-power-board.cir", "faulty/buck-without-diode.cir",
        "faulty/module-undescribed.cir", "faulty/tie-exported-source-first.cir",
    ],
)  # fmt: skip
def test_every_subject_has_what_the_vocabulary_says(netlist):
    analysis = analyse(CIRCUITS / netlist)
    assert isinstance(analysis, Analysis)
    assert flaws_of(analysis.facts) == []


def test_the_vocabulary_explains_every_field_once():
    for term in VOCABULARY.values():
        names = [item.name for item in (*term.fields, *term.links)]
        assert len(set(names)) == len(names)
        for item in (*term.fields, *term.links):
            assert item.sentence.endswith(".")
            assert len(item.sentence) > 8
        assert all(link.to in VOCABULARY for link in term.links)
    listing = vocabulary_text()
    assert "blocks-forward" in listing
    assert all(f"\n{name}: " in f"\n{listing}" for name in VOCABULARY)


def test_a_position_of_a_leg():
    facts = facts_of(LEG)
    assert flaws_of(facts) == []
    expected = {
        "from": "BUS", "to": "SW", "gated": True, "needs": ("I", "IV"), "has": ("I", "IV"),
        "off-voltage": Interval(90.0, 120.0), "asked-forward-voltage": 120.0,
        "asked-reverse-voltage": 0.0, "needs-forward-blocking": True,
        "needs-reverse-blocking": False, "needs-reverse-current": True, "blocks-forward": 200.0,
        "freewheels-reverse": True, "freewheels-forward": False, "turned": False, "tied": False,
        "forward-voltage-state": "the state with M2 on", "series-devices": 1.0,
        "parallel-devices": 1.0, "forward-blocking-kinds": ("mosfet",), "gate-nets": 1.0,
    }  # fmt: skip
    own = facts.by_name["position", "M1"].values
    assert {name: own[name] for name in expected} == expected
    assert facts.by_name["position", "M1"].links["legs"] == ("SW",)
    assert facts.by_name["leg", "SW"].links["high"] == ("M1",)


def test_ripple_counts_into_what_is_asked():
    # 90 V... 120 V against 42...58 V at 50 kHz and 33 uH: V d (1-d) / 2 f L, largest at 58/120
    ripple = 58.0 * (1.0 - 58.0 / 120.0) / (2.0 * 33e-6 * 50e3)
    asked = value(facts_of(LEG), "position", "M1", "asked-reverse-current")
    assert asked == pytest.approx(80.0 + ripple, rel=0.01)


def test_unrated_devices_say_where_a_rating_would_be_written():
    bare = LEG.replace(" blocking=200 current=120", "")
    rating = value(facts_of(bare), "position", "M1", "blocks-forward")
    assert isinstance(rating, Bounds)
    assert rating.range.low == 0.0
    assert [item.settle for item in rating.missing] == [
        "ratings.blocking of part FET (in a parts file)"
    ]


def test_currents_that_nobody_states_are_open_and_say_what_settles_them():
    sheet = SHEET.replace(", supplies: [-80 A, 80 A]", "")
    asked = value(facts_of(LEG, sheet), "position", "M1", "asked-forward-current")
    assert isinstance(asked, Bounds)
    assert asked.missing


def test_part_data_reach_the_part():
    parts = """parts:
  FET:
    kind: mosfet
    ratings: {gate: [-20 V, 20 V], peak-current: 400 A}
    gate: {threshold: [2 V, 4 V]}
    diode: {recovery-time: 60 ns}
"""
    facts = facts_of(LEG, parts=parts)
    assert value(facts, "part", "M1", "gate-rating") == Interval(-20.0, 20.0)
    assert value(facts, "part", "M1", "threshold") == Interval(2.0, 4.0)
    assert value(facts, "part", "M1", "recovery-time") == pytest.approx(60e-9)
    assert value(facts, "position", "M1", "peak-current") == 400.0


def test_gates_on_one_net():
    facts = facts_of(LEG.replace("SW G2", "SW G1"))
    assert value(facts, "leg", "SW", "gates-joined") is True
    assert value(facts, "leg", "SW", "joined-gates") == ("G1",)
    assert value(facts, "gate-drive", "G1", "gates") == 2.0
    assert facts.by_name["gate-drive", "G1"].links["positions"] == ("M1", "M2")


def test_a_gate_is_traced_back_to_its_driver():
    driven = LEG.replace(".model", "X1 VCC 0 IN H DR-1\nR1 H N1 2\nR2 N1 G2 2\n.model")
    parts = """parts:
  DR-1:
    kind: driver
    pins: [supply, ground, input, output]
    driver: {supply: [10 V, 18 V]}
"""
    facts = facts_of(driven, parts=parts)
    assert value(facts, "gate-drive", "G2", "driven-by") == "driver"
    assert value(facts, "gate-drive", "G2", "driver") == "X1"
    voltage = value(facts, "gate-drive", "G2", "drive-voltage")
    assert isinstance(voltage, Bounds)
    assert voltage.range == Interval(10.0, 18.0)
    assert value(facts, "gate-drive", "G1", "driven-by") == ""
    assert value(facts, "gate-drive", "G1", "driven") is False


def test_devices_side_by_side_and_in_series():
    wide = LEG.replace("C2 BUS", "M3 BUS G1 SW SW FETB blocking=200 current=60\nC2 BUS")
    facts = facts_of(wide + ".model FETB NMOS\n")
    assert value(facts, "position", "M1", "parallel-devices") == 2.0
    assert value(facts, "position", "M1", "parallel-alike") is False
    assert value(facts, "position", "M1", "rated-forward-current") == 180.0
    string = LEG.replace("M1 BUS G1 SW", "M3 BUS G3 X X FET blocking=200 current=120\nM1 X G1 SW")
    long = facts_of(string.replace("SW SW FET", "SW SW FET", 1))
    assert value(long, "position", "M1", "series-devices") == 2.0
    assert value(long, "position", "M1", "shared-voltage") is False
    shared = facts_of(string.replace("C2", "R1 BUS X 100k\nR2 X SW 100k\nC2"))
    assert value(shared, "position", "M1", "shared-voltage") is True


@pytest.mark.parametrize(
    ("first", "second", "alike"),
    [
        ("current=60", "current=60", True),
        ("current=60", "current=30", False),
        ("current=60 m=3", "current=60", True),
        ("current=60 m=2", "current=120", False),
        ("current=60", "", True),
    ],
)
def test_ratings_on_the_cards_tell_devices_side_by_side_apart(first: str, second: str, alike: bool):
    pair = f"M1 BUS G1 SW SW FET blocking=200 {first}\nM3 BUS G1 SW SW FET blocking=200 {second}"
    facts = facts_of(LEG.replace("M1 BUS G1 SW SW FET blocking=200 current=120", pair))
    assert value(facts, "position", "M1", "parallel-alike") is alike


def test_blocking_ratings_tell_devices_side_by_side_apart():
    pair = LEG.replace("C2 BUS", "M3 BUS G1 SW SW FET blocking=150 current=120\nC2 BUS")
    assert value(facts_of(pair), "position", "M1", "parallel-alike") is False


def test_without_states_nobody_knows_the_legs():
    facts = facts_of(LEG.replace("M1 BUS G1 SW SW FET blocking=200 current=120\n", ""))
    assert value(facts, "group", "M2", "analysed") is False
    assert "L1" in value(facts, "group", "M2", "why-not")
    assert isinstance(facts.by_name["position", "M2"].links["legs"], Unknown)


def test_nets_islands_and_grounds():
    facts = facts_of(LEG + "R8 X1 X2 10k\nC8 X1 X2 1n\nR9 BUS LOST 1k\n")
    assert value(facts, "net", "X1", "island-head") is True
    assert value(facts, "net", "X1", "island-grounded") is False
    assert value(facts, "net", "X1", "island-nets") == 2.0
    assert value(facts, "net", "BUS", "island-grounded") is True
    assert value(facts, "net", "LOST", "pins") == 1.0
    assert value(facts, "net", "BUS", "pins") == 4.0
    assert value(facts, "stage", "stage", "grounds") == ("0",)


@pytest.mark.parametrize(
    ("card", "unit", "fits", "misleading"),
    [
        ("R1 BUS SENSE 47k", "", True, False),
        ("R1 BUS SENSE 1M", "", True, True),
        ("R1 BUS SENSE 1MEG", "", True, False),
        ("R1 BUS SENSE 1m", "", True, False),
        ("R1 BUS SENSE 10ohm", "ohm", True, False),
        ("R1 BUS SENSE 10uH", "H", False, False),
        ("R1 BUS SENSE SHUNT", "", True, False),
        ("C9 BUS 0 1F", "", True, True),
        ("C9 BUS 0 1uF", "F", True, False),
        ("C9 BUS 0 10uH", "H", False, False),
        ("L9 BUS OUT 10uF", "F", False, False),
        ("L9 BUS OUT 10u", "", True, False),
    ],
)
def test_values_as_written(card, unit, fits, misleading):
    facts = facts_of(LEG + card + "\n")
    name = card.split()[0]
    read = [
        value(facts, "part", name, f) for f in ("written-unit", "unit-fits", "misleading-scale")
    ]
    assert read == [unit, fits, misleading]


def test_elements_that_could_not_be_read_are_parts_that_are_not_understood():
    facts = facts_of(LEG + "C7\n")
    assert value(facts, "part", "C7", "understood") is False
    assert flaws_of(facts) == []


def test_namesakes_are_counted():
    facts = facts_of(LEG + "C2 BUS 0 10u\n")
    assert value(facts, "part", "C2", "namesakes") == 1.0


def test_the_text_is_canonical_and_complete():
    facts = facts_of(LEG)
    text = facts_text(facts)
    assert text == facts_text(facts_of(LEG))
    assert (
        "position M1\n  from: BUS\n  to: SW\n  gated: yes\n  off-voltage: 90 V ... 120 V\n" in text
    )
    fields = sum(len(VOCABULARY[subject.kind].fields) for subject in facts)
    assert text.count(": ") + text.count(":\n") >= fields


def test_a_stage_whose_devices_are_all_turned():
    turned = LEG.replace("M1 BUS G1 SW SW", "M1 SW G1 BUS BUS").replace(
        "M2 SW G2 0 0", "M2 0 G2 SW SW"
    )
    facts = facts_of(turned)
    assert value(facts, "stage", "stage", "pin-order-suspect") is True
    assert value(facts, "stage", "stage", "suspect-models") == ("FET",)
    assert value(facts, "position", "M1", "all-turned") is True
    one = facts_of(LEG.replace("M2 SW G2 0 0", "M2 0 G2 SW SW"))
    assert value(one, "stage", "stage", "pin-order-suspect") is False


def test_a_range_keeps_its_form():
    assert all(
        field.form in (Form.NUMBER, Form.RANGE) or not field.dimension.value
        for term in VOCABULARY.values()
        for field in term.fields
    )
