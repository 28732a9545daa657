"""What each element is read as, from its letter, model, designator and text."""

import pytest

from rulecheck.netlist import Element, Waveform
from rulecheck.parts import Kind, Part
from tests.kit.parts import card, identified, model

MODELS = {
    "rectifier": (card("D1", "A K", "DF", kind=model("DF", "D", bv=600.0)), "diode"),
    "fast diode with a Z in its name": (
        card("D1", "A K", "DZF", kind=model("DZF", "D", bv=600.0)),
        "diode",
    ),
    "diode of low breakdown": (
        card("D1", "A K", "SB40", kind=model("SB40", "D", bv=40.0)),
        "diode",
    ),
    "zener diode by name and breakdown": (
        card("D1", "A K", "ZD12", kind=model("ZD12", "D", bv=12.0)),
        "zener",
    ),
    "surge clamp by name": (
        card("D1", "A K", "TVS-400", kind=model("TVS-400", "D", bv=400.0)),
        "zener",
    ),
    "NPN": (card("Q1", "C B E", "T", kind=model("T", "NPN")), "bjt"),
    "NPN with substrate": (card("Q1", "C B E 0", "T", kind=model("T", "NPN")), "bjt"),
    "PNP": (card("Q1", "C B E", "T", kind=model("T", "PNP")), "bjt"),
    "n-MOSFET": (card("M1", "D G S S", "F", kind=model("F", "NMOS")), "mosfet"),
    "vertical MOSFET": (card("M1", "D G S", "F", kind=model("F", "VDMOS")), "mosfet"),
    "p-MOSFET": (card("M1", "D G S S", "F", kind=model("F", "PMOS")), "p-mosfet"),
    "vertical p-MOSFET": (
        card("M1", "D G S S", "F", kind=model("F", "VDMOS", pchan="")),
        "p-mosfet",
    ),
    "IGBT": (card("Z1", "C G E", "I", kind=model("I", "NIGBT")), "igbt"),
    "IGBT on a Q card": (card("Q1", "C G E", "I", kind=model("I", "NIGBT")), "igbt"),
    "IGBT without a model": (card("Z1", "C G E", "IG-600"), "igbt"),
    "switch": (card("S1", "A B P N", "SWM", kind=model("SWM", "SW")), "ideal-switch"),
    "current-controlled switch": (
        card("W1", "A B", "CSM", kind=model("CSM", "CSW")),
        "ideal-switch",
    ),
    "JFET": (card("J1", "D G S", "JF", kind=model("JF", "NJF")), "other"),
    "letter and model of two minds": (card("M1", "D G S", "T", kind=model("T", "NPN")), "unknown"),
}
LETTERS = {
    "resistor": (card("R1", "A B", "10k", 1e4), "resistor"),
    "resistor with a model": (card("R1", "A B", "RM", 5.0, model("RM", "RES")), "resistor"),
    "capacitor": (card("C1", "A B", "10u", 1e-5), "capacitor"),
    "capacitor of unread value": (card("C1", "A B", "C_Small"), "capacitor"),
    "inductor": (card("L1", "A B", "10u", 1e-5), "inductor"),
    "voltage": (card("V1", "A B", "48", 48.0), "voltage-source"),
    "current": (card("I1", "A B", "1", 1.0), "current-source"),
    "behavioural voltage": (card("B1", "A B", "V=V(x)*2"), "voltage-source"),
    "behavioural current": (card("B1", "A B", "I = V(x)"), "current-source"),
    "transmission line": (card("T1", "A 0 B 0", z0=50.0, td=1e-9), "other"),
    "MOSFET without a model": (card("M1", "D G S S", "SW-N100-7"), "unknown"),
    "bipolar transistor without a model": (card("Q1", "C B E", "TR-7"), "unknown"),
    "diode without a model": (card("D1", "A K", "DI-600-15"), "diode"),
    "diode array": (card("D1", "A B C", "DI-3"), "unknown"),
    "instance of nothing known": (card("X1", "A B C", "HB-7"), "unknown"),
}
BOARD = {
    "test point": (card("TP3", "SW"), "other"),
    "mounting hole": (card("H1", "PE"), "other"),
    "pin header": (card("J4", "A B C"), "connector"),
    "plug": (card("P4", "A B", "Screw_Terminal"), "connector"),
    "connector by X": (card("X4", "A B C"), "connector"),
    "fuse": (card("F1", "A B", "125A fast"), "fuse"),
    "fuse with a text of two words": (card("F1", "BAT BUS 125A", "fast"), "fuse"),
    "bead": (card("FB1", "A B", "600R"), "resistor"),
    "thermistor": (card("NTC1", "A B", "10k"), "ntc"),
    "varistor": (card("RV1", "L N", "VDR-275"), "varistor"),
    "variable resistor with a value": (card("RV1", "A B", "10k", 1e4), "resistor"),
    "battery": (card("BT1", "A B", "LFP pack"), "voltage-source"),
    "push button": (card("SW3", "A B", "reset"), "ideal-switch"),
    "light-emitting diode": (card("LED1", "A K", "red"), "diode"),
    "zener diode under ZD": (card("ZD1", "A K", "12V"), "zener"),
    "circuit": (card("U1", "A B C D", "HUT-CTRL-1"), "unknown"),
    "circuit under IC": (card("IC1", "A B C D", "HUT-CTRL-1"), "unknown"),
    "transformer": (card("T1", "A B C D", "TX-48"), "unknown"),
    "relay": (card("K1", "A B C D", "REL-12"), "unknown"),
    "diode under CR": (card("CR1", "A K", "DI-600-15"), "unknown"),
    "crystal": (card("Y1", "A B", "8MHz"), "other"),
    "name that starts with a digit": (card("4k7", "A B"), "unknown"),
}


def only(element: Element) -> Part:
    return identified([element]).parts[0]


@pytest.mark.parametrize("name", MODELS)
def test_kind_by_model(name: str) -> None:
    element, kind = MODELS[name]
    assert only(element).kind == kind


@pytest.mark.parametrize("name", LETTERS)
def test_kind_by_letter(name: str) -> None:
    element, kind = LETTERS[name]
    assert only(element).kind == kind


@pytest.mark.parametrize("name", BOARD)
def test_kind_by_designator(name: str) -> None:
    element, kind = BOARD[name]
    assert only(element).kind == kind


WORDS = {
    "NMOS-GDS": ("mosfet", {"gate": "1", "drain": "2", "source": "3"}),
    "PMOS_DGS": ("p-mosfet", {"drain": "1", "gate": "2", "source": "3"}),
    "NPN BEC": ("bjt", {"base": "1", "emitter": "2", "collector": "3"}),
    "NMOS": ("mosfet", {"drain": "1", "gate": "2", "source": "3"}),
}


@pytest.mark.parametrize("text", WORDS)
def test_kind_and_pin_order_by_words(text: str) -> None:
    kind, nets = WORDS[text]
    found = identified([card("Q1", "1 2 3", text)])
    assert found.parts[0].kind == kind
    assert {role: found.parts[0].net(role) for role in nets} == nets
    assert text in found.assumed[0]


def test_words_that_name_more_pins_than_there_are_leave_it_open() -> None:
    assert only(card("Q1", "1 2", "NMOS-GDS")).kind is Kind.UNKNOWN


def test_diode_words_give_the_order_of_its_pins() -> None:
    assert only(card("D1", "1 2", "SCHOTTKY-KA")).net("anode") == "2"


def test_a_pnp_transistor_carries_from_emitter_to_collector() -> None:
    part = only(card("Q1", "C B E", "T", kind=model("T", "PNP")))
    gated, back = part.edges
    assert (gated.tail, gated.head, back.blocks) == ("E", "C", 0.0)


def test_bulk_on_another_net_means_no_body_diode_and_says_so() -> None:
    found = identified([card("M1", "D G S 0", "F", kind=model("F", "NMOS"))])
    assert {edge.conduction.value for edge in found.parts[0].edges} == {"gated"}
    assert found.assumed == (
        "M1 with bulk on 0, not the source: read with no diode along the channel",
    )


def test_a_switch_has_its_control_pair_as_pins() -> None:
    switch = only(card("S1", "A B P N", "SWM", kind=model("SWM", "SW")))
    assert [pin.role for pin in switch.pins] == ["plus", "minus", "control-plus", "control-minus"]
    assert {(e.tail, e.head) for e in switch.edges} == {("A", "B"), ("B", "A")}


def test_control_nets_that_the_reader_keeps_apart_become_pins() -> None:
    plain = card("S1", "A B", "SWM", kind=model("SWM", "SW"))
    switch = only(
        Element(
            *(plain.name, plain.letter, plain.nets, plain.value, plain.text, plain.span),
            model=plain.model,
            controls=("P", "N"),
        )
    )
    assert (switch.net("control-plus"), switch.net("control-minus")) == ("P", "N")


def test_controlled_sources_are_sources_without_a_fixed_value() -> None:
    base = card("E1", "A B", "", 2.0)
    element = Element(
        base.name, "E", base.nets, base.value, base.text, base.span, controls=("P", "N")
    )
    part = only(element)
    assert part.kind is Kind.VOLTAGE_SOURCE
    assert not isinstance(part.value, float)


def test_a_source_keeps_its_waveform() -> None:
    base = card("V1", "A B", "", 0.0)
    pulse = Waveform("pulse", (0.0, 12.0), "PULSE(0 12)")
    part = only(
        Element(base.name, "V", base.nets, base.value, base.text, base.span, waveform=pulse)
    )
    assert part.waveform == pulse


def test_equal_assumptions_make_one_sentence() -> None:
    found = identified([card(name, "A K", "DI-600-15") for name in ("D10", "D2", "D3")])
    assert found.assumed == (
        "D2, D3 and D10 read with pins in the order anode cathode (no data on 'DI-600-15')",
    )


def test_what_is_not_understood_is_listed_with_what_could_not_be_read() -> None:
    assert identified([card("U1", "A B", "HUT-CTRL-1")]).not_understood == ("U1",)


def test_a_behavioural_source_that_depends_on_nothing_has_its_value() -> None:
    base = card("B1", "A B", "V={2*24}", 48.0)
    wave = Waveform("behavioural", (), "V={2*24}")
    part = only(Element(base.name, "B", base.nets, 48.0, base.text, base.span, waveform=wave))
    assert (part.kind, part.value, part.waveform) == (Kind.VOLTAGE_SOURCE, 48.0, None)


def test_cards_of_one_name_stay_two_parts() -> None:
    found = identified([card("R1", "A B", "1", 1.0), card("r1", "B C", "2", 2.0)])
    assert [part.name for part in found.parts] == ["R1", "r1#2"]
    assert found.assumed == ("r1#2 so named because r1 is the name of more than one card",)
