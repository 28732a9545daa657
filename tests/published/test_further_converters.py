"""Converters beyond the tables: coupled coils, current-fed and tapped windings, active clamping.

Source of the relations: Erickson and Maksimovic, Fundamentals of Power Electronics, and Wu and
Narimani, High-Power Converters and AC Drives, on the active clamped leg (both from memory); each
expected value follows from the volt-second balance that is written beside it.
"""

import math

import pytest

from tests.kit.published import Study, ac, dc, phases, sheet


def test_sepic_with_both_coils_on_one_core() -> None:
    """Ampere-turns of both coils on one inductance: half the ripple of two separate coils."""
    cards = """
    L1 IN A 100u
    M1 A g 0 0 FET
    C1 A B 10u
    L2 0 B 100u
    K1 L1 L2 0.98
    D1 B OUT DX
    C2 OUT 0 100u
    """
    ports = dc("in", "IN", voltage=48), dc("out", "OUT", voltage=32, draws=6.4)
    study = Study(cards, sheet(*ports))
    middle, half = 6.4 / 0.6, 48 * 0.4 / (100e-6 * 100e3) / 2
    study.expect("M1", off=(80, 80), on=(middle - half, middle + half), quadrants="I")
    study.expect("D1", off=(-80, -80), on=(middle - half, middle + half), quadrants="II")


def test_buck_with_a_tapped_coil() -> None:
    """Two turns to one: while off, 5 V on one winding are 10 V on the other; S blocks 48 + 10.

    While on, a third of 48 - 5 V stands over the output on the tap.
    """
    cards = "M1 IN g A A FET\nL1 A T 100u\nL2 T OUT 25u\nK1 L1 L2 1\nD1 0 T DX\nC1 OUT 0 100u"
    ports = dc("in", "IN", voltage=48), dc("out", "OUT", voltage=5, draws=(5, 10))
    study = Study(cards, sheet(*ports))
    study.expect("M1", off=(58, 58), quadrants="I")
    study.expect("D1", off=(-(5 + 43 / 3),) * 2, quadrants="II")
    on, off = (study.position(name)["demand"]["on_current"] for name in ("M1", "D1"))
    assert off == pytest.approx([3 * end for end in on], rel=1e-3), "ampere-turns stay"


def test_current_fed_push_pull() -> None:
    """Both on share the coil's current; one off blocks twice the output over the turns ratio."""
    cards = """
    L1 IN CT 100u
    L2 CT A 400u
    L3 B CT 400u
    M1 A g1 0 0 FET
    M2 B g2 0 0 FET
    L4 S1 S2 14.4m
    K1 L2 L3 L4 1
    D1 S1 P DX
    D2 S2 P DX
    D3 N S1 DX
    D4 N S2 DX
    C1 P N 100u
    """
    ports = dc("in", "IN", voltage=48, supplies=20), dc("out", "P", "N", voltage=400)
    study = Study(cards, sheet(*ports))
    for name in ("M1", "M2"):
        study.expect(name, off=(None, 2 * 400 / 6), on=(None, 20), quadrants="I", within=0.04)
    for name in ("D1", "D2", "D3", "D4"):
        study.expect(name, off=(-400, None), on=(None, 20 / 6), quadrants="II", within=0.05)


def test_active_clamped_leg() -> None:
    """Transistors beside the clamp diodes: six positions of half the bus, all I and IV."""
    cards = """
    C1 P M 1m
    C2 M N 1m
    M1 P g1 X X FET
    M2 X g2 A A FET
    M3 A g3 Y Y FET
    M4 Y g4 N N FET
    M5 X g5 M M FET
    M6 M g6 Y Y FET
    L1 A OUT 20m
    """
    load = ac("load", "OUT", "M", voltage="325 V peak", draws="30 A peak")
    study = Study(cards, sheet(dc("bus", "P", "N", voltage=800), load, frequency=20e3))
    for number in range(1, 7):
        study.expect(f"M{number}", off=(None, 400), on=(-30, 30), quadrants="I+IV", within=0.02)


def test_brake_chopper_beside_a_three_phase_bridge() -> None:
    """The resistor draws v / R from the bus, one way."""
    legs = "".join(
        f"M{2 * k + 1} P h{k} {net} {net} FET\nM{2 * k + 2} {net} l{k} 0 0 FET\n"
        for k, net in enumerate("UVW")
    )
    brake = "M7 BR g7 0 0 FET\nR1 P BR 10\nD1 BR P DX"
    pump = phases("pump", "U", "V", "W", draws="20 A peak")
    study = Study(legs + brake, sheet(dc("bus", "P", voltage=(90, 150)), pump))
    study.expect("M7", off=(90, 150), on=(9, 15), quadrants="I")
    for number in range(1, 7):
        study.expect(f"M{number}", off=(90, 150), on=(-20, 20), quadrants="I+IV")


def test_disconnect_between_two_battery_banks() -> None:
    """Blocks the difference of the two voltages, both ways; a single transistor cannot."""
    banks = dc("a", "A", voltage=(42, 58), supplies=(-20, 20)), dc("b", "B", voltage=(40, 56))
    pair = Study("M1 A g X X FET\nM2 B g X X FET", sheet(*banks))
    pair.expect("M1", off=(42 - 56, 58 - 40), quadrants="I+II+III+IV")
    assert pair.position("M1")["covered"] is True
    single = Study("M1 A g B B FET", sheet(*banks))
    single.expect("M1", off=(42 - 56, 58 - 40), quadrants="I+II+III+IV")
    assert single.position("M1")["covered"] is False
    assert ("reverse-blocking", "M1") in single.broken()


def test_sources_of_the_netlist_serve_where_there_is_no_sheet() -> None:
    """A buck from 48 V at a duty ratio of 0.4 into 5 ohm, all of it from the cards."""
    cards = """
    V1 IN 0 48
    V2 g 0 PULSE(0 10 0 10n 10n 4u 10u)
    M1 IN g SW SW FET
    D1 0 SW DX
    L1 SW OUT 100u
    C1 OUT 0 100u
    R1 OUT 0 5
    """
    study = Study(cards)
    study.expect("M1", off=(48, 48), on=(None, 4.416), quadrants="I")
    study.expect("D1", off=(-48, -48), on=(None, 4.416), quadrants="II")


def test_motor_bridge_used_in_all_quadrants_needs_every_diode() -> None:
    """A DC motor driven and braked both ways: every position I and IV; a bare one is found."""
    cards = "Z1 P g1 A IGD\nZ2 A g2 0 IGD\nZ3 P g3 B IGX\nZ4 B g4 0 IGD\nL1 A X 10m"
    motor = dc("motor", "X", "B", voltage=(-300, 300), draws=(-20, 20))
    study = Study(cards, sheet(dc("bus", "P", voltage=400), motor, frequency=20e3))
    for number in range(1, 5):
        study.expect(f"Z{number}", off=(400, 400), on=(-20, 20), quadrants="I+IV", within=0.03)
    assert study.position("Z3")["covered"] is False
    assert {(rule, subject) for rule, subject in study.broken() if subject == "Z3"} == {
        ("reverse-current-path", "Z3")
    }


def test_filter_of_coil_capacitor_and_coil_carries_the_load_current() -> None:
    """The coil at the bridge carries the load's current and its own ripple, the other no ripple."""
    legs = "M1 P g1 A A FET\nM2 A g2 0 0 FET\nM3 P g3 B B FET\nM4 B g4 0 0 FET\n"
    filters = "L1 A X 5m\nC1 X B 2u\nL2 X G 0.5m"
    grid = ac("grid", "G", "B", voltage="230 V rms", draws="20 A peak")
    study = Study(legs + filters, sheet(dc("bus", "P", voltage=400), grid, frequency=20e3))
    for number in range(1, 5):
        study.expect(f"M{number}", off=(400, 400), on=(-20, 20), quadrants="I+IV", within=0.05)
    assert study.variable("v(C1)")[1] == pytest.approx(230 * math.sqrt(2), rel=0.01)


def test_half_bridge_behind_a_coupling_capacitor() -> None:
    """The capacitor holds half the bus; the load's current flows through it."""
    cards = "M1 P g1 A A FET\nM2 A g2 0 0 FET\nL1 A X 200u\nC2 X OUT 1000u"
    speaker = ac("load", "OUT", "0", voltage="20 V peak", draws="5 A peak", frequency="1 kHz")
    held = "set: {C2: {voltage: 24 V}}"
    study = Study(cards, sheet(dc("bus", "P", voltage=48), speaker, frequency=400e3, extra=held))
    for name in ("M1", "M2"):
        study.expect(name, off=(48, 48), on=(-5, 5), quadrants="I+IV", within=0.03)


def test_buck_behind_a_bridge_with_a_capacitor() -> None:
    """The capacitor has the polarity of the diodes, so the buck cell blocks it in one way only."""
    cards = """
    D1 a P DX
    D2 b P DX
    D3 N a DX
    D4 N b DX
    C1 P N 200u
    M1 P g SW SW FET
    D5 N SW DX
    L1 SW OUT 10m
    """
    mains = ac("mains", "a", "b", voltage="230 V rms")
    output = dc("out", "OUT", "N", voltage=100, draws=(2, 10))
    study = Study(cards, sheet(mains, output))
    peak = 230 * math.sqrt(2)
    study.expect("M1", off=(None, peak), on=(2, 10), quadrants="I", within=0.02)
    study.expect("D5", off=(-peak, None), on=(2, 10), quadrants="II", within=0.02)
