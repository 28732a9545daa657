"""Whole netlists and their canonical text; RULECHECK_REGENERATE=1 writes the texts anew."""

import os
from pathlib import Path

import pytest

from rulecheck.netlist import circuit_text, read_circuit_text
from rulecheck.reading import SourceText, read_text

FOLDER = Path(__file__).parent / "golden"


@pytest.mark.parametrize("path", sorted(FOLDER.glob("*.cir")), ids=lambda path: path.stem)
def test_the_canonical_text_of_a_netlist(path: Path) -> None:
    source = read_text(path)
    assert isinstance(source, SourceText)
    text = circuit_text(read_circuit_text(SourceText(path.name, source.text)))
    expected = path.with_suffix(".txt")
    if os.environ.get("RULECHECK_REGENERATE"):
        expected.write_text(text, encoding="utf-8")
    assert text == expected.read_text(encoding="utf-8")
