"""Netlists made to cost much or to break the reader: each ends soon, with its reason named."""

from time import process_time

import pytest

from rulecheck.netlist import Access, Circuit, read_circuit_text
from rulecheck.reading import SourceText
from rulecheck.values import Limits, errors_of
from tests.kit.netlists import circuit, errors, names

SOON = 4.0
"""Seconds of processor time, several times what any of these takes; what blows up takes hours."""


def read_soon(text: str, access: Access | None = None) -> Circuit:
    start = process_time()
    source = SourceText("hut.cir", text)
    found = read_circuit_text(source, access) if access else read_circuit_text(source)
    assert process_time() - start < SOON
    return found


def said(found: Circuit) -> str:
    return "; ".join(problem.line() for problem in errors_of(found.problems))


@pytest.mark.parametrize(
    ("cards", "reason"),
    [
        ("R1 a b " + "(" * 20_000 + "1" + ")" * 20_000, "nested more than 40 deep"),
        ("R1 a b " + "{" * 20_000, "nested more than 40 deep"),
        (".model D1 D" + "(" * 20_000 + "\nD2 a b D1", "nested more than 40 deep"),
        ("R1 a b {" + "(" * 39 + "1" + ")" * 39 + "}\nR2 a b {x}\n.param x='" + "(" * 60 + "1'",
         "nested more than 40 deep"),
        ("R1 a b {" + "+".join(["1"] * 20_000) + "}", "expression of more than 20000 characters"),
        ("R1 a b {f(120)}\n.func f(x) {f(x-1)+f(x-1)}", "refers to itself, or too deep"),
        ("R1 a b {f30(1)}\n.func f0(x) {x}\n"
         + "\n".join(f".func f{k}(x) {{f{k - 1}(x)+f{k - 1}(x)}}" for k in range(1, 31)),
         "takes more than 100000 steps"),
        ("R1 a b {p0}\n" + "\n".join(f".param p{k}={{p{k + 1}}}" for k in range(900)),
         "refers to itself, or too deep"),
        ("D1 a k M0\n" + "\n".join(f".model M{k} AKO:M{k + 1} D(N=1)" for k in range(2000)),
         "inherits from 'M40', which is not there"),
    ],
)  # fmt: skip
def test_depth_and_length_are_bounded_and_named(cards: str, reason: str) -> None:
    assert reason in said(read_soon(f"hut\n{cards}\nR9 a b 1\n"))


@pytest.mark.parametrize(
    "cards",
    [
        "\n".join(["*encstart"] * 20_000),
        "*" + "enc" * 200_000,
        "*" + "begin" + " " * 300_000 + "encr",
        "\n" * 19_000 + "x",
        "R1 a b " + "1" * 500_000,
        "R" + "1" * 10_000 + " a b 1\nR" + "1" * 9_999 + "2 a b 1\nR2 GND" + "3" * 9_000 + " b 1",
        "X1 " + "/a b/c " * 20_000 + "SUB",
        "R1 a b 1k " + "~{" * 200_000,
        "R1 a b " + "\"'" * 100_000,
        "B1 a 0 V=" + "v(a)+" * 20_000 + "1",
        "\n".join(f"R{k} a b {{undefined{k}}}" for k in range(3000))
        + "\n"
        + "\n".join(f".param defined{k}=1" for k in range(3000)),
        "\n".join([".subckt A p"] * 20_000 + [".ends"] * 20_000),
        "\n".join([".subckt A p"] * 40 + [".ends B"] * 20_000),
        "K1 " + " ".join(f"L{k}" for k in range(20_000)) + " 0.9",
        "V1 a 0 PWL(" + " ".join(f"{k}u {k}" for k in range(10_000)) + ")",
        "V1 a 0 " + "word " * 20_000,
    ],
)
def test_length_and_number_cost_no_more_than_they_must(cards: str) -> None:
    read_soon(f"hut\nR0 a b 1\n{cards}\nR9 a b 1\n")


def test_a_million_nets_on_one_card_are_one_error_and_the_element_is_named() -> None:
    found = read_soon("hut\nX1 " + "net " * 1_000_000 + "SUB\nR9 a b 1\n")
    assert "hut.cir:2:1: error: a card of more than 250000 characters" in said(found)
    assert found.unread == ("X1",)
    assert names(found) == ["R9"]
    fewer = read_soon("hut\nX1 a b c SUB\n", Access(Limits((("card-characters", 10),))))
    assert "--limit card-characters=N" in said(fewer)


def doubling(depth: int) -> str:
    """Subcircuits of two instances each: as many elements as two to the power of the depth."""
    cells = [f".subckt A{k} p\nX1 p A{k + 1}\nX2 p A{k + 1}\n.ends" for k in range(depth)]
    return "\n".join(["hut", "X1 a A0", *cells, f".subckt A{depth} p\nR1 p 0 1\n.ends"]) + "\n"


def test_instances_that_multiply_are_stopped_and_no_part_is_taken_for_the_whole() -> None:
    limits = Limits((("elements", 3000),))
    found = read_soon(doubling(40), Access(limits))
    assert found.elements == ()
    assert "more than 3000 elements" in said(found)
    assert "--limit elements=N" in said(found)
    small = circuit(doubling(4).partition("\n")[2])
    assert len(small.elements) == 47


def test_flat_cards_count_too() -> None:
    text = "hut\n" + "".join(f"R{k} a b 1\n" for k in range(101))
    assert read_circuit_text(SourceText("hut.cir", text)).problems == ()
    found = read_circuit_text(SourceText("hut.cir", text), Access(Limits((("elements", 100),))))
    assert found.elements == ()


def test_definitions_and_instances_within_each_other_are_bounded() -> None:
    chain = "\n".join(f".subckt A{k} p\nX1 p A{k + 1}\n.ends" for k in range(60))
    found = read_soon(f"hut\nX1 a A0\n{chain}\n.subckt A60 p\nR1 p 0 1\n.ends\n")
    assert "stands within 50 instances" in said(found)
    deep = "\n".join([f".subckt A{k} p" for k in range(60)] + [".ends"] * 60)
    assert "is defined within 50 others" in said(read_soon(f"hut\nR1 a b 1\n{deep}\n"))
    allowed = Access(Limits((("subcircuit-depth", 100),)))
    assert (
        said(read_soon(f"hut\nX1 a A0\n{chain}\n.subckt A60 p\nR1 p 0 1\n.ends\n", allowed)) == ""
    )


@pytest.mark.parametrize(
    ("card", "place"),
    [
        ("R1 a b 1e999", "2:8"),
        ("R1 a b -1e999", "2:8"),
        ("R1 a b 1e308meg", "2:8"),
        ("R1 a b 1e-999", "2:8"),
        (f"R1 a b 1{'0' * 400}", "2:8"),
        ("R1 a b nan", "2:8"),
        ("R1 a b -Inf", "2:8"),
        ("R1 a b {1e999}", "2:9"),
        ("R1 a b {1e308*10}", "2:14"),
        ("R1 a b {exp(1e4)}", "2:9"),
        ("V1 a 0 DC 1e999", "2:11"),
        ("V1 a 0 PULSE(0 1e999 0 1n)", "2:16"),
        ("C1 a b 1u voltage=1e999", "2:19"),
        ("M1 d g s s FET m=infinity", "2:18"),
        ("D1 a k DX\n.model DX D(BV=1e999)", "3:1"),
        ("R1 a b {x}\n.param x=1e999", "3:10"),
    ],
)
def test_a_number_beyond_all_bounds_is_an_error_where_it_stands(card: str, place: str) -> None:
    found = circuit(card)
    assert errors(found)
    assert all(message.startswith(f"{place}: ") for message in errors(found))


@pytest.mark.parametrize("card", ["R1 inf nan 5", "R1 a b 1e-300", "D1 a k INF", "R1 a b {inf}"])
def test_names_that_look_endless_and_small_numbers_are_none(card: str) -> None:
    assert errors(circuit(card, title="hut\n.param inf=1e12")) == []
