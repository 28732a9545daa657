"""The time to read stays small; limits are several times what it takes, to find what blows up."""

from time import process_time

import pytest

from rulecheck.netlist import read_circuit_text
from rulecheck.reading import SourceText

CARD = "R{0} n{0} n{1} 10k\n"
SOURCE = "V{0} n{0} 0 PULSE(0 {{v}} 0 1n)\n"
CELL = ".subckt CELL p m n\nM1 p g m m FET\nM2 m h n n FET\nC1 p n {c}\n.ends\n"


def seconds(text: str) -> float:
    start = process_time()
    found = read_circuit_text(SourceText("hut.cir", f"hut\n.param v=5 c=1u\n{text}"))
    assert found.problems == ()
    return process_time() - start


@pytest.mark.parametrize(("row", "limit"), [(CARD, 2.0), (SOURCE, 6.0)])
def test_four_thousand_cards(row: str, limit: float) -> None:
    assert seconds("".join(row.format(k, k + 1) for k in range(4000))) < limit


def test_two_thousand_instances() -> None:
    rows = "".join(f"X{k} a{k} b{k} 0 CELL\n" for k in range(2000))
    assert seconds(CELL + rows) < 5.0
