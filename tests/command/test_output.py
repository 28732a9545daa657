"""Reports are written whole or not at all, and never over an input."""

import os
import stat

import pytest

from rulecheck.cli.output import Document, refused, write_documents, write_whole


def test_a_file_is_replaced_whole_and_keeps_its_mode(tmp_path):
    target = tmp_path / "out.json"
    target.write_text("old", encoding="utf-8")
    target.chmod(0o640)
    assert write_documents([Document("new\n", str(target))]) == ()
    assert target.read_bytes() == b"new\n"
    assert stat.S_IMODE(target.stat().st_mode) == 0o640
    assert os.listdir(tmp_path) == ["out.json"]


def test_a_failed_write_leaves_the_old_file_and_no_litter(tmp_path):
    target = tmp_path / "out.json"
    target.write_text("old", encoding="utf-8")
    with pytest.raises(UnicodeEncodeError):
        write_whole(target, "half\ud800")
    assert target.read_text(encoding="utf-8") == "old"
    assert os.listdir(tmp_path) == ["out.json"]


def test_a_link_stays_a_link(tmp_path):
    (tmp_path / "real.json").write_text("old", encoding="utf-8")
    (tmp_path / "link.json").symlink_to("real.json")
    write_whole(tmp_path / "link.json", "new")
    assert (tmp_path / "link.json").is_symlink()
    assert (tmp_path / "real.json").read_text(encoding="utf-8") == "new"


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
