"""`rules`: the list, a page, the vocabulary, and the examples that packs carry."""

import pytest

from rulecheck.rulebook import IN_FORCE, PROFILES
from tests.command.running import run


def test_the_list_names_level_subject_and_pack_and_what_the_project_changes(hut):
    listed = run("rules", folder=hut).stdout
    assert "reverse-current-path" in listed
    assert "spare-on-the-shelf" in listed
    assert "plain-80-percent" in listed


def test_a_rule_is_its_own_manual_page(tmp_path):
    page = run("rules", "reverse-current-path", folder=tmp_path).stdout
    for words in ("  why ", "  remedy ", "  source ", "  example"):
        assert words in page


def test_an_unknown_rule_is_corrected(tmp_path):
    done = run("rules", "reverse-current-pat", folder=tmp_path)
    assert done.returncode == 2
    assert "did you mean 'reverse-current-path'?" in done.stderr


def test_the_vocabulary_names_every_subject(tmp_path):
    printed = run("rules", "--facts", folder=tmp_path).stdout
    for subject in ("stage", "net", "part", "position", "leg", "inductor", "free-path"):
        assert f"\n{subject}: " in f"\n{printed}"


def test_every_shipped_example_says_what_it_should(tmp_path):
    done = run("rules", "--try", folder=tmp_path)
    assert (done.returncode, done.stderr) == (0, "")
    assert done.stdout.endswith(": all as expected\n")


def test_a_team_pack_is_tried_alone(hut):
    assert run("rules", "--try", "hut.rules.yaml", folder=hut).stdout == (
        "2 examples of 1 rule: all as expected\n"
    )


def test_an_example_that_says_something_else_fails(hut):
    pack = hut / "hut.rules.yaml"
    text = pack.read_text(encoding="utf-8")
    pack.write_text(text.replace("expect: holds", "expect: broken"), encoding="utf-8")
    done = run("rules", "--try", "hut.rules.yaml", folder=hut)
    assert done.returncode == 1
    assert "hut.rules.yaml:" in done.stdout
    assert "should be broken and is holds" in done.stdout


def test_a_pack_with_mistakes_is_unusable(hut):
    pack = hut / "hut.rules.yaml"
    text = pack.read_text(encoding="utf-8")
    pack.write_text(text.replace("matches", "maches").replace("source:", "sauce:"), "utf-8")
    done = run("lint", folder=hut)
    assert done.returncode == 2
    assert done.stdout == ""
    assert len(done.stderr.splitlines()) >= 2
    assert all(line.startswith("hut.rules.yaml:") for line in done.stderr.splitlines())


@pytest.mark.parametrize("pack", [*IN_FORCE, *PROFILES])
def test_every_shipped_pack_can_be_named(pack, hut):
    done = run("lint", "battery-bus.cir", "--rules", pack, folder=hut)
    assert done.stderr == ""


def test_a_pack_that_is_not_there_is_corrected(hut):
    done = run("lint", "battery-bus.cir", "--rules", "derating/rac-sever", folder=hut)
    assert done.returncode == 2
    assert "did you mean 'derating/rac-severe'?" in done.stderr


def test_a_rule_that_is_switched_off_is_named_with_its_reason(hut):
    off = "pack: off\nchange:\n  - {rule: reverse-current-path, off: true, reason: only a trial}\n"
    (hut / "off.rules.yaml").write_text(off, encoding="utf-8")
    done = run("lint", "battery-bus-faulty.cir", "--rules", "off.rules.yaml", folder=hut)
    assert "rule switched off: reverse-current-path, by off: only a trial" in done.stdout


def test_a_record_makes_the_known_findings_pass_and_new_ones_fail(hut):
    twin = "battery-bus-faulty.cir"
    assert run("lint", twin, "--record", "known.json", folder=hut).returncode == 1
    same = run("lint", twin, "--since", "known.json", folder=hut)
    assert same.returncode == 0
    assert "in the record: Q1" in same.stdout
    netlist = hut / twin
    text = netlist.read_text(encoding="utf-8")
    netlist.write_text("* one line more\n" + text.replace("Q3 SW G3 LEGRET SW-N200-9",
                       "Q3 SW G3 LEGRET IG-600-100").replace("Q4 SW G4 LEGRET SW-N200-9",
                       "Q4 SW G4 LEGRET IG-600-100"), encoding="utf-8")  # fmt: skip
    worse = run("lint", twin, "--since", "known.json", folder=hut)
    assert worse.returncode == 1
    assert "error: Q3" in worse.stdout
    assert "error: Q1" not in worse.stdout


def test_a_record_that_is_none_is_an_error(hut):
    done = run("lint", "battery-bus.cir", "--since", "rulecheck.yaml", folder=hut)
    assert done.returncode == 2
    assert "no record of findings" in done.stderr


def test_deviations_excuse_expire_and_go_unused(hut):
    project = hut / "rulecheck.yaml"
    text = project.read_text(encoding="utf-8")
    done = run("lint", folder=hut)
    assert "note: excused: Q1" in done.stdout
    assert "[deviation-expired]" in done.stdout
    project.write_text(text.replace("subject: Q*", "subject: Z*"), encoding="utf-8")
    assert "[deviation-unused]" in run("lint", folder=hut).stdout
    part = run("lint", "battery-bus.cir", folder=hut)
    assert "[deviation-unused]" not in part.stdout


def test_no_record_is_written_where_a_netlist_could_not_be_analysed(hut):
    done = run("lint", "battery-bus.cir", "no.cir", "--record", "known.json", folder=hut)
    assert done.returncode == 2
    assert "no.cir could not be analysed" in done.stdout
    assert not (hut / "known.json").exists()
