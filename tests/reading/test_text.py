"""A file is opened whatever wrote it."""

import os
from pathlib import Path

import pytest

from rulecheck.reading import SourceText, read_text
from rulecheck.values import Limits, Problem

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
    found = read_text(path)
    assert isinstance(found, SourceText)
    assert (found.file, found.text) == (str(path), TEXT)


def noted(folder: Path, data: bytes) -> list[str]:
    path = folder / "hut.cir"
    path.write_bytes(data)
    found = read_text(path)
    assert isinstance(found, SourceText)
    return [problem.line().removeprefix(f"{path}:") for problem in found.notes]


def test_what_had_to_be_guessed_about_the_signs_is_a_note_at_its_place(tmp_path: Path) -> None:
    assert noted(tmp_path, TEXT.encode("utf-8")) == []
    assert noted(tmp_path, TEXT.encode("utf-16")) == []
    assert noted(tmp_path, "hut\r\nR1 a b 4k7 ; für\r\n".encode("latin-1")) == [
        "2:15: note: byte 0xfc is no UTF-8, so that the whole file is read as Latin-1; "
        "save it as UTF-8 if signs look wrong"
    ]
    assert noted(tmp_path, b"\xff\xfe" + "hut\nR1".encode("utf-16-le") + b"\x00\xd8") == [
        "2:1: note: the file is UTF-16-LE by its first bytes, and something here is not; "
        "save it anew as UTF-8"
    ]


def test_a_pipe_is_not_read_and_nobody_waits_for_it(tmp_path: Path) -> None:
    os.mkfifo(tmp_path / "hut.cir")
    found = read_text(tmp_path / "hut.cir")
    assert isinstance(found, Problem)
    assert "is a device, a pipe or a socket" in found.what


@pytest.mark.parametrize("device", ["/dev/zero", "/dev/stdin", "/dev/tty"])
def test_a_device_is_not_read_under_any_name(tmp_path: Path, device: str) -> None:
    (tmp_path / "hut.cir").symlink_to(device)
    for path in (Path(device), tmp_path / "hut.cir"):
        found = read_text(path)
        assert isinstance(found, Problem)
        assert found.remedy


def test_a_file_beyond_the_limit_is_refused_with_the_option_that_raises_it(tmp_path: Path) -> None:
    path = tmp_path / "hut.cir"
    path.write_bytes(TEXT.encode())
    found = read_text(path, Limits((("file-bytes", 10),)))
    assert isinstance(found, Problem)
    assert found.what == "the file has more than 10 bytes"
    assert "--limit file-bytes=N" in found.remedy
    assert isinstance(read_text(path, Limits((("file-bytes", 100),))), SourceText)


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
