"""Subcircuits are expanded in place: names, nets, spans, scope."""

import pytest

from rulecheck.values import Span
from tests.kit.netlists import circuit, element, errors, names, notes

LEG = """\
X1 BUS SW PGND LEG
.subckt LEG p m n
M1 p g1 m m FET
R1 g1 0 10k
M2 m g2 n n FET
.ends LEG
"""


def test_an_instance_is_kept_and_its_contents_follow() -> None:
    found = circuit(LEG)
    assert names(found) == ["X1", "X1.M1", "X1.R1", "X1.M2"]
    assert element(found, "X1").nets == ("BUS", "SW", "PGND")
    assert element(found, "X1.M1").nets == ("BUS", "X1.g1", "SW", "SW")
    assert element(found, "X1.R1").nets == ("X1.g1", "0")
    assert [one.instance for one in found.elements] == ["", "X1", "X1", "X1"]
    assert element(found, "X1.M2").span == Span("hut.cir", 6, 1)
    assert element(found, "X1.M2").instance_chain == (Span("hut.cir", 2, 1),)
    assert found.subcircuits["leg"].ports == ("p", "m", "n")
    assert found.subcircuits["leg"].span == Span("hut.cir", 3, 1)


def test_instances_inside_instances() -> None:
    found = circuit(f"X9 BUS SW PGND TWO\n.subckt TWO p m n\nX1 p mid m LEG\n.ends\n{LEG[19:]}")
    assert element(found, "X9.X1.M1").nets == ("BUS", "X9.X1.g1", "X9.mid", "X9.mid")
    assert element(found, "X9.X1.M1").instance == "X9.X1"
    assert element(found, "X9.X1.M1").instance_chain == (
        Span("hut.cir", 2, 1),
        Span("hut.cir", 4, 1),
    )


def test_controls_inside_an_instance_carry_its_path() -> None:
    found = circuit(
        """\
        X1 a b CELL
        .subckt CELL p n
        L1 p q 1m
        L2 q n 1m
        K1 L1 L2 0.98
        Vs q n 0
        F1 p n vs 2
        E1 q 0 p q 2
        .ends
        """
    )
    assert element(found, "X1.K1").controls == ("X1.L1", "X1.L2")
    assert element(found, "X1.F1").controls == ("X1.Vs",)
    assert element(found, "X1.E1").controls == ("a", "X1.q")


def test_a_multiplied_instance_multiplies_its_contents() -> None:
    found = circuit(
        """\
        X1 a b TWO m=2
        .subckt TWO p n
        X1 p n ONE m=3
        R1 p n 5
        .ends
        .subckt ONE p n
        M1 p g n n FET m=4
        .ends
        X2 a b OWN m=7
        .subckt OWN p n m=1
        R1 p n {m}
        .ends
        """
    )
    counts = {one.name: one.parameters.get("m", 1.0) for one in found.elements}
    assert counts == {
        "X1": 2.0, "X1.X1": 6.0, "X1.X1.M1": 24.0, "X1.R1": 2.0, "X2": 7.0, "X2.R1": 1.0,
    }  # fmt: skip


def test_global_nets_and_ground_are_the_same_everywhere() -> None:
    found = circuit("X1 a CELL\n.global vcc\nR2 VCC 0 1\n.subckt CELL p\nR1 Vcc 0 1\n.ends\n")
    assert element(found, "X1.R1").nets == element(found, "R2").nets


def test_ports_are_numbers_or_words_in_any_case() -> None:
    found = circuit("X1 a b CELL\n.SUBCKT cell 1 Out\nR1 1 OUT 5\n.ENDS\n")
    assert element(found, "X1.R1").nets == ("a", "b")


def test_definitions_inside_definitions_are_seen_only_there() -> None:
    found = circuit(
        """\
        X1 a b OUTER
        X2 a b INNER
        .subckt OUTER p n
        X1 p n INNER
        .subckt INNER p n
        R1 p n 5
        .ends
        .ends
        """
    )
    assert names(found) == ["X1", "X1.X1", "X1.X1.R1", "X2"]


def test_an_instance_of_what_is_not_defined_stays_as_one_element() -> None:
    found = circuit("X1 a b c DRV-2 rg=5\n")
    assert [(one.letter, one.text, one.nets) for one in found.elements] == [
        ("X", "DRV-2", ("a", "b", "c"))
    ]
    assert found.subcircuits == {}
    assert found.problems == ()


@pytest.mark.parametrize("head", ["OPTIONAL: ref=0 PARAMS: g=2", "OPTIONAL:ref=0 PARAMS:g=2"])
def test_optional_ports(head: str) -> None:
    text = f"X1 a b CELL\nX2 a b c CELL g=3\n.subckt CELL p n {head}\nR1 p ref {{g}}\n.ends\n"
    found = circuit(text)
    assert element(found, "X1.R1").nets == ("a", "0")
    assert element(found, "X2.R1").nets == ("a", "c")
    assert [element(found, f"X{k}.R1").value for k in (1, 2)] == [2.0, 3.0]
    assert errors(found) == []


@pytest.mark.parametrize(
    "head",
    ["p n PARAMS: g=2", "p n PARAMS:g=2", "p n g=2", "p n\n+ params: g = 2", "p n g={1+1} h='3'"],
)
def test_parameters_of_a_definition(head: str) -> None:
    found = circuit(f"X1 a b CELL\n.subckt CELL {head}\nR1 p n {{g}}\n.ends\n")
    assert element(found, "X1.R1").value == 2.0


def test_a_wrong_number_of_nets_is_an_error_and_the_instance_is_missing() -> None:
    found = circuit(LEG.replace("BUS SW PGND", "BUS SW"))
    assert errors(found) == [
        "2:1: 'X1' has 2 nets, and subcircuit 'LEG' (hut.cir:3:1) has 3 ports: p m n"
    ]
    assert (names(found), found.unread) == ([], ("X1",))


def test_a_definition_that_contains_itself_is_an_error() -> None:
    found = circuit("X1 a A\n.subckt A p\nR1 p 0 1\nX1 p B\n.ends\n.subckt B p\nX1 p A\n.ends\n")
    assert errors(found) == ["8:1: subcircuit 'A' contains itself (A -> B -> A)"]
    assert found.unread == ("X1.X1.X1",)
    assert names(found) == ["X1", "X1.R1", "X1.X1"]


def test_a_mistake_inside_a_definition_is_told_once_for_all_its_instances() -> None:
    found = circuit("X1 a CELL\nX2 a CELL\n.subckt CELL p\nD1 p\nR1 p 0 {none}\n.ends\n")
    assert errors(found) == [
        "5:1: a diode has 2 nets: anode and cathode; found 1",
        "6:9: parameter 'none' is not defined",
    ]
    assert found.unread == ("X1.D1", "X2.D1")


def test_the_same_name_in_two_levels_is_no_duplicate() -> None:
    assert errors(circuit(LEG + "R1 a b 1\nM1 a b c c FET\n")) == []


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("R1 a b 1\n.ends\n", "3:1: .ends without a .subckt before it"),
        (
            "X1 a A\n.subckt A p\nR1 p 0 1\n",
            "3:1: subcircuit 'A' is not closed by the end of the file; closed there",
        ),
        (
            "X1 a A\n.subckt A p\n.subckt B q\nR1 q 0 1\n.ends A\nR1 a 0 1\n",
            "4:1: subcircuit 'B' is not closed before 'A' ends",
        ),
        ("R1 a b 1\n.subckt\n.ends\n", "3:1: a subcircuit definition without a name"),
    ],
)
def test_faulty_definitions_are_located(text: str, message: str) -> None:
    assert errors(circuit(text)) == [message]


def test_a_definition_is_closed_under_another_name_with_a_note() -> None:
    found = circuit("X1 a A\n.subckt A p\nR1 p 0 1\n.ends OTHER\n")
    assert notes(found) == ["5:1: .ends OTHER closes subcircuit 'A'"]
    assert names(found) == ["X1", "X1.R1"]


def test_a_second_definition_of_a_name_is_noted_and_the_first_used() -> None:
    found = circuit("X1 a A\n.subckt A p\nR1 p 0 1\n.ends\n.subckt a p\nC1 p 0 1\n.ends\n")
    assert names(found) == ["X1", "X1.R1"]
    assert notes(found) == [
        "6:1: subcircuit 'a' is defined a second time; the first, at hut.cir:3:1, is used"
    ]


def test_an_expansion_without_sensible_end_is_stopped() -> None:
    rows = ["X0 a L0"]
    rows += [f".subckt L{k} p\nX1 p L{k + 1}\n.ends" for k in range(200)]
    found = circuit("\n".join([*rows, ".subckt L200 p\nR1 p 0 1\n.ends"]) + "\n")
    assert len(errors(found)) == 1
    assert "stands within 50 instances" in errors(found)[0]
