"""The demo: what is sound passes, what is faulty is found, and nothing is overwritten."""

import json

import pytest

from tests.command.running import run


@pytest.mark.parametrize("netlist", ["battery-bus.cir", "pump-inverter.cir"])
def test_the_sound_stages_have_no_finding_and_nothing_undetermined(netlist, hut):
    done = run("lint", netlist, "--format", "json", "--fail-at", "warning", folder=hut)
    answer = json.loads(done.stdout)
    assert [f["message"] for f in answer["findings"] if f["level"] != "note"] == []
    assert (done.returncode, done.stderr) == (0, "")
    table = json.loads(run("quadrants", netlist, "--format", "json", folder=hut).stdout)
    assert table["undetermined"] == []
    assert all(position["covered"] for position in table["positions"])


def test_the_battery_leg_is_current_bidirectional_and_blocks_the_bus(hut):
    table = json.loads(run("quadrants", "battery-bus.cir", "--format", "json", folder=hut).stdout)
    assert [position["name"] for position in table["positions"]] == ["Q1", "Q3"]
    for position in table["positions"]:
        assert position["demand"]["quadrants"] == ["I", "IV"]
        assert position["demand"]["off_voltage"] == [90.0, 120.0]
        low, high = position["demand"]["on_current"]
        # 80 A mean and half the ripple: 58 V (1 - 58/120) / (33 uH 50 kHz) / 2
        assert high == pytest.approx(80 + 58 * (1 - 58 / 120) / (33e-6 * 50e3) / 2, rel=1e-3)
        assert low == pytest.approx(-high)
    assert [leg["kind"] for leg in table["legs"]] == ["half-bridge leg"]


def test_the_pump_inverter_has_three_legs_and_carries_the_phase_amplitude(hut):
    table = json.loads(run("quadrants", "pump-inverter.cir", "--format", "json", folder=hut).stdout)
    assert len(table["positions"]) == 6
    for position in table["positions"]:
        assert position["demand"]["quadrants"] == ["I", "IV"]
        assert position["demand"]["off_voltage"] == [90.0, 120.0]
        assert position["demand"]["on_current"] == pytest.approx([-25.0, 25.0])
    assert [leg["midpoint"] for leg in table["legs"]] == ["U", "V", "W"]


def test_the_twin_lacks_the_reverse_direction_of_the_upper_position_alone(hut):
    done = run("lint", "battery-bus-faulty.cir", "--format", "json", folder=hut)
    assert done.returncode == 1
    broken = [f for f in json.loads(done.stdout)["findings"] if f["verdict"] == "broken"]
    errors = {finding["subject"] for finding in broken if finding["level"] == "error"}
    assert errors
    assert {finding["rule"] for finding in broken} >= {"reverse-current-path"}
    table = run("quadrants", "battery-bus-faulty.cir", "--format", "json", folder=hut).stdout
    covered = {p["name"]: p["covered"] for p in json.loads(table)["positions"]}
    assert covered == {"Q1": False, "Q3": True}


def test_every_stage_of_the_demo_is_a_real_one(written_demo):
    for netlist in written_demo.glob("*.cir"):
        lines = netlist.read_text(encoding="utf-8").splitlines()
        assert sum(line[:1].isalpha() for line in lines) >= 60


def test_an_existing_demo_is_left_alone(hut):
    sheet = hut / "battery-bus.stage.yaml"
    sheet.write_text("mine", encoding="utf-8")
    done = run("demo", hut, folder=hut)
    assert done.returncode == 2
    assert f"{sheet}:1:1: error: the file is there already" in done.stderr
    assert sheet.read_text(encoding="utf-8") == "mine"
