"""Keys of part data: what of a card they may name."""

from rulecheck.netlist import read_circuit_text
from rulecheck.parts import identify_parts, read_part_data
from rulecheck.reading import SourceText

DATA = 'parts: {"CE-160": {kind: capacitor, ratings: {voltage: 160 V}}}\n'


def test_a_key_names_a_passive_by_the_type_behind_its_value() -> None:
    circuit = read_circuit_text(SourceText("t.cir", "* t\nC1 BUS 0 470u CE-160\n.end\n"))
    parts = identify_parts(circuit, read_part_data([SourceText("t.parts.yaml", DATA)]))
    assert parts.by_name["C1"].data["ratings.voltage"].value == 160.0
    assert parts.by_name["C1"].value == 470e-6
    assert not parts.problems
