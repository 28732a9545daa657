"""A file that is no netlist is named as what it seems to be, in one error."""

from pathlib import Path

import pytest

from rulecheck.netlist import read_circuit, read_circuit_text
from rulecheck.reading import SourceText


@pytest.mark.parametrize(
    ("text", "what"),
    [
        ("", "the file is empty"),
        ("  \n\n\t\n", "the file is empty"),
        ('"U1","PIN 1","BUS"\n"U1","PIN 2","SW"\n"C1","1","BUS"\n', "a table in quotes"),
        ('(export (version 1)\n  (design\n    (source "hut")\n  )\n)\n', "a list in parentheses"),
        ('(netlist (net "BUS"))', "a list in parentheses"),
        ("[Schematic]\nversion=3\n[Component]\nname=R1\nvalue=10k\n", "sections and settings"),
        ("[Deck]\nR1 a b 10k\nC1 a b 1u\n[End]\n", "sections and settings"),
        ("<!DOCTYPE html>\n<html><body>not found</body></html>\n", "a web page"),
        ("* models\n.model DX D\n<html>\n<p>gone</p>\n", "a web page"),
        ('<?xml version="1.0"?>\n<net/>\n', "marked-up text"),
        ('{"parts": [1, 2]}\n', "a JSON file"),
        ("ports:\n  bank:\n    voltage: 48 V\nparts:\n  - x\n", "a YAML file"),
    ],
)
def test_text_that_is_no_netlist(text: str, what: str) -> None:
    found = read_circuit_text(SourceText("hut.cir", text))
    assert len(found.problems) == 1
    assert what in found.problems[0].what
    assert found.problems[0].remedy == "give a SPICE-style netlist: export it from the schematic"
    assert found.elements == ()


def test_a_binary_file(tmp_path: Path) -> None:
    path = tmp_path / "hut.cir"
    path.write_bytes(bytes(range(256)) * 20)
    assert [one.what for one in read_circuit(path).problems] == [
        "this is no netlist; it seems to be a binary file"
    ]


@pytest.mark.parametrize(
    ("text", "what"),
    [
        ("hut\n.end\n", "the netlist has a title and no element"),
        ("hut\n.model DX D\n", "the file defines subcircuits or models and has no element"),
        ("hut\n.subckt A p\nR1 p 0 1\n.ends\n", "the file defines subcircuits or models and has"),
        (
            "Notes\nThe hut stands high.\nIts roof is new.\nWater comes by itself.\n",
            "no card is an element that a netlist has",
        ),
    ],
)
def test_a_netlist_without_elements(text: str, what: str) -> None:
    found = read_circuit_text(SourceText("hut.cir", text))
    assert len(found.problems) == 1
    assert found.problems[0].what.startswith(what)


@pytest.mark.parametrize(
    "title",
    ["(hut) inverter", "[hut]", "<hut>", '"hut", "inverter"', "{hut}", "hut: inverter", "# hut",
     "* <body diode test>"],
)  # fmt: skip
def test_a_strange_title_makes_no_foreign_file(title: str) -> None:
    found = read_circuit_text(SourceText("hut.cir", f"{title}\nR1 a b 10k\nC1 a b C=1u\n"))
    assert found.problems == ()
    assert len(found.elements) == 2
