"""Converters on AC lines: what each position blocks and in which quadrants it works.

Source: Mohan, Undeland and Robbins, Power Electronics, chapters on rectifiers; Wu and Narimani,
High-Power Converters and AC Drives, on current-source converters; the matrix converter's
line-to-line stress is common practice (all from memory). A symmetric set has sqrt(3) between
lines, not 2.
"""

import math

import pytest

from tests.kit.published import Study, ac, dc, phases, sheet

ROOT2, ROOT3 = math.sqrt(2), math.sqrt(3)


def test_single_phase_diode_bridge() -> None:
    """sqrt(2) V each: 325.27 V on 230 V; into a large coil 2 sqrt(2) / pi V on the average."""
    cards = "D1 L P DX\nD2 N P DX\nD3 0 L DX\nD4 0 N DX\nL1 P OUT 1"
    output = dc("out", "OUT", voltage=230 * 2 * ROOT2 / math.pi, draws=10)
    ports = ac("mains", "L", "N", voltage="230 V rms"), output
    study = Study(cards, sheet(*ports))
    for number in range(1, 5):
        study.expect(f"D{number}", off=(-230 * ROOT2, None), on=(None, 10), quadrants="II")


def test_centre_tapped_rectifier() -> None:
    """2 sqrt(2) V of half a winding: 650.54 V on 230 V."""
    cards = """
    L1 L N 10
    L2 S1 0 10
    L3 0 S2 10
    K1 L1 L2 L3 1
    D1 S1 P DX
    D2 S2 P DX
    L4 P OUT 1
    """
    output = dc("out", "OUT", voltage=230 * 2 * ROOT2 / math.pi, draws=10)
    ports = ac("mains", "L", "N", voltage="230 V rms"), output
    study = Study(cards, sheet(*ports))
    for name in ("D1", "D2"):
        study.expect(name, off=(-2 * 230 * ROOT2, None), on=(None, 10), quadrants="II")


def test_three_phase_diode_bridge() -> None:
    """sqrt(2) V line to line: 565.7 V on 400 V; 3 sqrt(2) / pi V = 540.19 V on the average."""
    upper = [f"D{k} {net} P DX" for k, net in enumerate("abc", start=1)]
    lower = [f"D{k + 3} 0 {net} DX" for k, net in enumerate("abc", start=1)]
    mains = phases("mains", "a", "b", "c", line_voltage="400 V rms")
    output = dc("out", "OUT", voltage=400 * 3 * ROOT2 / math.pi, draws=9)
    study = Study("\n".join([*upper, *lower, "L1 P OUT 1"]), sheet(mains, output))
    for number in range(1, 7):
        study.expect(f"D{number}", off=(-400 * ROOT2, None), on=(None, 9), quadrants="II")


def test_boost_power_factor_correction_behind_a_bridge() -> None:
    """Transistor and diode block the bus; the coil's current has one sign."""
    cards = """
    D1 L R DX
    D2 N R DX
    D3 0 L DX
    D4 0 N DX
    L1 R SW 2m
    M1 SW g 0 0 FET
    D5 SW BUS DX
    """
    mains = ac("mains", "L", "N", voltage="230 V rms", supplies="16 A peak")
    study = Study(cards, sheet(mains, dc("bus", "BUS", voltage=390)))
    study.expect("M1", off=(None, 390), quadrants="I")
    study.expect("D5", off=(-390, None), quadrants="II")
    for number in range(1, 5):
        study.expect(f"D{number}", off=(-230 * ROOT2, None), quadrants="II")


@pytest.mark.parametrize("slow_leg", ["D3 B BUS DX\nD4 0 B DX",
                                      "M3 BUS g3 B B FET\nM4 B g4 0 0 FET"])  # fmt: skip
def test_totem_pole_power_factor_correction(slow_leg: str) -> None:
    """Both legs block the bus; the fast one works in I and IV."""
    cards = f"L1 L A 20m\nM1 BUS g1 A A FET\nM2 A g2 0 0 FET\n{slow_leg}"
    mains = ac("mains", "L", "B", voltage="230 V peak", supplies="16 A peak")
    study = Study(cards, sheet(mains, dc("bus", "BUS", voltage=390)))
    for name in ("M1", "M2"):
        study.expect(name, off=(None, 390), on=(-16, 16), quadrants="I+IV", within=0.05)
    if slow_leg.startswith("D"):
        for name in ("D3", "D4"):
            study.expect(name, off=(-390, None), on=(None, 16), quadrants="II", within=0.05)


def test_vienna_rectifier() -> None:
    """Midpoint switches half the bus both ways in all quadrants, diodes the whole bus."""
    cards = ["C1 P M 1m", "C2 M N 1m"]
    for k, net in enumerate("abc", start=1):
        cards += [f"L{k} g{net} {net} 5m", f"D{2 * k - 1} {net} P DX", f"D{2 * k} N {net} DX",
                  f"M{2 * k - 1} {net} s{k} x{k} x{k} FET",
                  f"M{2 * k} M s{k} x{k} x{k} FET"]  # fmt: skip
    mains = phases("mains", "ga", "gb", "gc", voltage="230 V rms", supplies="30 A peak")
    study = Study("\n".join(cards), sheet(mains, dc("bus", "P", "N", voltage=800), frequency=50e3))
    for number in (1, 3, 5):
        study.expect(f"M{number}", off=(-400, 400), on=(-30, 30), quadrants="I+II+III+IV",
                     within=0.05)  # fmt: skip
    for number in range(1, 7):
        study.expect(f"D{number}", off=(-800, None), on=(None, 30), quadrants="II", within=0.05)


def test_matrix_converter_three_by_three() -> None:
    """Nine four-quadrant switches, each the peak line-to-line voltage: 565.7 V on 400 V."""
    cards, number = [], 0
    for line in "abc":
        for motor in "UVW":
            number += 1
            cards += [f"Z{2 * number - 1} {line} g{number} e{number} IGD",
                      f"Z{2 * number} {motor} g{number} e{number} IGD"]  # fmt: skip
    mains = phases("mains", "a", "b", "c", line_voltage="400 V rms")
    pump = phases("pump", "U", "V", "W", draws="20 A peak", frequency=(0, 60))
    study = Study("\n".join(cards), sheet(mains, pump, frequency=10e3))
    peak = 400 * ROOT2
    for number in range(1, 18, 2):
        study.expect(f"Z{number}", off=(-peak, peak), on=(-20, 20), quadrants="I+II+III+IV")
        assert study.position(f"Z{number}")["covered"] is True


CURRENT_SOURCE_SWITCHES = {
    "MOSFET and series diode": ("M{k} {a} g{k} x{k} x{k} FET\nD{k} x{k} {b} DX", True),
    "reverse-blocking transistor": ("Z{k} {a} g{k} {b} RBX", True),
    "MOSFET alone": ("M{k} {a} g{k} {b} {b} FET", False),
}


@pytest.mark.parametrize("name", CURRENT_SOURCE_SWITCHES)
def test_current_source_bridge(name: str) -> None:
    """Six positions, the peak line-to-line voltage both ways, current one way: I and II."""
    card, covered = CURRENT_SOURCE_SWITCHES[name]
    upper = [card.format(k=k, a="P", b=net) for k, net in enumerate("abc", start=1)]
    lower = [card.format(k=k + 3, a=net, b="0") for k, net in enumerate("abc", start=1)]
    grid = phases("grid", "a", "b", "c", line_voltage="440 V rms")
    source = dc("dc", "IN", voltage=(0, 500), supplies=50)
    study = Study("\n".join([*upper, *lower, "L1 IN P 100m"]), sheet(source, grid))
    peak = 440 * ROOT2
    for number in range(1, 7):
        position = f"{card[0]}{number}"
        study.expect(position, off=(-peak, peak), on=(None, 50), quadrants="I+II", within=0.02)
        assert study.position(position)["covered"] is covered


def test_thyristor_bridge_from_three_phases() -> None:
    """A controlled rectifier blocks the peak line-to-line voltage both ways."""
    upper = [f"X{k} {net} g{k} P SCX" for k, net in enumerate("abc", start=1)]
    lower = [f"X{k + 3} 0 g{k + 3} {net} SCX" for k, net in enumerate("abc", start=1)]
    mains = phases("mains", "a", "b", "c", line_voltage="400 V rms")
    cards = "\n".join([*upper, *lower, "L1 P OUT 50m"])
    study = Study(
        cards, sheet(mains, dc("out", "OUT", voltage=(-400, 500), draws=20), frequency=300)
    )
    peak = 400 * ROOT2
    for number in range(1, 7):
        study.expect(f"X{number}", off=(-peak, peak), quadrants="I+II", within=0.02)
