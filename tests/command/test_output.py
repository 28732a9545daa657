"""Reports are written whole or not at all, and never over an input."""

import os
import stat
import subprocess
import sys

import pytest

from rulecheck.cli.output import Document, refused, write_documents, write_whole
from tests.command.running import ROOT


def test_a_file_is_replaced_whole_and_keeps_its_mode(tmp_path):
    target = tmp_path / "out.json"
    target.write_text("old", encoding="utf-8")
    target.chmod(0o640)
    assert write_documents([Document("new\n", str(target))]) == ()
    assert target.read_bytes() == b"new\n"
    assert stat.S_IMODE(target.stat().st_mode) == 0o640
    assert os.listdir(tmp_path) == ["out.json"]


def test_a_failed_write_leaves_the_old_file_and_no_litter(tmp_path, monkeypatch):
    target = tmp_path / "out.json"
    target.write_text("old", encoding="utf-8")
    monkeypatch.setattr(os, "fsync", lambda descriptor: os.write(-1, b""))
    (problem,) = write_documents([Document("new", str(target))])
    assert "cannot be written" in problem.what
    assert target.read_text(encoding="utf-8") == "old"
    assert os.listdir(tmp_path) == ["out.json"]


def test_no_file_is_touched_before_all_are_complete(tmp_path, monkeypatch):
    """The second takes its place only when the third, too, lies complete beside its target."""
    replaced = []
    monkeypatch.setattr(os, "replace", lambda old, new: replaced.append(len(os.listdir(tmp_path))))
    write_documents([Document("a", str(tmp_path / name)) for name in ("1", "2", "3")])
    assert replaced == [3, 3, 3]


def test_a_half_of_a_pair_of_signs_is_written_as_its_code(tmp_path):
    write_whole(tmp_path / "out.txt", "half\ud800")
    assert (tmp_path / "out.txt").read_text(encoding="utf-8") == "half\\ud800"


@pytest.mark.parametrize("there", [True, False])
def test_a_link_in_the_place_of_an_output_is_refused_and_not_followed(there, tmp_path):
    """A repository of somebody else's may hold a link to any file of whoever checks it."""
    precious = tmp_path / "precious"
    if there:
        precious.write_text("old", encoding="utf-8")
    (tmp_path / "out.json").symlink_to(precious)
    (problem,) = write_documents([Document("new", str(tmp_path / "out.json"))])
    assert (
        problem.what == f"cannot be written: it is a link to '{precious}'; name that file, or "
        "delete it"
    )
    assert precious.exists() is there
    assert not there or precious.read_text(encoding="utf-8") == "old"


def test_standard_output_is_written_to_under_its_name_in_dev(tmp_path):
    program = (
        "from rulecheck.cli.output import Document, write_documents as write\n"
        "print(write([Document('text', '/dev/stdout')]), end='')"
    )
    for sink in (subprocess.PIPE, (tmp_path / "out").open("wb")):
        done = subprocess.run(
            [sys.executable, "-c", program], stdout=sink, cwd=ROOT, check=True, encoding="utf-8"
        )
        written = done.stdout if sink == subprocess.PIPE else (tmp_path / "out").read_text()
        assert written == "text()"


def test_a_pipe_that_nobody_reads_is_an_error_and_nobody_waits(tmp_path):
    os.mkfifo(tmp_path / "pipe")
    (problem,) = write_documents([Document("x", str(tmp_path / "pipe"))])
    assert "cannot be written" in problem.what


def test_a_full_disk_behind_standard_output_is_one_line_and_status_2():
    with open("/dev/full", "wb") as full:
        done = subprocess.run(
            [sys.executable, "-m", "rulecheck", "schema", "sheet"],
            stdout=full, stderr=subprocess.PIPE, cwd=ROOT, check=False, encoding="utf-8",
        )  # fmt: skip
    assert done.returncode == 2
    assert done.stderr.count("\n") == 1
    assert "standard output: No space left on device" in done.stderr


def test_a_file_that_cannot_be_written_is_an_error_with_a_remedy(tmp_path):
    (problem,) = write_documents([Document("x", str(tmp_path / "nowhere" / "out.json"))])
    assert problem.line().startswith(f"{tmp_path}/nowhere/out.json:1:1: error: cannot be written")


def test_a_device_is_written_to_directly():
    assert write_documents([Document("x", os.devnull)]) == ()


def test_an_input_is_refused_under_any_of_its_names(tmp_path):
    netlist = tmp_path / "hut.cir"
    netlist.write_text("*\n", encoding="utf-8")
    (tmp_path / "alias.cir").symlink_to(netlist)
    same = [str(tmp_path / "." / "hut.cir"), str(tmp_path / "alias.cir")]
    assert len(refused(same, [str(netlist)])) == 2
    assert refused([str(tmp_path / "new.json")], [str(netlist)]) == ()


def test_standard_output_is_a_dash_or_no_name(capsys):
    assert write_documents([Document("a", None), Document("b", "-")]) == ()
    assert capsys.readouterr().out == "ab"
