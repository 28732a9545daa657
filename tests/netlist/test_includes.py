"""Included files: found by path or base name, once, without cycles."""

from pathlib import Path

import pytest

from rulecheck.netlist import Circuit, read_circuit
from rulecheck.values import Gravity, Span
from tests.kit.netlists import names


def read(folder: Path, files: dict[str, str]) -> Circuit:
    for name, text in files.items():
        path = folder / name
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_text(text, encoding="utf-8")
    return read_circuit(folder / "hut.cir")


@pytest.mark.parametrize(
    ("card", "file"),
    [
        (".include models.lib", "models.lib"),
        (".INC models.lib", "models.lib"),
        (".lib models.lib", "models.lib"),
        ('.include "models.lib"', "models.lib"),
        (".include 'models.lib' ; ours", "models.lib"),
        (".include hut models.lib", "hut models.lib"),
        (".lib hut models.lib", "hut models.lib"),
        (".include parts/models.lib", "parts/models.lib"),
        (".include parts\\models.lib", "parts/models.lib"),
        (".include C:\\hut of old\\models.lib", "models.lib"),
        (".include /nowhere/models.lib", "models.lib"),
        (".include MODELS.LIB", "models.lib"),
        (".include ./models.lib", "models.lib"),
    ],
)
def test_an_included_file_is_found(tmp_path: Path, card: str, file: str) -> None:
    found = read(tmp_path, {"hut.cir": f"hut\nD1 a k DX\n{card}\n", file: ".model DX D(BV=600)\n"})
    assert found.problems == ()
    assert found.elements[0].model is not None
    assert found.elements[0].model.span == Span(str(tmp_path / file), 1, 1)


def test_the_first_line_of_an_included_file_is_a_card_and_paths_are_relative_to_it(
    tmp_path: Path,
) -> None:
    found = read(
        tmp_path,
        {
            "hut.cir": "hut\n.include lib/a.inc\n",
            "lib/a.inc": "R1 a b 1\n.include b.inc\n.end\nR9 a b 1\n",
            "lib/b.inc": "R2 a b 1\n",
        },
    )
    assert names(found) == ["R1", "R2"]
    assert [problem.gravity for problem in found.problems] == [Gravity.NOTE]


def test_an_include_inside_a_definition_belongs_to_it(tmp_path: Path) -> None:
    found = read(
        tmp_path,
        {"hut.cir": "hut\nX1 a A\n.subckt A p\n.include a.inc\n.ends\n", "a.inc": "R1 p 0 1\n"},
    )
    assert names(found) == ["X1", "X1.R1"]


def test_a_missing_file_is_an_error_and_the_rest_is_read(tmp_path: Path) -> None:
    found = read(tmp_path, {"hut.cir": "hut\n.lib none.lib\nR1 a b 1\n"})
    assert names(found) == ["R1"]
    assert [problem.line() for problem in found.problems] == [
        f"{tmp_path / 'hut.cir'}:2:1: error: included file 'none.lib' is not there: what it "
        "defines is missing; put it beside this file, or correct the path"
    ]


def test_an_included_file_that_is_no_netlist_is_an_error(tmp_path: Path) -> None:
    page = "<!DOCTYPE html>\n<html><body>gone</body></html>\n"
    found = read(tmp_path, {"hut.cir": "hut\n.lib a.lib\nR1 a b 1\n", "a.lib": page})
    assert names(found) == ["R1"]
    assert [problem.what for problem in found.problems] == [
        f"included file '{tmp_path / 'a.lib'}': this is no netlist; it seems to be a web page"
    ]


@pytest.mark.parametrize("card", [".include", ".lib", '.include ""'])
def test_an_include_without_a_file_is_an_error(tmp_path: Path, card: str) -> None:
    found = read(tmp_path, {"hut.cir": f"hut\n{card}\nR1 a b 1\n"})
    assert [problem.gravity for problem in found.problems] == [Gravity.ERROR]


def test_a_cycle_of_files_is_an_error(tmp_path: Path) -> None:
    found = read(
        tmp_path,
        {
            "hut.cir": "hut\n.include a.inc\nR1 a b 1\n",
            "a.inc": ".include b.inc\nR2 a b 1\n",
            "b.inc": ".include hut.cir\nR3 a b 1\n",
        },
    )
    assert names(found) == ["R3", "R2", "R1"]
    assert [problem.what for problem in found.problems] == [
        "the file includes itself (hut.cir -> a.inc -> b.inc -> hut.cir)"
    ]
    assert found.problems[0].span == Span(str(tmp_path / "b.inc"), 1, 1)


def test_a_file_that_is_included_twice_is_read_once(tmp_path: Path) -> None:
    found = read(
        tmp_path, {"hut.cir": "hut\n.include a.inc\n.include a.inc\n", "a.inc": "R1 a b 1\n"}
    )
    assert names(found) == ["R1"]
    assert [problem.gravity for problem in found.problems] == [Gravity.NOTE]


LIBRARY = (
    ".param k=1\n.lib cold\n.model DX D(BV=500)\n.endl\n.lib hot\n.model DX D(BV=600)\n.endl hot\n"
)


@pytest.mark.parametrize("card", [".lib corners.lib HOT", '.lib "corners.lib" hot'])
def test_a_section_of_a_library(tmp_path: Path, card: str) -> None:
    found = read(tmp_path, {"hut.cir": f"hut\nD1 a k DX\n{card}\n", "corners.lib": LIBRARY})
    assert found.problems == ()
    assert found.elements[0].model is not None
    assert found.elements[0].model.parameters == {"bv": 600.0}


def test_a_section_that_is_not_there_is_an_error(tmp_path: Path) -> None:
    found = read(
        tmp_path, {"hut.cir": "hut\nD1 a k DX\n.lib corners.lib warm\n", "corners.lib": LIBRARY}
    )
    assert [problem.what for problem in found.problems] == ["the library has no section 'warm'"]
    assert found.problems[0].remedy == "it has cold, hot"


def test_problems_come_in_the_order_of_the_files(tmp_path: Path) -> None:
    found = read(
        tmp_path,
        {"hut.cir": "hut\nD1 a\n.include a.inc\nD2 a\n", "a.inc": "D3 a\n", "b.inc": ""},
    )
    assert [(Path(one.span.file).name, one.span.line) for one in found.problems] == [
        ("hut.cir", 2),
        ("hut.cir", 4),
        ("a.inc", 1),
    ]
    assert found.unread == ("D1", "D2", "D3")
