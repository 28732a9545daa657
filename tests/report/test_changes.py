"""What changed between two netlists: every sort of change once, and nothing where nothing did."""

import json

import pytest

from tests.command.running import run

OLD = """* leg
C1 BAT 0 470u voltage=80
L1 BAT SW 33u current=120
M1 BUS G1 SW SW FET blocking=200 current=120
M2 SW G2 0 0 FET blocking=200 current=120
R9 BUS 0 47k
C2 BUS 0 470u voltage=160
.model FET NMOS
.model BARE NPN
"""
SHEET = """ports:
  battery: {between: [BAT, 0], voltage: [42 V, 58 V], supplies: [-80 A, 80 A]}
  bus: {between: [BUS, 0], voltage: [90 V, 120 V]}
switching: {frequency: 50 kHz, dead-time: 300 ns}
"""


@pytest.fixture
def two(tmp_path):
    """`changed(netlist, sheet)` writes new.cir beside old.cir and returns what JSON says of it."""
    (tmp_path / "old.cir").write_text(OLD, encoding="utf-8")
    (tmp_path / "old.stage.yaml").write_text(SHEET, encoding="utf-8")

    def changed(netlist=OLD, sheet=SHEET):
        (tmp_path / "new.cir").write_text(netlist, encoding="utf-8")
        (tmp_path / "new.stage.yaml").write_text(sheet, encoding="utf-8")
        done = run("lint", "new.cir", "--against", "old.cir", "--format", "json", folder=tmp_path)
        assert done.stderr == ""
        return json.loads(done.stdout)["changes"]

    return changed


def rows(changes, group):
    return [(c["subject"], c["what"], c["old"], c["new"]) for c in changes[group]]


def test_the_same_netlist_with_its_cards_in_another_order_has_not_changed(two):
    first, *cards = OLD.splitlines()
    changes = two("\n".join([first, *reversed(cards)]) + "\n")
    assert changes == {
        "against": "old.cir", "findings": [], "positions": [], "parts": [], "ports": [],
    }  # fmt: skip


def test_a_value_is_compared_to_its_last_digit(two):
    changes = two(OLD.replace("L1 BAT SW 33u", "L1 BAT SW 33.0001u"))
    assert ("L1", "value", "33 uH", "33.0001 uH") in rows(changes, "parts")


def test_parts_that_come_and_go_are_named_with_their_nets(two):
    changes = two(OLD.replace("R9 BUS 0 47k", "R10 BUS 0 33k"))
    assert ("R9", "", "resistor 47k on BUS, 0", None) in rows(changes, "parts")
    assert ("R10", "", None, "resistor 33k on BUS, 0") in rows(changes, "parts")


def test_another_device_changes_what_the_position_can_do_and_brings_a_finding(two):
    changes = two(OLD.replace("M1 BUS G1 SW SW FET", "Q1 BUS G1 SW BARE"))
    assert ("Q1", "", None) in [row[:3] for row in rows(changes, "positions")]
    assert ("M1", "", None) in [(*row[:2], row[3]) for row in rows(changes, "positions")]
    assert ("Q1", "reverse-current-path") in [row[:2] for row in rows(changes, "findings")]


def test_another_range_at_a_port_changes_the_demand(two):
    changes = two(sheet=SHEET.replace("[90 V, 120 V]", "[90 V, 110 V]"))
    assert rows(changes, "ports") == [("bus", "voltage", "90 V … 120 V", "90 V … 110 V")]
    assert ("M1", "must block", "90 … 120 V", "90 … 110 V") in rows(changes, "positions")


def test_another_dead_time_is_a_change(two):
    changes = two(sheet=SHEET.replace("300 ns", "200 ns"))
    assert ("switching", "dead time", "300 ns", "200 ns") in rows(changes, "ports")


def test_a_finding_that_is_gone_is_told(tmp_path):
    faulty = OLD.replace("SW SW FET blocking=200", "SW SW FET blocking=100")
    (tmp_path / "old.cir").write_text(faulty, encoding="utf-8")
    (tmp_path / "new.cir").write_text(OLD, encoding="utf-8")
    for name in ("old", "new"):
        (tmp_path / f"{name}.stage.yaml").write_text(SHEET, encoding="utf-8")
    done = run("lint", "new.cir", "--against", "old.cir", "--format", "lines", folder=tmp_path)
    assert "new.cir:4:1: note: changed: M1: blocks forward was 100 V, is 200 V" in done.stdout
    assert "changed: M1: blocking-rating gone: error, must hold off 90 V to 120 V" in done.stdout


def test_the_table_and_the_markdown_show_the_changes(hut):
    for form in ("table", "markdown"):
        done = run("lint", "battery-bus-faulty.cir", "--against", "battery-bus.cir",
                   "--format", form, folder=hut)  # fmt: skip
        assert "Changed since battery-bus.cir: positions" in done.stdout
        assert "carries reverse was 190 A, is no" in done.stdout


def test_the_log_for_scanners_says_which_findings_are_new(hut):
    done = run("lint", "battery-bus-faulty.cir", "--against", "battery-bus.cir",
               "--format", "sarif", folder=hut)  # fmt: skip
    (found,) = json.loads(done.stdout)["runs"]
    states = {result["ruleId"]: result["baselineState"] for result in found["results"]}
    assert states["reverse-current-path"] == "new"


def test_the_review_shows_the_changes(hut):
    done = run("report", "battery-bus-faulty.cir", "--against", "battery-bus.cir", folder=hut)
    assert "What changed since battery-bus.cir" in done.stdout
    assert "<td>I+IV</td><td>I</td>" in done.stdout
    alone = run("report", "battery-bus-faulty.cir", folder=hut)
    assert "What changed since" not in alone.stdout


def test_an_earlier_netlist_that_cannot_be_used_is_an_error(hut):
    for command in ("lint", "report"):
        done = run(command, "battery-bus.cir", "--against", "gone.cir", folder=hut)
        assert done.returncode == 2
        assert "gone.cir:1:1: error: there is no file" in done.stderr


@pytest.mark.parametrize(
    ("arguments", "complaint"),
    [
        (["a.cir", "b.cir", "--against", "c.cir"], "name the new one alone"),
        (["a.cir", "--against", "c.cir", "--format", "junit"], "JUnit has no place for changes"),
    ],
)
def test_what_does_not_go_together_is_refused(arguments, complaint, tmp_path):
    done = run("lint", *arguments, folder=tmp_path)
    assert done.returncode == 2
    assert complaint in done.stderr
