"""Multilevel legs: blocking voltage and quadrants of every position.

Source: Wu and Narimani, High-Power Converters and AC Drives, and Bose, Modern Power Electronics
and AC Drives (from memory); the T-type after Schweizer and Kolar, IEEE Transactions on Power
Electronics 28(2), 2013. DC bus of 800 V throughout.
"""

from itertools import pairwise

import pytest

from tests.kit.published import Study, ac, dc, sheet

BUS = 800.0
LOAD_COIL = "L1 A OUT 10m"
SPLIT = "C1 P M 1m\nC2 M N 1m\n"


def leg(cards: str, extra: str = "") -> Study:
    """An AC load behind a coil of little ripple (at most V / (4 L f) at 20 kHz)."""
    load = ac("load", "OUT", "M", voltage="325 V peak", draws="50 A peak")
    bus = dc("bus", "P", "N", voltage=BUS)
    return Study(f"{cards}\n{LOAD_COIL}", sheet(bus, load, frequency=20e3, extra=extra))


def test_neutral_point_clamped_leg() -> None:
    """Four switches and two clamp diodes, half the bus each."""
    cards = (
        SPLIT
        + """
    M1 P g1 X X FET
    M2 X g2 A A FET
    M3 A g3 Y Y FET
    M4 Y g4 N N FET
    D1 M X DX
    D2 Y M DX
    """
    )
    study = leg(cards)
    for name in ("M1", "M2", "M3", "M4"):
        study.expect(name, off=(None, BUS / 2), on=(-50, 50), quadrants="I+IV", within=0.03)
    for name in ("D1", "D2"):
        study.expect(name, off=(-BUS / 2, None), on=(None, 50), quadrants="II", within=0.03)
    assert study.legs()["A"]["levels"] == 3


def test_diode_clamped_leg_of_five_levels() -> None:
    """Switches a quarter of the bus; clamp diodes one, two or three quarters."""
    nets = ["P", "a1", "a2", "a3", "A", "b1", "b2", "b3", "N"]
    pairs = pairwise(nets)
    switches = [f"M{k} {a} g{k} {b} {b} FET" for k, (a, b) in enumerate(pairs, start=1)]
    taps = ["T1", "M", "T3"]
    upper = [f"D{k} {tap} a{k} DX" for k, tap in enumerate(taps, start=1)]
    lower = [f"D{k + 3} b{k} {tap} DX" for k, tap in enumerate(taps, start=1)]
    bus = ["C1 P T1 1m", "C2 T1 M 1m", "C3 M T3 1m", "C4 T3 N 1m"]
    study = leg("\n".join([*bus, *switches, *upper, *lower]))
    for number in range(1, 9):
        study.expect(f"M{number}", off=(None, BUS / 4), quadrants="I+IV")
    for number, quarters in enumerate((1, 2, 3, 3, 2, 1), start=1):
        study.expect(f"D{number}", off=(-BUS * quarters / 4, None), quadrants="II")
    assert study.legs()["A"]["levels"] == 5


def test_t_type_leg() -> None:
    """Outer switches the whole bus with I and IV, the midpoint switch half of it both ways."""
    cards = SPLIT + "M1 P g1 A A FET\nM2 A g2 N N FET\nM3 A g3 X X FET\nM4 M g4 X X FET"
    study = leg(cards)
    for name in ("M1", "M2"):
        study.expect(name, off=(None, BUS), on=(-50, 50), quadrants="I+IV", within=0.03)
    study.expect("M3", off=(-BUS / 2, BUS / 2), on=(-50, 50), quadrants="I+II+III+IV", within=0.03)
    assert study.position("M3")["parts"] == ["M3", "M4"]
    assert study.position("M3")["covered"] is True
    assert study.legs()["A"]["levels"] == 3


def test_flying_capacitor_leg_of_four_levels() -> None:
    """A third of the bus each; the flying capacitors hold two thirds and one third."""
    cards = (
        SPLIT
        + """
    M1 P g1 a1 a1 FET
    M2 a1 g2 a2 a2 FET
    M3 a2 g3 A A FET
    M4 A g4 b2 b2 FET
    M5 b2 g5 b1 b1 FET
    M6 b1 g6 N N FET
    C3 a1 b1 100u
    C4 a2 b2 100u
    """
    )
    held = f"set:\n  C3: {{voltage: {BUS * 2 / 3}}}\n  C4: {{voltage: {BUS / 3}}}"
    study = leg(cards, held)
    for number in range(1, 7):
        study.expect(f"M{number}", off=(None, BUS / 3), on=(-50, 50), quadrants="I+IV",
                     within=0.03)  # fmt: skip


def test_flying_capacitor_is_undetermined_where_the_sheet_is_silent() -> None:
    cards = (
        SPLIT
        + """
    M1 P g1 a1 a1 FET
    M2 a1 g2 A A FET
    M3 A g3 b1 b1 FET
    M4 b1 g4 N N FET
    C3 a1 b1 100u
    """
    )
    study = leg(cards)
    assert any("C3" in entry["what"] for entry in study.table["undetermined"])
    assert any("C3" in entry["settle_with"] for entry in study.table["undetermined"])


@pytest.mark.parametrize("cells", [1, 3])
def test_cascaded_bridges(cells: int) -> None:
    """Every position blocks its own cell's voltage, whatever the length of the chain."""
    cards, ports = [], []
    for k in range(cells):
        plus, minus, a, b = f"P{k}", f"N{k}", f"T{k}", f"T{k + 1}"
        first = 4 * k
        cards += [f"M{first + 1} {plus} g{first + 1} {a} {a} FET",
                  f"M{first + 2} {a} g{first + 2} {minus} {minus} FET",
                  f"M{first + 3} {plus} g{first + 3} B{k} B{k} FET",
                  f"M{first + 4} B{k} g{first + 4} {minus} {minus} FET",
                  f"V{k} B{k} {b} 0"]  # fmt: skip
        ports.append(dc(f"cell{k}", plus, minus, voltage=100 + k))
    load = ac("grid", "G", f"T{cells}", voltage=f"{80 * cells} V peak", draws="30 A peak")
    study = Study("\n".join([*cards, "L1 T0 G 10m"]), sheet(*ports, load, frequency=20e3))
    for number in range(1, 4 * cells + 1):
        own = 100 + (number - 1) // 4
        study.expect(f"M{number}", off=(None, own), on=(-30, 30), quadrants="I+IV", within=0.03)


def test_modular_chain_leg() -> None:
    """N half-bridge cells an arm: V_dc / N a position; 20 kV and 2 kV at N = 10, here N = 3."""
    cells = 3
    cards, nets = [], ["P", "u1", "u2", "U", "D", "d1", "d2", "N"]
    held = ["set:"]
    ends = [pair for pair in pairwise(nets) if pair != ("U", "D")]
    for k, (top, bottom) in enumerate(ends):
        cards += [f"M{2 * k + 1} H{k} g{2 * k + 1} {top} {top} FET",
                  f"M{2 * k + 2} {top} g{2 * k + 2} {bottom} {bottom} FET",
                  f"C{k} H{k} {bottom} 1m"]  # fmt: skip
        held.append(f"  C{k}: {{voltage: {BUS / cells}}}")
    held += ["  L1: {current: [-40, 40]}", "  L2: {current: [-40, 40]}"]
    cards += ["L1 U OUT 2m", "L2 OUT D 2m", "C8 P M 1m", "C9 M N 1m"]
    load = ac("load", "OUT", "M", voltage="325 V peak", draws="50 A peak")
    bus = dc("bus", "P", "N", voltage=BUS)
    study = Study("\n".join(cards), sheet(bus, load, frequency=5e3, extra="\n".join(held)))
    for number in range(1, 4 * cells + 1):
        study.expect(f"M{number}", off=(None, BUS / cells), on=(-40, 40), quadrants="I+IV",
                     within=0.02)  # fmt: skip
