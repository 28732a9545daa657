"""The demo: what is sound passes, what is faulty is found, and nothing is overwritten."""

import json
import subprocess
import sys

import pytest

from tests.command.running import clean_environment, run

SOUND = ("battery-bus.cir", "pump-inverter.cir", "pump-npc.cir", "transfer-switch.cir")
FAULTS = {
    "battery-bus-faulty.cir": {("reverse-current-path", "Q1")},
    "pump-inverter-faulty.cir": {
        ("reverse-blocking", "Q6"),
        ("interrupted-current", "pump W -> star of pump"),
        ("odd-leg-out", "W"),
    },
    "pump-npc-faulty.cir": {("blocking-rating", "D4")},
    # the turned transistor's source is no longer where its driver returns
    "transfer-switch-faulty.cir": {("reverse-blocking", "Q3"), ("gate-return", "G4")},
}
"""What a faulty twin has to be told, at error or warning, and nothing else."""


@pytest.fixture(scope="module")
def answers(written_demo):
    """What `lint` says of every stage of the demo, by netlist."""
    done = run("lint", *SOUND, *FAULTS, "--format", "json", folder=written_demo)
    assert (done.returncode, done.stderr) == (1, "")
    return {answer["netlist"]: answer for answer in json.loads(done.stdout)}


def told(answer):
    return {
        (finding["rule"], finding["subject"])
        for finding in answer["findings"]
        if finding["level"] != "note"
        and finding["verdict"] == "broken"
        and not finding["deviation"]
        and finding["rule"] != "deviation-expired"
    }


def test_the_demo_is_what_is_listed_here(written_demo):
    assert {path.name for path in written_demo.glob("*.cir")} == {*SOUND, *FAULTS}


@pytest.mark.parametrize("netlist", SOUND)
def test_a_sound_stage_has_no_finding_and_nothing_undecided(netlist, answers):
    assert answers[netlist]["findings"] == []


@pytest.mark.parametrize("netlist", FAULTS)
def test_a_faulty_twin_has_exactly_its_findings(netlist, answers):
    assert told(answers[netlist]) == FAULTS[netlist]


@pytest.mark.parametrize("netlist", FAULTS)
def test_a_twin_differs_by_its_title_and_its_fault(netlist, written_demo):
    texts = [written_demo / netlist, written_demo / netlist.replace("-faulty", "")]
    twin, sound = (text.read_text(encoding="utf-8").splitlines()[1:] for text in texts)
    assert 1 <= sum(one != other for one, other in zip(twin, sound, strict=True)) <= 2


@pytest.mark.parametrize("netlist", SOUND)
def test_a_sound_stage_covers_every_position_and_leaves_nothing_open(netlist, hut):
    table = json.loads(run("quadrants", netlist, "--format", "json", folder=hut).stdout)
    assert table["undetermined"] == []
    assert all(position["covered"] for position in table["positions"])


def test_the_positions_of_the_three_level_leg_block_half_the_bus(hut):
    """Each device of a neutral-point-clamped leg sees half the bus (common practice)."""
    table = json.loads(run("quadrants", "pump-npc.cir", "--format", "json", folder=hut).stdout)
    positions = {position["name"]: position["demand"] for position in table["positions"]}
    assert len(positions) == 12 + 6
    assert {max(map(abs, demand["off_voltage"])) for demand in positions.values()} == {60.0}
    assert [leg["levels"] for leg in table["legs"]] == [3, 3, 3]


def test_the_transfer_switch_needs_all_four_quadrants(hut):
    """Two sources out of step: an open switch sees both peaks, here 253 V rms and the clamp."""
    table = json.loads(
        run("quadrants", "transfer-switch.cir", "--format", "json", folder=hut).stdout
    )
    positions = {position["name"]: position["demand"] for position in table["positions"]}
    for name in ("Q1", "Q3"):
        assert positions[name]["quadrants"] == ["I", "II", "III", "IV"]
        low, high = positions[name]["off_voltage"]
        assert high == pytest.approx(253 * 2**0.5 + 400)
        assert low == pytest.approx(-high)
        assert positions[name]["on_current"] == pytest.approx([-16 * 2**0.5, 16 * 2**0.5])


def test_the_check_for_a_build_server_leaves_its_reports_and_fails_for_the_twin(hut):
    program = hut.parent / "rulecheck"
    program.write_text(f'#!/bin/sh\nexec {sys.executable} -m rulecheck "$@"\n', encoding="utf-8")
    program.chmod(0o755)
    done = subprocess.run(
        [hut / ".ci" / "check"],
        env=clean_environment() | {"RULECHECK": str(program)},
        capture_output=True,
        encoding="utf-8",
        check=False,
    )
    assert (done.returncode, done.stderr) == (1, "")
    assert "battery-bus-faulty.cir:17:1: error: Q1" in done.stdout
    assert (hut / "findings.sarif").is_file()
    assert (hut / "rulecheck.xml").is_file()


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
