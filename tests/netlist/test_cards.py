"""Element cards, letter by letter."""

import pytest

from rulecheck.netlist import GROUND
from rulecheck.values import Unknown
from tests.kit.netlists import circuit, element, errors, names, notes, one


@pytest.mark.parametrize(
    ("card", "value", "text", "parameters"),
    [
        ("R1 a b 10k", 10e3, "10k", {}),
        ("R1 a b 10k tc1=1m", 10e3, "10k", {"tc1": 1e-3}),
        ("R1 a b 10k tc=1m,2m", 10e3, "10k", {"tc": "1m,2m"}),
        ("R1 a b 10k tc=0.1, tc2=5", 10e3, "10k", {"tc": 0.1, "tc2": 5.0}),
        ("R1 a b R=4.7", 4.7, "", {}),
        ("R1 a b {2*5}", 10.0, "{2*5}", {}),
        ("R1 a b {2 * (3 + 2)}", 10.0, "{2 * (3 + 2)}", {}),
        ("R1 a b '2*5'", 10.0, "2*5", {}),
        ("R1 a b 4.7Ω", 4.7, "4.7Ω", {}),
        ("R1 a b 10k x 3", 10e3, "10k x 3", {"m": 3.0}),
        ("R1 a b 10k m=2", 10e3, "10k", {"m": 2.0}),
        ("R1 a b 10k M = 2", 10e3, "10k", {"m": 2.0}),
        ("R1,a,b,10k", 10e3, "10k", {}),
        ("R1 (a b) 10k", 10e3, "10k", {}),
        ("R1 (a,b) 10k", 10e3, "10k", {}),
        ("C1 a b 10uF 50V X7R", 10e-6, "10uF 50V X7R", {}),
        ("C1 a b 10u IC=5", 10e-6, "10u", {"ic": 5.0}),
        ("C1 a b 20u voltage=200 ripple-current=20", 20e-6, "20u",
         {"voltage": 200.0, "ripple_current": 20.0}),
        ("C1 a b 20u dielectric=film", 20e-6, "20u", {"dielectric": "film"}),
        ("L1 a b 47uH Rser=5m current=30A", 47e-6, "47uH", {"rser": 5e-3, "current": 30.0}),
        ("C1 a b 100nF/50V", 100e-9, "100nF/50V", {}),
        ("R1 a b 10 k", 10e3, "10 k", {}),
        ("C1 a b 4.7 uF 50V X7R", 4.7e-6, "4.7 uF 50V X7R", {}),
        ("C1 a b 4µ7", 4.7e-6, "4µ7", {}),
        ('L1 a b 47u "gap 0.5 mm" x=1', 47e-6, '47u "gap 0.5 mm"', {"x": 1.0}),
    ],
)  # fmt: skip
def test_passives(card: str, value: float, text: str, parameters: dict[str, object]) -> None:
    found = one(card)
    assert found.nets == ("a", "b")
    assert found.value == pytest.approx(value, rel=1e-12)
    assert (found.text, found.parameters) == (text, parameters)


@pytest.mark.parametrize(
    ("card", "text"),
    [
        ("R1 a b", ""),
        ("R1 a b R", "R"),
        ("C1 a b C_Small", "C_Small"),
        ('C1 a b "10u film"', "10u film"),
        ("L1 a b Choke, ring core (gapped) @30A", "Choke, ring core (gapped) @30A"),
        ("D1 a b", ""),
    ],
)
def test_a_value_that_is_no_number_is_kept_as_text_and_unknown(card: str, text: str) -> None:
    found = one(card)
    assert found.text == text
    assert isinstance(found.value, Unknown)
    assert found.value.what == f"value of {found.name}"
    assert found.name in found.value.settle


def test_a_passive_with_a_model() -> None:
    found = one("R1 a b RSHUNT 5m", ".model RSHUNT RES(tc1=1m)")
    assert found.model is not None
    assert (found.value, found.model.type) == (5e-3, "RES")
    assert one("R1 a b 5m RSHUNT", ".model rshunt RES").model is not None


@pytest.mark.parametrize(
    ("card", "remark"),
    [
        ("R1 a b 1M", "'1M' is read as 0.001 ohm: M is milli in a netlist"),
        ("R1 a b 4.7M", "'4.7M' is read as 0.0047 ohm: M is milli in a netlist"),
        ("C1 a b 1F", "'1F' is read as 1e-15 F: F is femto in a netlist"),
        ("R1 a b 4k7", "'4k7' is read as 4.7k"),
        ("R1 a b 2R2", "'2R2' is read as 2.2"),
        ("C1 a b 1n2", "'1n2' is read as 1.2n"),
        ("R1 a b 4,7k", "'4,7k' is read with a decimal comma"),
        ("V1 a b 4,8V", "'4,8V' is read with a decimal comma"),
        ("C1 a b 100nF/50V", "'/50V' is ignored"),
        ("R1 a b 10 k", "'10 k' is read as 10k"),
        ("C1 a b 4.7 uF 50V", "'4.7 uF' is read as 4.7uF"),
        ("R1 a b Rload\n.param Rload=5", "'Rload' is taken as the parameter of that name"),
    ],
)
def test_a_value_that_is_not_plain_is_read_with_a_note(card: str, remark: str) -> None:
    assert notes(circuit(card)) == [f"2:{8}: {remark}"]


@pytest.mark.parametrize(
    "card", ["R1 a b 10m", "R1 a b 1Meg", "C1 a b 1fF", "C1 a b 1", "L1 a b 1m"]
)
def test_a_plain_value_has_no_note(card: str) -> None:
    assert circuit(card).problems == ()


@pytest.mark.parametrize(
    ("card", "letter", "nets", "text"),
    [
        ("D1 a k DI-600", "D", "a k", "DI-600"),
        ("D1 a k DI-600 2", "D", "a k", "DI-600"),
        ("D1 a k DI-600 OFF", "D", "a k", "DI-600"),
        ("D1 a k Schottky 60V", "D", "a k", "Schottky 60V"),
        ("Q1 c b e BT-60-5", "Q", "c b e", "BT-60-5"),
        ("Q1 c b e s BT-60-5", "Q", "c b e s", "BT-60-5"),
        ("Q1 c b e BT-60-5 2", "Q", "c b e", "BT-60-5"),
        ("M1 d g s b SW-N100-7", "M", "d g s b", "SW-N100-7"),
        ("M1 d g s SW-N100-7", "M", "d g s", "SW-N100-7"),
        ("M1 s s s g d SW-N100-7", "M", "s s s g d", "SW-N100-7"),
        ("Q1 s s s g d d d d SW-N100-7", "Q", "s s s g d d d d", "SW-N100-7"),
        ("Z1 c g e IG-1200-40", "Z", "c g e", "IG-1200-40"),
        ("S1 a b cp cn SWI", "S", "a b", "SWI"),
        ("X1 a b c HB-1200 {3}", "X", "a b c", "HB-1200"),
        ("X1 a b c HB-1200", "X", "a b c", "HB-1200"),
        ("XX1 a b c HB-1200 rg=5", "X", "a b c", "HB-1200"),
        ("X1 a b c HB-1200 PARAMS: rg=5", "X", "a b c", "HB-1200"),
        ("X1 a b HB-1200 pins: p q", "X", "a b", "HB-1200"),
        ("T1 a b c d Z0=50 TD=1n", "T", "a b c d", ""),
        ("Q§Q7 c b e BT-60-5", "Q", "c b e", "BT-60-5"),
        ("M$7 d g s b SW-N100-7", "M", "d g s b", "SW-N100-7"),
        ("X_U1 a b DRV-2", "X", "a b", "DRV-2"),
        ("R a b 5", "R", "a b", "5"),
        ("R1.a:b/c#+ a b 5", "R", "a b", "5"),
        ("M1 1 2 3 3 NM L=1u W = 2u", "M", "1 2 3 3", "NM"),
    ],
)
def test_letters_nets_and_text(card: str, letter: str, nets: str, text: str) -> None:
    found = one(card)
    assert (found.letter, " ".join(found.nets), found.text) == (letter, nets, text)


@pytest.mark.parametrize(
    ("card", "nets"),
    [
        ("M1 d g s b FETN", "d g s b"),
        ("M1 d g s FETN 2", "d g s"),
        ("Q1 c b e s FETN", "c b e s"),
        ("Q1 c b e FETN 2 OFF", "c b e"),
        ("Q1 FETN b e FETN", "FETN b e"),
        ("J1 d g s FETN", "d g s"),
        ("O1 a b c d FETN", "a b c d"),
        ("U1 a b c FETN L=5", "a b c"),
    ],
)
def test_where_the_model_is_known_it_ends_the_nets(card: str, nets: str) -> None:
    found = one(card, ".model FETN VDMOS")
    assert (found.letter, " ".join(found.nets), found.text) == (card[0], nets, "FETN")
    assert found.model is not None


@pytest.mark.parametrize("card", ["M1 BUS G1 SW SW", "Q1 BUS G1 SW", "Q1 BUS G1 SW PGND"])
def test_a_transistor_card_of_nets_alone_has_no_model(card: str) -> None:
    found = one(card, "R1 SW PGND 1", "R2 PGND G1 1")
    assert (found.nets, found.text) == (tuple(card.split()[1:]), "")


def test_a_transistor_with_three_nets_has_its_bulk_on_the_source() -> None:
    assert notes(circuit("M1 d g s SW-N100-7\n")) == [
        "2:4: a MOSFET with 3 nets is taken with its bulk on its source"
    ]


def test_multipliers_and_ratings_stay_on_the_card() -> None:
    found = one("M1 d g s s FET m=2 blocking=100 current=120 peak-current=480A")
    assert found.parameters == {
        "m": 2.0, "blocking": 100.0, "current": 120.0, "peak_current": 480.0,
    }  # fmt: skip


def test_coupled_inductors() -> None:
    found = circuit(
        "L1 a b 1m\nl2 c d 4m\nL3 e f 1m\nK1 l1 L2 0.98\nK L1 L2 L3 {k}\n.param k=0.9\n"
    )
    assert element(found, "K1").controls == ("L1", "l2")
    assert element(found, "K1").value == 0.98
    assert (element(found, "K").controls, element(found, "K").value) == (("L1", "l2", "L3"), 0.9)
    assert found.problems == ()


def test_a_coupling_of_an_inductor_that_is_not_there_is_an_error() -> None:
    found = circuit("L1 a b 1m\nK1 L1 L9 0.98\n")
    assert errors(found) == ["3:1: 'K1' refers to element 'L9', which is not there"]


@pytest.mark.parametrize(
    ("card", "nets", "controls", "value"),
    [
        ("E1 o 0 p n 10", ("o", "0"), ("p", "n"), 10.0),
        ("E1 o 0 (p,n) 10", ("o", "0"), ("p", "n"), 10.0),
        ("E1 o 0 p n {5*2}", ("o", "0"), ("p", "n"), 10.0),
        ("G1 o 0 p n 1m", ("o", "0"), ("p", "n"), 1e-3),
        ("F1 o 0 Vs 2", ("o", "0"), ("Vs",), 2.0),
        ("H1 o 0 Vs 50", ("o", "0"), ("Vs",), 50.0),
        ("S1 o 0 p n SWI", ("o", "0"), ("p", "n"), None),
        ("W1 o 0 Vs SWI", ("o", "0"), ("Vs",), None),
    ],
)
def test_controlled_elements(
    card: str, nets: tuple[str, ...], controls: tuple[str, ...], value: float | None
) -> None:
    found = one(card, "Vs p n 0", ".model SWI VSWITCH Ron=1m Roff=1Meg")
    assert (found.letter, found.nets, found.controls) == (card[0], nets, controls)
    assert isinstance(found.value, Unknown) if value is None else found.value == value


@pytest.mark.parametrize(
    ("card", "text", "controls"),
    [
        ("B1 o 0 V=V(p) * 2 + {k}", "V=V(p) * 2 + {k}", ()),
        ("B1 o 0 I={V(p) > 1 ? 1 : 0}", "I={V(p) > 1 ? 1 : 0}", ()),
        ("B1 o 0 V = if(V(p)>=2 & V(n)<1, 1, 0)", "V = if(V(p)>=2 & V(n)<1, 1, 0)", ()),
        ("E1 o 0 VALUE={V(p)*{k}}", "VALUE={V(p)*{k}}", ()),
        ("E1 o 0 VALUE {V(p)}", "VALUE {V(p)}", ()),
        ("E1 o 0 value = {V(p)}", "value = {V(p)}", ()),
        ("E1 o 0 POLY(2) (p,n) (q,0) 0 1 1", "POLY(2) (p,n) (q,0) 0 1 1", ("p", "n", "q", "0")),
        ("E1 o 0 POLY(1) p n 0 1", "POLY(1) p n 0 1", ("p", "n")),
        ("G1 o 0 TABLE {V(p)} = (0,0) (1,5)", "TABLE {V(p)} = (0,0) (1,5)", ()),
        ("G1 o 0 LAPLACE {V(p)} = {1/(1+s)}", "LAPLACE {V(p)} = {1/(1+s)}", ()),
        ("F1 o 0 POLY(2) Vs Vt 0 1 1", "POLY(2) Vs Vt 0 1 1", ("Vs", "Vt")),
        ("E1 o 0 VOL='V(p)*2'", "VOL='V(p)*2'", ()),
        ("B1 o 0 V=V(p)\n+ *2", "V=V(p) *2", ()),
    ],
)
def test_behavioural_elements_keep_their_expression(
    card: str, text: str, controls: tuple[str, ...]
) -> None:
    found = circuit(f"{card}\nVs p n 0\nVt q 0 0\n.param k=2\n")
    first = found.elements[0]
    assert first.waveform is not None
    assert (first.waveform.kind, first.waveform.text) == ("behavioural", text)
    assert (first.nets, first.controls) == (("o", "0"), controls)
    assert isinstance(first.value, Unknown)
    assert errors(found) == []


@pytest.mark.parametrize("card", ["B1 o 0 V={2*k}", "E1 o 0 VALUE={2*k}", "E1 o 0 VALUE {2*k}"])
def test_a_behavioural_source_of_parameters_alone_has_a_value(card: str) -> None:
    assert one(card, ".param k=24").value == 48.0


@pytest.mark.parametrize(
    "net",
    ["/BUS", "/hut/BUS", "Net-(Q1-D)", "Net-_Q1-Pad1_", "~{RESET}", "a.b", "a:b", "a!", "a#b",
     "$n001", "unconnected-(U1-Pad3)", "Ü", "3", "N$12", "D[0]", "<3>"],
)  # fmt: skip
def test_net_names_of_every_kind(net: str) -> None:
    assert one(f"R1 {net} b 10k").nets == (net, "b")
    assert one(f"M1 b {net} c c FET").nets == ("b", net, "c", "c")
    assert one(f"X1 b {net} SUB").nets == ("b", net)


def test_nets_and_elements_keep_their_first_spelling() -> None:
    found = circuit("R1 Bus gnd 1\nC1 BUS GND 1u\n")
    assert [one.nets for one in found.elements] == [("Bus", "gnd"), ("Bus", "gnd")]


def test_names_may_be_shared_between_an_element_a_net_a_model_and_a_parameter() -> None:
    found = circuit("V1 V1 0 {V1}\nD1 V1 x D1\n.param V1=48\n.model D1 D\n")
    assert element(found, "V1").value == 48.0
    assert element(found, "D1").model is not None
    assert found.problems == ()


def test_a_hierarchical_net_with_a_blank_is_mended_with_a_note() -> None:
    found = circuit("R1 /Main Supply/BUS OUT 10k\nD1 /DC link caps/P K DI-600\n")
    assert found.elements[0].nets == ("/Main Supply/BUS", "OUT")
    assert found.elements[1].nets == ("/DC link caps/P", "K")
    assert len(notes(found)) == 2


def test_a_value_behind_a_hierarchical_net_is_not_taken_for_a_part_of_it() -> None:
    assert one("C1 /A B 10u/50V").nets == ("/A", "B")


def test_ground_is_node_zero_and_others_are_candidates() -> None:
    found = circuit("R1 a 0 1\nR2 GND PGND 1\nR3 AGND /hut/GNDD 1\nR4 GND1 b 1\nR5 gnd SIGNAL 1\n")
    assert GROUND in found.elements[0].nets
    assert found.grounds == ("/hut/GNDD", "AGND", "GND", "GND1", "PGND")


def test_a_second_element_of_a_name_is_an_error_that_names_both_places() -> None:
    found = circuit("R1 a b 1\nC1 a b 1u\nr1 c d 2\n")
    assert names(found) == ["R1", "C1"]
    assert found.unread == ("r1",)
    assert errors(found) == [
        "4:1: element 'r1' stands here a second time; the first is at hut.cir:2:1"
    ]


def test_a_board_part_keeps_its_pins() -> None:
    assert names(circuit("7SEG a b c DISPLAY\n")) == ["7SEG"]
