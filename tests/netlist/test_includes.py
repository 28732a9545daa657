"""Included files: found by path or base name, once, without cycles."""

import os
from pathlib import Path

import pytest

from rulecheck.netlist import ORDINARY, Access, Circuit, read_circuit, read_circuit_text
from rulecheck.reading import SourceText
from rulecheck.values import Gravity, Limits, Span
from tests.kit.netlists import names


def read(folder: Path, files: dict[str, str], access: Access = ORDINARY) -> Circuit:
    for name, text in files.items():
        path = folder / name
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_text(text, encoding="utf-8")
    return read_circuit(folder / "hut.cir", access)


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


SHARED = ".model DX D(BV=600)\n"


def stage_below(folder: Path, card: str) -> tuple[Path, dict[str, str]]:
    """A netlist in a folder of its own, with a library in the folder above."""
    (folder / "shared.lib").write_text(SHARED, encoding="utf-8")
    return folder / "stage", {"hut.cir": f"hut\nD1 a k DX\n{card}\n"}


@pytest.mark.parametrize("card", [".include ../shared.lib", ".lib ../stage/../shared.lib"])
def test_a_file_above_the_netlist_is_not_read_unless_its_folder_is_allowed(
    tmp_path: Path, card: str
) -> None:
    folder, files = stage_below(tmp_path, card)
    found = read(folder, files)
    assert found.elements[0].model is None
    assert [problem.remedy for problem in found.problems] == [
        "allow its folder with --include-dir FOLDER"
    ]
    allowed = read(folder, files, Access(folders=(tmp_path,)))
    assert allowed.problems == ()
    assert allowed.elements[0].model is not None


def test_a_file_is_looked_for_in_the_allowed_folders_too(tmp_path: Path) -> None:
    folder, files = stage_below(tmp_path, ".lib shared.lib")
    assert read(folder, files).elements[0].model is None
    assert read(folder, files, Access(folders=(tmp_path,))).elements[0].model is not None


def test_a_file_outside_is_named_alike_whether_it_is_there_or_not(tmp_path: Path) -> None:
    folder, files = stage_below(tmp_path, ".include ../shared.lib\n.include ../none.lib")
    said = [problem.what.replace("none", "shared") for problem in read(folder, files).problems]
    assert len(said) == 2
    assert len(set(said)) == 1


@pytest.mark.parametrize("link", ["shared.lib", "SHARED.LIB"])
def test_a_link_that_leads_out_of_the_folder_is_not_followed(tmp_path: Path, link: str) -> None:
    folder, files = stage_below(tmp_path, f".include {link}")
    folder.mkdir()
    (folder / "shared.lib").symlink_to(tmp_path / "shared.lib")
    found = read(folder, files)
    assert found.elements[0].model is None
    assert ["is not in the netlist's folder" in problem.what for problem in found.problems] == [
        True
    ]


def test_an_included_file_may_not_lead_out_of_the_folder_either(tmp_path: Path) -> None:
    folder, files = stage_below(tmp_path, ".include a.inc")
    found = read(folder, {**files, "a.inc": f".include {tmp_path / 'shared.lib'}\n"})
    assert found.elements[0].model is None
    assert [problem.span.file for problem in found.problems] == [str(folder / "a.inc")]


def test_an_included_pipe_or_device_is_not_opened(tmp_path: Path) -> None:
    os.mkfifo(tmp_path / "pipe.inc")
    (tmp_path / "zero.inc").symlink_to("/dev/zero")
    cards = ".include pipe.inc\n.include zero.inc\nR1 a b 1\n"
    found = read(tmp_path, {"hut.cir": f"hut\n{cards}"}, Access(folders=(Path("/dev"),)))
    assert names(found) == ["R1"]
    assert ["device, a pipe or a socket" in problem.what for problem in found.problems] == [
        True
    ] * 2


def test_a_text_that_is_no_file_includes_nothing(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    (tmp_path / "a.inc").write_text("R1 a b 1\n", encoding="utf-8")
    monkeypatch.chdir(tmp_path)
    source = SourceText("example.cir", "hut\n.include a.inc\nR2 a b 1\n")
    assert names(read_circuit_text(source)) == ["R1", "R2"]
    assert names(read_circuit_text(source, Access(beside=False))) == ["R2"]


def chain(length: int) -> dict[str, str]:
    """Files that include one another, each with a resistor of its own."""
    files = {f"{k}.inc": f".include {k + 1}.inc\nR{k} a b 1\n" for k in range(length)}
    return {"hut.cir": "hut\n.include 0.inc\n", **files, f"{length}.inc": "R999 a b 1\n"}


@pytest.mark.parametrize(
    ("limit", "files"),
    [
        ("include-depth", chain(8)),
        ("includes", {"hut.cir": "hut\n.include a.inc\n.include b.inc\n", "b.inc": "R1 a b 1\n"}
            | {"a.inc": "R2 a b 1\n"}),
        ("file-bytes", {"hut.cir": "hut\n.include a.inc\n", "a.inc": f"R2 a b 1\n*{'x' * 30}\n"}),
        ("file-bytes", {"hut.cir": "hut\n.include a.inc\n.include b.inc\n", "b.inc": "R1 a b 1\n"}
            | {"a.inc": "R2 a b 1\n"}),
    ],
)  # fmt: skip
def test_a_limit_of_includes_is_named_with_the_option_that_raises_it(
    tmp_path: Path, limit: str, files: dict[str, str]
) -> None:
    usual = read(tmp_path, files)
    assert usual.problems == ()
    low = {"include-depth": 5, "includes": 1, "file-bytes": 39}[limit]
    found = read_circuit(tmp_path / "hut.cir", Access(Limits(((limit, low),))))
    assert [f"--limit {limit}=N" in problem.remedy for problem in found.problems] == [True]
    assert len(found.elements) < len(usual.elements)


def test_one_file_in_many_definitions_counts_as_often_as_it_is_read(tmp_path: Path) -> None:
    blocks = "".join(f".subckt A{k} p\n.include a.inc\n.ends\n" for k in range(50))
    files = {"hut.cir": f"hut\nR1 a b 1\n{blocks}", "a.inc": f"R1 p 0 1\n*{'x' * 3000}\n"}
    assert read(tmp_path, files).problems == ()
    found = read_circuit(tmp_path / "hut.cir", Access(Limits((("file-bytes", 20_000),))))
    assert {problem.span.line for problem in found.problems} >= {40, 100}
