"""Who is who in a realistic export: power path, gate drive, snubbers, supplies, signals."""

import pytest

from rulecheck.stage import Role
from tests.kit.stages import position, reading_of, stage_of

LEG = """
C1 BUS PGND 470u
C2 BUS PGND 1u
M1 BUS GH SW SW FET
M2 SW GL SRC SRC FET
RSH SRC PGND 1m
RG1 GHD GH 10
DG1 GH GHX DX
RG2 GHX GHD 2.2
RGS1 GH SW 10k
RG3 GLD GL 10
RGS2 GL SRC 10k
XU1 VCC PWMH PWML PGND VB GHD SW GLD DRV-HUT
DB VCCB VB DX
RB VCC VCCB 2.2
CB VB SW 1u
CVCC VCC PGND 10u
V12 VCC PGND 12
RSN SW SNX 10
CSN SNX PGND 1n
C3 BUS SW 470p
L1 SW LB 47u
RSENSE LB BAT 2m
C4 BAT PGND 470u
RD1 BUS FB 330k
RD2 FB PGND 10k
CFF BUS FB 100p
RBL BUS PGND 47k
RLED VCC LEDA 1k
DLED LEDA PGND DX
QLS LSC LSB PGND NPX
RLS VCC LSC 4.7k
RSF1 LB SNP 100
RSF2 BAT SNM 100
CSF SNP SNM 10n
"""
SHEET = """
ports:
  battery: {between: [BAT, PGND], voltage: [42 V, 58 V], supplies: [-80 A, 80 A]}
  bus: {between: [BUS, PGND], voltage: [80 V, 120 V]}
"""
ROLES = {
    "M1": Role.SWITCH,
    "M2": Role.SWITCH,
    "RSH": Role.WIRE,
    "RSENSE": Role.WIRE,
    "RG1": Role.GATE_DRIVE,
    "DG1": Role.GATE_DRIVE,
    "DB": Role.BOOTSTRAP,
    "CB": Role.BOOTSTRAP,
    "RSN": Role.SNUBBER,
    "CSN": Role.SNUBBER,
    "C3": Role.SNUBBER,
    "C1": Role.BULK_CAPACITOR,
    "C4": Role.BULK_CAPACITOR,
    "L1": Role.INDUCTOR,
}


@pytest.mark.parametrize("name", ROLES)
def test_roles_of_a_leg_with_its_drive(name: str) -> None:
    assert stage_of(LEG, SHEET).roles[name] is ROLES[name]


def test_only_power_switches_become_positions() -> None:
    stage = stage_of(LEG, SHEET)
    assert [(p.name, p.start, p.end) for p in stage.positions] == [
        ("M1", "BUS", "SW"),
        ("M2", "SW", "PGND"),
    ]
    branches = {branch.name for branch in stage.branches}
    assert branches == {"C1", "C2", "C4", "L1", "port/battery", "port/bus"}


def test_every_reading_is_listed() -> None:
    assumed = stage_of(LEG, SHEET).assumed
    for name in ("RSH", "CSN", "CB", "DG1", "DLED", "QLS"):
        assert any(line.startswith(f"{name} read as") for line in assumed), name


def test_the_sheet_overrules_a_role() -> None:
    stage = stage_of(LEG, SHEET + "set: {RSENSE: {role: load}, C3: {role: bulk}}\n")
    assert stage.roles["RSENSE"] is Role.LOAD
    assert "RSENSE" in {branch.name for branch in stage.branches}
    assert stage.roles["C3"] is Role.BULK_CAPACITOR


BUFFER = """
M1 BUS GH SW SW FET
M2 SW GL 0 0 FET
QN VP B1 BUF NPX
QP VN B1 BUF PPX
RG BUF GH 4.7
RB1 DRV B1 22
CVP VP SW 10u
CVN SW VN 10u
RGS GH SW 10k
L10 PA PB 1m
L11 SA 0 1m
K1 L10 L11 0.99
CD SA SC 1u
RGL SC GL 10
DCL 0 SC DX
XTD PA PB VCC 0 PULSER-HUT
L1 SW OUT 100u
C1 BUS 0 470u
C2 OUT 0 100u
"""
BUFFER_SHEET = """
ports:
  battery: {between: [OUT, 0], voltage: [42 V, 58 V], supplies: [-80 A, 80 A]}
  bus: {between: [BUS, 0], voltage: [80 V, 120 V]}
"""


def test_buffers_and_gate_transformers_are_no_power_parts() -> None:
    stage = stage_of(BUFFER, BUFFER_SHEET)
    assert [p.name for p in stage.positions] == ["M1", "M2"]
    assert stage.transformers == ()
    assert stage.roles["QN"] is Role.GATE_DRIVE
    assert stage.roles["DCL"] is Role.GATE_DRIVE


def test_a_defeated_body_diode_is_one_position() -> None:
    cards = """
M1 BUS G1 A A FET
D1 A SW DX
D11 SW BUS DX
L1 SW OUT 1m
D2 0 SW DX
"""
    sheet = (
        "ports: {bus: {between: [BUS, 0], voltage: 80 V}, out: {between: [OUT, 0], voltage: 12 V}}"
    )
    found = position(stage_of(cards, sheet), "M1")
    assert found.parts == ("D1", "D11", "M1")
    assert (found.start, found.end) == ("BUS", "SW")
    assert (found.free_forward, found.free_reverse) == (False, True)


def test_a_diode_drawn_backwards_does_not_turn_the_position() -> None:
    cards = "Z1 BUS G1 SW IGX\nD1 BUS SW DX\nL1 SW OUT 1m\nD2 0 SW DX\n"
    sheet = (
        "ports: {bus: {between: [BUS, 0], voltage: 80 V}, out: {between: [OUT, 0], voltage: 12 V}}"
    )
    found = position(stage_of(cards, sheet), "Z1")
    assert (found.start, found.end) == ("BUS", "SW")
    assert (found.free_forward, found.free_reverse) == (True, False)


def test_a_symmetric_position_starts_at_the_higher_net() -> None:
    cards = "S1 OUT IN c 0 SWX\nC1 OUT 0 1m\n"
    sheet = (
        "ports: {in: {between: [IN, 0], voltage: 80 V}, out: {between: [OUT, 0], voltage: 12 V}}"
    )
    found = position(stage_of(cards, sheet), "S1")
    assert (found.start, found.end) == ("IN", "OUT")


def test_unknown_nets_and_parts_of_the_sheet_are_errors_with_a_hint() -> None:
    sheet = """
ports:
  battery: {between: [BATT, PGND], voltage: 48 V}
set: {L11: {current: 5 A}}
switching: {frequency: 20 kHz, legs: {SWW: {dead-time: 1 us}}}
"""
    lines = [problem.line() for problem in reading_of(LEG, sheet).problems]
    assert any("net 'BATT' is not in the netlist" in x and "'BAT'" in x for x in lines)
    assert any("part 'L11' is not in the netlist" in x and "'L1'" in x for x in lines)
    assert any("net 'SWW' is not in the netlist" in x for x in lines)
    assert all(line.startswith("t.stage.yaml:") for line in lines)


def test_a_device_with_no_way_back_is_not_covered() -> None:
    stage = stage_of(LEG + "M9 BUS G9 LOOSE LOOSE FET\n", SHEET)
    assert any(line.startswith("M9: no power current") for line in stage.not_covered)
    assert "M9" not in {p.name for p in stage.positions}


def test_a_snubber_at_a_phase_of_the_pump_is_named_by_the_phase() -> None:
    cards = "M1 BUS G1 U U FET\nM2 U G2 0 0 FET\nR1 N1 U 10\nC1 N1 0 1n\nC2 BUS 0 1m\n"
    cards += "M3 BUS G3 V V FET\nM4 V G4 0 0 FET\nM5 BUS G5 W W FET\nM6 W G6 0 0 FET\n"
    sheet = """
ports:
  bus: {between: [BUS, "0"], voltage: 400 V}
  pump: {phases: [U, V, W], draws: 10 A peak, frequency: [0 Hz, 60 Hz]}
"""
    stage = stage_of(cards, sheet)
    assert stage.role_of["R1"] == "U"
    assert stage.role_of["C1"] == "U"
