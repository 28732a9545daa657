"""Bad cards: one located error each, what to do, and the name of what is missing."""

import pytest

from tests.kit.netlists import circuit, errors, names


@pytest.mark.parametrize(
    ("card", "message", "remedy"),
    [
        ("R1", "2:1: a resistor has 2 nets: its two ends; found 0", "write NAME NET NET VALUE"),
        ("R1 a", "2:1: a resistor has 2 nets: its two ends; found 1", "write NAME NET NET VALUE"),
        ("C1 a", "2:1: a capacitor has 2 nets: its two ends; found 1", "write NAME NET NET VALUE"),
        ("V1 a", "2:1: a voltage source has 2 nets: plus and minus; found 1",
         "write NAME NET NET VALUE"),
        ("D1 a", "2:1: a diode has 2 nets: anode and cathode; found 1",
         "write NAME, the nets, then the model"),
        ("D1 a DX", "2:1: a diode has 2 nets: anode and cathode; found 1",
         "write NAME, the nets, then the model"),
        ("Q1 c b DX", "2:1: a bipolar transistor has 3 to 8 nets: collector, base and emitter; "
         "found 2", "write NAME, the nets, then the model"),
        ("M1 d g DX", "2:1: a MOSFET has 3 to 8 nets: drain, gate, source and bulk; found 2",
         "write NAME, the nets, then the model"),
        ("J1 d g DX", "2:1: a junction FET has 3 nets: drain, gate and source; found 2",
         "write NAME, the nets, then the model"),
        ("S1 a b c DX", "2:1: a voltage-controlled switch has 4 nets: two ends and two "
         "controlling nets; found 3", "write NAME, the nets, then the model"),
        ("E1 a VALUE={1}", "2:1: a voltage-controlled voltage source has 2 nets: plus and minus; "
         "found 1", "write NAME NET NET, what controls it, then the gain"),
        ("B1 a V={1}", "2:1: a behavioural source has 2 nets: plus and minus; found 1",
         "write NAME NET NET V={...} or I={...}"),
        ("T1 a b Z0=50", "2:1: a transmission line has 4 nets: two at each end; found 2",
         "write NAME, the nets, then the parameters"),
        ("E1 a b c d gain", "2:1: no controlling nets and gain can be read",
         "write NAME NET NET NET NET GAIN, or VALUE={...}"),
        ("K1 L1 L2", "2:1: no coefficient of coupling", "write NAME L1 L2 COEFFICIENT"),
        ("K1 L1 L1 0.9", "2:1: a coupling names one inductor twice", "name each one once"),
        ("X1", "2:1: an instance of a subcircuit has 1 to 9999 nets: as its subcircuit says; "
         "found 0", "write NAME, the nets, then the model"),
        ('R1 a b "10k', "2:8: a quote is opened and not closed",
         "add the closing quote, or delete this one"),
        ("R1 a b tc1=", "2:11: no value follows '='",
         "write the value behind it, or delete the name"),
        ("R1 a b tc1= =5", "2:13: no value follows '='",
         "write the value behind it, or delete the name"),
    ],
)  # fmt: skip
def test_a_bad_card_gives_exactly_its_own_error(card: str, message: str, remedy: str) -> None:
    found = circuit(f"{card}\nR8 a b 1\n.model DX D\n")
    assert errors(found) == [message]
    assert found.problems[0].remedy == remedy
    assert found.unread == (card.split()[0],)
    assert names(found) == ["R8"]


def test_a_card_that_begins_with_no_name_is_an_error() -> None:
    found = circuit('"R1" a b 1\n=5 a b\nR8 a b 1\n')
    assert errors(found) == [
        "2:1: a card begins with the name of its element",
        "3:1: a card begins with the name of its element",
    ]
    assert names(found) == ["R8"]


def test_all_mistakes_of_a_file_are_told_in_one_run() -> None:
    bad = {3: "R1 a", 7: "D1 k", 11: "R2 a b {none}", 12: 'C1 a b "x', 20: ".ends"}
    rows = [bad.get(line, f"R{line}0 a b 1") for line in range(2, 31)]
    found = circuit("\n".join(rows) + "\n")
    assert [int(message.partition(":")[0]) for message in errors(found)] == sorted(bad)
    assert found.unread == ("C1", "D1", "R1")
    assert len(found.elements) == 29 - 4


@pytest.mark.parametrize(
    "card", ["R1 a b (10k", "V1 a 0 PULSE(0 12 0 1n", "R1 a b {2*(3+1)", "B1 a 0 V={V(a)*(2"]
)
def test_an_unclosed_parenthesis_is_closed_at_the_end_of_the_card(card: str) -> None:
    found = circuit(f"{card}\nR8 a b 1\n")
    assert len(found.elements) == 2
    assert [one.what.endswith("closed at its end") for one in found.problems] == [True]


@pytest.mark.parametrize("card", ["R1 a b 10k)", "V1 a 0 SIN(0 1 50))", "R1 a b 10k }"])
def test_a_closing_sign_too_many_loses_no_element(card: str) -> None:
    found = circuit(f"{card}\nR8 a b 1\n")
    assert len(found.elements) == 2
