"""Parts files: what they state, which entry fits, and how their mistakes are reported."""

import msgspec
import pytest

from rulecheck.parts import Datum, Kind, Part, PartDataFile, read_part_data
from rulecheck.parts.figures import FIGURES, SECTIONS
from rulecheck.parts.part_data_file import PartEntry
from rulecheck.reading import SourceText
from rulecheck.values import Dimension, Interval, Span
from tests.kit.parts import card, identified, model

FULL = """\
parts:
  "SW-N100-*":
    kind: mosfet
    pins: [drain, gate, source]
    ratings: {blocking: 100 V, current: 120 A, peak-current: 480 A, gate: [-20 V, 20 V]}
    gate: {charge: 90 nC, threshold: [2 V, 4 V], miller-capacitance: 40 pF}
    diode: {recovery-charge: 110 nC, recovery-time: 60 ns}
"""


def problems(text: str) -> list[str]:
    return [p.line() for p in read_part_data([SourceText("hut.parts.yaml", text)]).problems]


def part(text: str, *nets: str, entry: str = FULL) -> Part:
    return identified([card("M1", " ".join(nets), text)], entry).parts[0]


def test_part_data_gives_kind_pins_and_figures() -> None:
    found = part("sw-n100-7", "BUS", "G", "SW", "SW")
    assert (found.kind, found.net("drain"), found.net("source")) == (Kind.MOSFET, "BUS", "SW")
    where = Span("hut.parts.yaml", 5, 15)
    origin = "part data SW-N100-*"
    assert found.data["ratings.blocking"] == Datum(100.0, Dimension.VOLTAGE, origin, where)
    assert found.data["gate.threshold"].value == Interval(2.0, 4.0)
    assert found.data["diode.recovery-time"].value == 60e-9
    assert found.settle_in == "part SW-N100-* (in hut.parts.yaml)"


def test_what_is_missing_says_where_to_write_it() -> None:
    assert part("SW-N100-7", "D", "G", "S").missing("ratings.reverse-blocking").settle == (
        "ratings.reverse-blocking of part SW-N100-* (in hut.parts.yaml)"
    )


def test_the_key_with_most_literal_text_wins() -> None:
    more = FULL + '  "SW-N100-7": {kind: p-mosfet}\n  "SW-*": {kind: gan-hemt}\n'
    assert part("SW-N100-7", "D", "G", "S", entry=more).kind is Kind.P_MOSFET
    assert part("SW-N100-8", "D", "G", "S", entry=more).kind is Kind.MOSFET


def test_a_key_may_fit_the_name_of_the_model() -> None:
    element = card("M1", "D G S", "x", kind=model("SW-N100-7", "VDMOS"))
    assert identified([element], FULL).parts[0].kind is Kind.MOSFET


def test_a_key_that_fits_nothing_is_noted() -> None:
    found = identified([card("R1", "A B", "10", 10.0)], FULL)
    assert [p.line() for p in found.problems] == [
        "hut.parts.yaml:2:3: note: part 'SW-N100-*' fits no element of hut.cir; "
        "compare it with the model or value texts there"
    ]


def test_a_single_gate_rating_holds_for_both_signs() -> None:
    entry = 'parts:\n  "A*": {kind: igbt, ratings: {gate: 20 V}}\n'
    assert part("A1", "C", "G", "E", entry=entry).data["ratings.gate"].value == Interval(-20, 20)


def test_words_are_facts() -> None:
    entry = (
        "parts:\n"
        '  "FILM*": {kind: capacitor, ratings: {dielectric: film, voltage: 400 V}}\n'
        '  "DRV": {kind: driver, pins: [input, output], driver: {interlock: true}}\n'
    )
    elements = [card("C1", "A B", "FILM-4u7"), card("U1", "A B", "DRV")]
    capacitor, driver = identified(elements, entry).parts
    assert capacitor.facts == {"ratings.dielectric": "film"}
    assert driver.facts == {"driver.interlock": "true"}


MISTAKES = {
    "wrong unit": (
        'parts:\n  "A": {kind: diode, ratings: {blocking: 58 A}}\n',
        ":2:32: error: 58 A is a current; a voltage is wanted here, such as 58 V",
    ),
    "unknown kind": (
        'parts:\n  "A": {kind: mosfeet}\n',
        ":2:9: error: 'mosfeet' is no kind of part; did you mean 'mosfet'?",
    ),
    "unknown role": (
        'parts:\n  "A": {kind: mosfet, pins: [drian, gate, source]}\n',
        ":2:23: error: a mosfet has no pin 'drian'; did you mean 'drain'?",
    ),
    "rating of another kind": (
        'parts:\n  "A": {kind: diode, ratings: {voltage: 58 V}}\n',
        ":2:32: error: a diode has no ratings figure 'voltage'; those of a diode are ",
    ),
    "module without devices": (
        'parts:\n  "A": {kind: module, pins: [plus, minus]}\n',
        ":2:3: error: module 'A' lists no devices; list them under devices:",
    ),
    "module pin that is none": (
        'parts:\n  "A": {kind: module, pins: [plus, minus], devices: {d: {kind: diode, '
        "pins: {anode: minus, cathode: pluss}}}}\n",
        "error: part 'A' has no pin 'pluss'; did you mean 'plus'?",
    ),
    "winding set without windings": (
        'parts:\n  "A": {kind: winding-set, pins: [a, b]}\n',
        ":2:3: error: winding-set 'A' lists no windings; list them under windings:",
    ),
    "winding of one pin": (
        'parts:\n  "A": {kind: winding-set, pins: [a, b], windings: {p: {pins: [a], turns: 1}}}\n',
        "error: a winding has two pins; here are 1; name the pin with the dot, then the other",
    ),
    "winding without turns": (
        'parts:\n  "A": {kind: winding-set, pins: [a, b], windings: '
        "{p: {pins: [a, b], turns: 0}}}\n",
        "error: turns are above zero",
    ),
    "devices of no module": (
        'parts:\n  "A": {kind: diode, devices: {d: {kind: diode, pins: {}}}}\n',
        "error: a diode has no inner devices; write kind: module",
    ),
    "driver pin that looks like a slip": (
        'parts:\n  "A": {kind: driver, pins: [suply, ground, output]}\n',
        "note: pin 'suply' is no usual role; did you mean 'supply'?",
    ),
    "range of three": (
        'parts:\n  "A": {kind: mosfet, gate: {threshold: [1 V, 2 V, 3 V]}}\n',
        ":2:30: error: a range has two ends, low and high; here are 3",
    ),
    "same key twice": (
        'parts:\n  "A": {kind: diode}\n  "a": {kind: diode}\n',
        ":3:3: error: part 'a' is described at hut.parts.yaml:2:3 already",
    ),
    "unknown section": (
        'parts:\n  "A": {kind: diode, rating: {blocking: 58 V}}\n',
        "did you mean 'ratings'?",
    ),
}


@pytest.mark.parametrize("name", MISTAKES)
def test_mistake_is_located_and_says_what_to_do(name: str) -> None:
    text, expected = MISTAKES[name]
    assert any(expected in line for line in problems(text)), problems(text)


def test_all_mistakes_of_a_file_are_reported_at_once() -> None:
    text = (
        "parts:\n"
        '  "A": {kind: mosfeet, ratings: {blocking: 1 A}}\n'
        '  "B": {kind: diode, ratings: {current: 1 V}, diode: {recovery-time: 3 nC}}\n'
    )
    assert len(problems(text)) == 4


def test_the_shape_of_the_file_and_the_table_of_figures_agree() -> None:
    sections = {f.name: f.type for f in msgspec.structs.fields(PartEntry)}
    listed = set()
    for section in SECTIONS:
        entry = next(t for t in sections[section].__args__ if t is not type(None))
        names = [field.encode_name for field in msgspec.structs.fields(entry)]
        listed |= {f"{section}.{name}" for name in names}
    assert listed == {figure.path for figure in FIGURES}


def test_the_shape_makes_a_schema_that_lists_the_kinds() -> None:
    schema = msgspec.json.schema(PartDataFile)
    kinds = schema["$defs"]["PartEntry"]["properties"]["kind"]["enum"]
    assert {"mosfet", "source", "module"} <= set(kinds)
    assert "unknown" not in kinds


PINS = {
    "listed, package pins joined": (
        "pins: [source, source, gate, drain]",
        "S S G D",
        {"source": "S", "gate": "G", "drain": "D"},
    ),
    "by number": ("pins: {gate: 1, drain: 2, source: 3}", "G D S", {"drain": "D", "gate": "G"}),
    "in other spellings": ("pins: [D, G, S]", "D G S", {"source": "S"}),
    "with a Kelvin pin": ("pins: [drain, gate, source, kelvin]", "D G S K", {"kelvin": "K"}),
    "with a Kelvin pin left out": ("pins: [drain, gate, source, kelvin]", "D G S", {"source": "S"}),
    "left to the kind": ("", "D G S", {"drain": "D", "gate": "G", "source": "S"}),
}


@pytest.mark.parametrize("name", PINS)
def test_pins_get_their_roles(name: str) -> None:
    pins, nets, expected = PINS[name]
    entry = f'parts:\n  "A": {{kind: mosfet{", " if pins else ""}{pins}}}\n'
    found = identified([card("Q1", nets, "A")], entry).parts[0]
    assert {role: found.net(role) for role in expected} == expected


def test_pins_by_the_ports_of_a_definition() -> None:
    entry = 'parts:\n  "IG": {kind: igbt, pins: {collector: C1, gate: G1, emitter: E1}}\n'
    found = identified([card("X1", "A B C", "IG")], entry, IG="G1 C1 E1").parts[0]
    assert [pin.role for pin in found.pins] == ["gate", "collector", "emitter"]


def test_ports_that_are_named_by_role_need_no_pins() -> None:
    entry = 'parts:\n  "IG": {kind: igbt-with-diode}\n'
    found = identified([card("X1", "A B C", "IG")], entry, IG="E G C").parts[0]
    assert found.net("collector") == "C"


BAD_PINS = {
    "too few roles": ("kind: igbt, pins: [collector, gate, emitter]", "A B C D", "lists 3 pins"),
    "no such number": ("kind: diode, pins: {anode: 1, cathode: 9}", "A B", "has no pin '9'"),
    "driver without pins": ("kind: driver", "A B C", "does not say which of the 3 pins is which"),
    "a role on two nets": (
        "kind: mosfet, pins: [source, source, gate, drain]",
        "A B G D",
        "has its source pins on two nets, A and B",
    ),
}


@pytest.mark.parametrize("name", BAD_PINS)
def test_pins_that_do_not_go_with_the_card_are_an_error(name: str) -> None:
    entry, nets, expected = BAD_PINS[name]
    found = identified([card("Q1", nets, "A")], f'parts:\n  "A": {{{entry}}}\n')
    assert found.parts[0].kind is Kind.UNKNOWN
    assert any(expected in p.what for p in found.problems)


def test_a_key_that_also_fits_a_resistor_does_not_make_it_a_transistor() -> None:
    found = identified([card("R1", "A B", "10", 10.0)], 'parts:\n  "1*": {kind: mosfet}\n')
    assert found.parts[0].kind is Kind.RESISTOR
    assert "is a mosfet, but R1 is none" in found.problems[0].what


def test_bipolar_polarity_comes_from_model_or_text() -> None:
    entry = 'parts:\n  "*": {kind: bjt}\n'
    elements = [
        card("Q1", "C B E", "A", kind=model("A", "PNP")),
        card("Q2", "C B E", "PNP-7"),
        card("Q3", "C B E", "T-7"),
    ]
    found = identified(elements, entry)
    assert [p.edges[0].tail for p in found.parts] == ["E", "E", "C"]
    assert found.assumed == ("Q3 read as an NPN transistor",)


def test_part_data_of_a_mosfet_includes_its_body_diode_wherever_the_bulk_is_drawn() -> None:
    found = identified([card("M1", "D G S 0", "SW-N100-7")], FULL)
    assert found.parts[0].edges[1].conduction == "free"
    assert found.assumed == ("M1 with bulk on 0: read with the body diode of part data's mosfet",)


def test_usual_names_of_driver_pins_are_roles() -> None:
    pins = "pins: [VCC, HIN, LIN, COM, LO, VS, HO, VB]"
    entry = f'parts:\n  "DR": {{kind: driver, {pins}}}\n'
    found = identified([card("U1", "1 2 3 4 5 6 7 8", "DR")], entry)
    assert [pin.role for pin in found.parts[0].pins] == [
        *("supply", "input-high", "input-low", "ground"),
        *("output-low", "return-high", "output-high", "bootstrap"),
    ]
    assert found.problems == ()


def test_pins_of_connectors_and_controllers_keep_their_names() -> None:
    entry = 'parts:\n  "HDR": {kind: connector, pins: [A, K, C]}\n'
    found = identified([card("J1", "1 2 3", "HDR")], entry).parts[0]
    assert [pin.role for pin in found.pins] == ["a", "k", "c"]
