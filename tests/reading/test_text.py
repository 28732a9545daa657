"""A file is opened whatever wrote it."""

from pathlib import Path

import pytest

from rulecheck.reading import SourceText, read_text
from rulecheck.values import Problem

TEXT = "hut\nC1 BUS 0 4.7µ\n"


@pytest.mark.parametrize(
    "data",
    [
        TEXT.encode("utf-8"),
        b"\xef\xbb\xbf" + TEXT.encode("utf-8"),
        TEXT.encode("latin-1"),
        TEXT.encode("cp1252"),
        b"\xff\xfe" + TEXT.encode("utf-16-le"),
        b"\xfe\xff" + TEXT.encode("utf-16-be"),
        TEXT.encode("utf-16-le"),
        TEXT.encode("utf-16-be"),
        TEXT.replace("\n", "\r\n").encode("utf-8"),
        TEXT.replace("\n", "\r").encode("utf-8"),
        TEXT.encode("utf-8") + b"\x1aleftover \xff\xfe",
        TEXT.encode("utf-16-le") + "\x1aleftover".encode("utf-16-le"),
    ],
)
def test_every_encoding_and_line_end_gives_the_same_text(tmp_path: Path, data: bytes) -> None:
    path = tmp_path / "hut.cir"
    path.write_bytes(data)
    assert read_text(path) == SourceText(str(path), TEXT)


def test_a_byte_that_no_code_page_has_does_not_fail(tmp_path: Path) -> None:
    path = tmp_path / "hut.cir"
    path.write_bytes(b"hut \x81\xe9\n")
    found = read_text(path)
    assert isinstance(found, SourceText)
    assert found.text == "hut \x81é\n"


def test_a_missing_file_is_a_problem_that_names_the_nearest(tmp_path: Path) -> None:
    (tmp_path / "hut.cir").write_text(TEXT)
    found = read_text(tmp_path / "hutt.cir")
    assert isinstance(found, Problem)
    assert "there is no file" in found.what
    assert found.remedy == f"did you mean '{tmp_path / 'hut.cir'}'?"


@pytest.mark.parametrize(
    ("name", "what"),
    [("", "is a directory"), ("nowhere/hut.cir", "there is no file"), ("hut.cir/x", "cannot be")],
)
def test_what_is_no_file_is_a_problem(tmp_path: Path, name: str, what: str) -> None:
    (tmp_path / "hut.cir").write_text(TEXT)
    found = read_text(tmp_path / name)
    assert isinstance(found, Problem)
    assert what in found.what
    assert found.remedy
