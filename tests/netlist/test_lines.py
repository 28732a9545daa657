"""Titles, comments, continuations, skipped blocks, and encodings of a netlist file."""

from pathlib import Path

import pytest

from rulecheck.netlist import read_circuit, read_circuit_text
from rulecheck.reading import SourceText
from rulecheck.values import Span
from tests.kit.netlists import circuit, element, errors, names, notes, one


def read(text: str) -> list[str]:
    return names(read_circuit_text(SourceText("hut.cir", text)))


@pytest.mark.parametrize(
    ("first", "title"),
    [
        ("* hut inverter", "hut inverter"),
        ("hut inverter", "hut inverter"),
        (".title hut inverter", "hut inverter"),
        (".TITLE hut inverter", "hut inverter"),
        ("% hut inverter", "% hut inverter"),
        ("", ""),
        ("R1 a b 10k", "R1 a b 10k"),
        (".tran 1u 1m", ".tran 1u 1m"),
    ],
)
def test_the_first_line_is_the_title_whatever_it_holds(first: str, title: str) -> None:
    found = read_circuit_text(SourceText("hut.cir", f"{first}\nR2 a b 1\n"))
    assert found.title == title
    assert names(found) == ["R2"]


def test_a_title_that_looks_like_an_element_is_remarked() -> None:
    found = read_circuit_text(SourceText("hut.cir", "R1 a b 10k\nR2 a b 1\n"))
    assert notes(found) == [
        "1:1: the first line of a netlist is its title, and is not read as a card"
    ]


@pytest.mark.parametrize(
    "first",
    [".param g=3", ".SUBCKT LEG p m\n.ends", ".model DX D", ".global VCC", ".func f(x) {x}"],
)
def test_a_structural_dot_card_on_the_first_line_is_a_card(first: str) -> None:
    found = read_circuit_text(SourceText("hut.cir", f"{first}\nR2 a b 1\n"))
    assert (found.title, names(found), errors(found)) == ("", ["R2"], [])


def test_a_parameter_of_the_first_line_counts() -> None:
    found = read_circuit_text(SourceText("hut.cir", ".param g=3\nR2 a b {g}\n"))
    assert found.elements[0].value == 3.0


@pytest.mark.parametrize(
    "comment",
    [
        "* R9 a b 1",
        "   * R9 a b 1",
        "; R9 a b 1",
        "# R9 a b 1",
        "$ R9 a b 1",
        "*+ more",
        "\f",
        "\t ",
    ],
)
def test_comment_lines_are_no_cards_and_end_none(comment: str) -> None:
    found = circuit(f"R1 a b 10k\n{comment}\n+ tc1=5\n{comment}\nR2 a b 1\n")
    assert names(found) == ["R1", "R2"]
    assert found.elements[0].parameters == {"tc1": 5.0}


@pytest.mark.parametrize(
    "card",
    [
        "R1 a b 10k ; load",
        "R1 a b 10k;load",
        "R1 a b 10k $ load",
        "R1 a b ; load\n+ 10k",
        "R1 a b\n+ 10k ; load",
        "R1 a b\n+10k",
        "R1 a b\n   + 10k",
        "R1 a b\n+\n+ 10k",
        "R1 a b\n*+ 20k\n+ 10k",
        "R1 a b\n\n+ 10k",
        "R1\ta\tb\t10k   ",
        "   R1 a b 10k",
        "R1 a b 10k $",
    ],
)
def test_comments_and_continuations_of_one_card(card: str) -> None:
    found = one(card)
    assert (found.nets, found.value) == (("a", "b"), 10e3)


def test_a_dollar_or_semicolon_inside_a_word_or_quotes_is_no_comment() -> None:
    assert one("R1 $n1 b$2 10k").nets == ("$n1", "b$2")
    assert one('C1 a b "10u; film" tc1=1').parameters == {"tc1": 1.0}


@pytest.mark.parametrize("net", ["+", "-", "+5V", "-12V", "V+", "IN-", "+3.3VA"])
def test_signs_belong_to_net_names(net: str) -> None:
    assert one(f"R1 {net} b 10k").nets == (net, "b")


def test_a_continuation_without_a_card_is_an_error_and_skipped() -> None:
    found = circuit("+ 10k\nR1 a b 1\n")
    assert errors(found) == ["2:1: '+' continues a card, and there is none above"]
    assert names(found) == ["R1"]


def test_a_closing_parenthesis_on_its_own_line_belongs_to_the_card_above() -> None:
    found = circuit("D1 a k DX\n.model DX D(BV=600\n+ IS=1n\n)\n")
    assert found.elements[0].model is not None
    assert found.elements[0].model.parameters == {"bv": 600.0, "is": 1e-9}
    assert notes(found) == [
        "5:1: a closing parenthesis on a line of its own is taken as part of the card above"
    ]


def test_the_place_of_a_mistake_on_a_continuation_line_is_that_line() -> None:
    found = circuit("C1 BUS 0 20u\n  +   voltage={Vmax}\n")
    assert errors(found) == ["3:16: parameter 'Vmax' is not defined"]


@pytest.mark.parametrize(
    ("block", "what"),
    [
        (".control\nrun {\nR7 a b 1 'é\n.endc", "2:1: script block of 2 lines skipped"),
        (".CONTROL\nplot v(a)\n.ENDC", "2:1: script block of 1 lines skipped"),
        (".prot\n9F3A1 77AB\nQ0D9 1 2\n.unprot", "2:1: encrypted block of 2 lines skipped"),
        (".protect\n9F3A1\n.unprotect", "2:1: encrypted block of 1 lines skipped"),
        ("* begin encrypted\nR9 0A 1F\n* end encrypted", "2:1: encrypted block of 1 lines skipped"),
    ],
)
def test_blocks_that_are_not_circuit_are_skipped(block: str, what: str) -> None:
    found = circuit(f"{block}\nR1 a b 1\n")
    assert (names(found), notes(found), errors(found)) == (["R1"], [what], [])


def test_a_block_that_is_never_closed_is_an_error() -> None:
    found = circuit("R1 a b 1\n.control\nrun\n")
    assert errors(found) == [
        "3:1: this script block is never closed, so that the rest of the file is not read"
    ]


def test_a_comment_that_only_sounds_like_an_encrypted_block_swallows_nothing() -> None:
    assert read("hut\n* begin encrypted\nR1 a b 1\n") == ["R1"]


def test_what_follows_the_end_card_is_not_read() -> None:
    found = circuit("R1 a b 1\n.END\n* remark\nR2 a b 1\n.end\n")
    assert names(found) == ["R1"]
    assert notes(found) == ["5:1: what follows the .end card of line 3 is not read"]


@pytest.mark.parametrize("text", ["hut\nR1 a b 1", "hut\nR1 a b 1\n.end", "hut\nR1 a b 1\n\n\n"])
def test_neither_end_card_nor_last_newline_is_needed(text: str) -> None:
    assert read(text) == ["R1"]


def test_a_card_of_many_thousand_characters_has_no_limit() -> None:
    nets = [f"n{k}" for k in range(3000)]
    card = "X1 " + "\n+ ".join(nets) + " BIG"
    assert one(card).nets == tuple(nets)


@pytest.mark.parametrize("encoding", ["utf-8", "utf-8-sig", "utf-16-le", "latin-1", "cp1252"])
@pytest.mark.parametrize("end", ["\n", "\r\n", "\r"])
def test_a_file_is_read_in_any_encoding_and_with_any_line_end(
    tmp_path: Path, encoding: str, end: str
) -> None:
    path = tmp_path / "hut.cir"
    path.write_bytes("* Hütte\nC1 a b 4.7µ\nR1 a b 2 ; 2 °\n".replace("\n", end).encode(encoding))
    found = read_circuit(path)
    assert found.title == "Hütte"
    assert [one.value for one in found.elements] == [4.7e-6, 2.0]
    assert element(found, "R1").span == Span(str(path), 3, 1)


def test_a_missing_netlist_is_one_error(tmp_path: Path) -> None:
    found = read_circuit(tmp_path / "hut.cir")
    assert [problem.what for problem in found.problems] == [
        f"there is no file '{tmp_path / 'hut.cir'}'"
    ]


@pytest.mark.parametrize(
    "card",
    [
        ".tran 1u 1m",
        ".MEAS TRAN x MAX V(a)\n+ FROM=0",
        ".options reltol=1m",
        ".probe",
        ".ic V(a)=1",
    ],
)
def test_analysis_cards_are_passed_over(card: str) -> None:
    found = circuit(f"R1 a b 1\n{card}\n")
    assert (names(found), found.problems) == (["R1"], ())


def test_unknown_dot_cards_are_noted_once_a_kind() -> None:
    found = circuit("R1 a b 1\n.xyz {(\n+ more\n.xyz 2\n.uvw\n")
    assert notes(found) == [
        "3:1: .xyz cards are not known here and are skipped",
        "6:1: .uvw cards are not known here and are skipped",
    ]


def test_conditional_cards_are_an_error_since_every_branch_is_read() -> None:
    found = circuit("R1 a b 1\n.if (x)\nR2 a b 1\n.endif\n")
    assert errors(found)[0] == "3:1: .if is not evaluated: the cards of every branch are read"
