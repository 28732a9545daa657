"""What must hold for every netlist: nothing is lost, nothing raises, notation changes nothing."""

import string
from pathlib import Path
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck.netlist import Circuit, Element, circuit_text, read_circuit, read_circuit_text
from rulecheck.reading import SourceText
from rulecheck.values import errors_of
from rulecheck.values.record import replace
from tests.kit.netlists import circuit

# The first parse of a process builds the parsers, so that no single run is held to a time.
STEADY = settings(deadline=None, derandomize=True)
GOLDEN = sorted((Path(__file__).parents[1] / "netlist" / "golden").glob("*.cir"))
NETS = st.sampled_from(["BUS", "PGND", "SW", "0", "G1", "/hut/OUT", "Net-(Q1-G)", "+12V"])
VALUES = st.sampled_from(["10k", "4.7u", "{k*2}", "1m", "'k+1'", "2"])

CARDS = (
    st.builds("R {} {} {}".format, NETS, NETS, VALUES)
    | st.builds("C {} {} {} voltage={}".format, NETS, NETS, VALUES, VALUES)
    | st.builds("D {} {} DX".format, NETS, NETS)
    | st.builds("M {} {} {} {} FET m=2".format, NETS, NETS, NETS, NETS)
    | st.builds("V {} {} PULSE(0 {} 0 1n)".format, NETS, NETS, VALUES)
    | st.builds("X {} {} CELL rg={}".format, NETS, NETS, VALUES)
    | st.builds("U {} {} {} DRV-2".format, NETS, NETS, NETS)
)
TAIL = """.param k=3
.model DX D(bv=600)
.model FET VDMOS(vds=100)
.subckt CELL p n rg=1
R1 p mid {rg}
C1 mid n 1u
.ends
"""


@st.composite
def decks(draw: st.DrawFn) -> list[str]:
    """Cards with names of their own, in the order of their numbers."""
    bodies = draw(st.lists(CARDS, min_size=1, max_size=8))
    return [f"{body[0]}{number}{body[1:]}" for number, body in enumerate(bodies, 1)]


def meaning(of: Circuit) -> dict[str, Any]:
    """All of every element but its place; names and texts without regard to case."""
    return {element.name.lower(): _folded(element) for element in of.elements}


def _folded(element: Element) -> tuple[Any, ...]:
    return (
        element.letter,
        tuple(net.lower() for net in element.nets),
        element.value if isinstance(element.value, float) else None,
        element.text.lower().split(),
        {key: str(value).lower() for key, value in element.parameters.items()},
        element.model and (element.model.name.lower(), dict(element.model.parameters)),
        element.waveform and (element.waveform.kind, element.waveform.values),
        element.instance.lower(),
    )


@given(decks(), st.randoms(use_true_random=False))
@STEADY
def test_the_order_of_cards_changes_nothing(cards: list[str], random: Any) -> None:
    shuffled = cards + TAIL.partition(".subckt")[0].splitlines()
    random.shuffle(shuffled)
    head = TAIL[TAIL.index(".subckt") :]
    assert meaning(circuit(head + "\n".join(shuffled) + "\n")) == meaning(
        circuit("\n".join(cards) + "\n" + TAIL)
    )


@given(decks(), st.sampled_from([str.upper, str.lower, str.swapcase]))
@STEADY
def test_letter_case_changes_nothing(cards: list[str], change: Any) -> None:
    text = "\n".join(cards) + "\n" + TAIL
    assert meaning(circuit(change(text))) == meaning(circuit(text))


BREAKS = st.sampled_from([" ", "  ", "\t", "\n+ ", "\n +", "\n* remark\n+ ", "\n\n+ ", " ; x\n+ "])


@given(decks(), st.data())
@STEADY
def test_blanks_and_continuations_change_nothing(cards: list[str], data: st.DataObject) -> None:
    text = "\n".join(cards) + "\n" + TAIL
    pieces = text.split(" ")
    broken = pieces[0]
    for piece in pieces[1:]:
        broken += data.draw(BREAKS) + piece
    assert meaning(circuit(broken)) == meaning(circuit(text))


@given(decks(), st.sampled_from(["\r\n", "\r"]), st.sampled_from(["utf-8-sig", "utf-16-le"]))
@settings(STEADY, max_examples=20)
def test_encodings_and_line_ends_change_nothing(
    tmp_path_factory: pytest.TempPathFactory, cards: list[str], end: str, encoding: str
) -> None:
    text = "hut\n" + "\n".join(cards) + "\n" + TAIL
    path = tmp_path_factory.mktemp("hut") / "hut.cir"
    path.write_bytes(text.replace("\n", end).encode(encoding))
    assert meaning(read_circuit(path)) == meaning(read_circuit_text(SourceText("hut.cir", text)))


@given(decks())
@STEADY
def test_a_card_in_a_subcircuit_means_what_it_means_outside(cards: list[str]) -> None:
    body = "\n".join(cards) + "\n"
    flat = meaning(circuit(body + TAIL))
    inside = meaning(circuit(f"XTOP spare HUT\n.subckt HUT nothing\n{body}.ends\n{TAIL}"))
    del inside["xtop"]
    expected = {f"xtop.{name}": _moved(fields) for name, fields in flat.items()}
    assert inside == expected


def _moved(fields: tuple[Any, ...]) -> tuple[Any, ...]:
    letter, nets, *others, instance = fields
    moved = tuple(net if net == "0" else f"xtop.{net}" for net in nets)
    return (letter, moved, *others, f"xtop.{instance}" if instance else "xtop")


@given(decks())
@STEADY
def test_a_plain_card_is_split_as_the_grammar_splits_it(cards: list[str]) -> None:
    """A parameter in braces sends a card of mere words through the grammar."""
    plain = [card for card in cards if "(" not in card and "{" not in card]
    found = circuit("\n".join(plain) + "\n" + TAIL)
    through = circuit("".join(f"{card} zz={{1}}\n" for card in plain) + TAIL)
    without = [
        replace(one, parameters={k: v for k, v in one.parameters.items() if k != "zz"})
        for one in through.elements
    ]
    assert without == list(found.elements)


WORDS = st.text(
    st.sampled_from(string.ascii_letters + string.digits + "+-/_.$~#:@()={},'\"; "), max_size=40
)


@given(st.lists(st.tuples(st.sampled_from(string.ascii_uppercase), WORDS), max_size=10))
@settings(STEADY, max_examples=300)
def test_no_card_disappears(cards: list[tuple[str, str]]) -> None:
    names = [f"{letter}{number}" for number, (letter, _) in enumerate(cards)]
    rows = [f"{name} {rest}" for name, (_, rest) in zip(names, cards, strict=True)]
    found = circuit("\n".join(rows) + "\nR999 a b 1\n")
    kept = {element.name for element in found.elements} | set(found.unread)
    assert {"R999", *names} <= kept
    if found.unread:
        assert errors_of(found.problems)


@given(st.text(max_size=300))
@settings(STEADY, max_examples=300)
def test_no_text_raises(text: str) -> None:
    circuit_text(read_circuit_text(SourceText("hut.cir", text)))
    circuit_text(circuit(text))


@given(st.binary(max_size=300))
@STEADY
def test_no_bytes_raise(tmp_path_factory: pytest.TempPathFactory, data: bytes) -> None:
    path = tmp_path_factory.mktemp("hut") / "hut.cir"
    path.write_bytes(data)
    circuit_text(read_circuit(path))


PIECES = st.sampled_from(
    ["(", ")", "{", "}", "'", '"', "=", ",", "\n", "\n+", " ", ".", ";", "$", "*", "\t", "0", "Ω",
     ".subckt A p\n", ".ends\n", ".param x={x}\n", "\nX9 a A\n", ".end\n", ".lib q\n", "AKO:",
     "POLY(2)"]
)  # fmt: skip


@given(st.sampled_from(GOLDEN), st.lists(st.tuples(st.integers(0, 2000), PIECES), max_size=8))
@settings(STEADY, max_examples=200)
def test_a_damaged_netlist_never_raises_and_every_problem_has_a_place(
    path: Path, damage: list[tuple[int, str]]
) -> None:
    text = path.read_text(encoding="utf-8")
    for position, piece in damage:
        place = position % len(text)
        text = text[:place] + piece + text[place + position % 3 :]
    found = read_circuit_text(SourceText("hut.cir", text))
    rows = text.split("\n")
    for problem in found.problems:
        assert 1 <= problem.span.line <= len(rows) + 1
        assert problem.span.column >= 1
        assert problem.what
