"""The basic cells: ratio, blocking voltage, inductor current and quadrants.

Source of the relations: Mohan, Undeland and Robbins, Power Electronics, chapter on DC-DC
converters, and Kassakian, Schlecht and Verghese, Principles of Power Electronics (both from
memory; the figures were confirmed by integration to the periodic steady state). 48 V in,
duty ratio 0.4, 100 kHz, 100 uH each, 5 ohm of load. Ripple of one coil: v_on D / (L f).
"""

import math

import pytest

from tests.kit.published import Study, dc, sheet

V_IN, DUTY, LOAD = 48.0, 0.4, 5.0
LF = 100e-6 * 100e3
K_VALUES = (0.02, 0.1)
UP_DOWN = DUTY / (1 - DUTY)
V_OUT = UP_DOWN * V_IN
I_OUT = V_OUT / LOAD
I_IN = I_OUT * UP_DOWN
HALF_RIPPLE = V_IN * DUTY / LF / 2

CAPACITOR_COUPLED = {
    # cells with two coils and a series capacitor: cards, output nets, voltage of C1
    "Cuk": ("L1 IN A 100u\nM1 A g 0 0 FET\nC1 A B 100u\nD1 B 0 DX\nL2 OUT B 100u", "0 OUT",
            V_IN + V_OUT),
    "SEPIC": ("L1 IN A 100u\nM1 A g 0 0 FET\nC1 A B 100u\nL2 0 B 100u\nD1 B OUT DX", "OUT 0",
              V_IN),
    "Zeta": ("M1 IN g A A FET\nL1 A 0 100u\nC1 B A 100u\nD1 0 B DX\nL2 B OUT 100u", "OUT 0",
             V_OUT),
}  # fmt: skip


def one_coil(cards: str, plus: str, minus: str, v_out: float) -> Study:
    output = dc("out", plus, minus, voltage=v_out, draws=v_out / LOAD)
    return Study(cards + "\nC9 OUT 0 100u", sheet(dc("in", "IN", voltage=V_IN), output))


def test_buck_follows_v_out_equal_duty_times_v_in() -> None:
    v_out = DUTY * V_IN
    study = one_coil("M1 IN g SW SW FET\nD1 0 SW DX\nL1 SW OUT 100u", "OUT", "0", v_out)
    current, half = v_out / LOAD, V_IN * DUTY * (1 - DUTY) / LF / 2
    study.expect("M1", off=(V_IN, V_IN), on=(current - half, current + half), quadrants="I")
    study.expect("D1", off=(-V_IN, -V_IN), on=(current - half, 4.416), quadrants="II")
    assert study.mean("i(L1)") == pytest.approx(current, rel=1e-3)


def test_boost_blocks_the_output_and_carries_the_input_current() -> None:
    v_out = V_IN / (1 - DUTY)
    study = one_coil("L1 IN SW 100u\nM1 SW g 0 0 FET\nD1 SW OUT DX", "OUT", "0", v_out)
    current = v_out / LOAD / (1 - DUTY)
    study.expect("M1", off=(80, 80), on=(current - HALF_RIPPLE, 27.626), quadrants="I")
    study.expect("D1", off=(-80, -80), on=(current - HALF_RIPPLE, 27.626), quadrants="II")
    assert study.mean("i(L1)") == pytest.approx(current, rel=1e-3)


def test_inverting_cell_blocks_the_sum_of_input_and_output() -> None:
    study = one_coil("M1 IN g SW SW FET\nL1 SW 0 100u\nD1 OUT SW DX", "0", "OUT", V_OUT)
    current = I_OUT / (1 - DUTY)
    study.expect("M1", off=(80, 80), on=(current - HALF_RIPPLE, 11.626), quadrants="I")
    study.expect("D1", off=(-80, -80), on=(current - HALF_RIPPLE, 11.626), quadrants="II")
    assert study.mean("i(L1)") == pytest.approx(I_IN + I_OUT, rel=1e-3)


@pytest.mark.parametrize("name", CAPACITOR_COUPLED)
def test_capacitor_coupled_cells_block_the_sum_and_carry_both_coils(name: str) -> None:
    """Published peaks: 80.12 V with half of the capacitor's ripple, and 12.585 A."""
    cards, nets, v_capacitor = CAPACITOR_COUPLED[name]
    study = one_coil(cards, *nets.split(), V_OUT)
    low = I_IN + I_OUT - 2 * HALF_RIPPLE
    study.expect("M1", off=(80.06, 80.06), on=(low, 12.585), quadrants="I")
    study.expect("D1", off=(-80.06, -80.06), on=(low, 12.585), quadrants="II")
    assert study.mean("v(C1)") == pytest.approx(v_capacitor, rel=1e-3)
    assert study.mean("i(L1)") == pytest.approx(I_IN, rel=1e-3)
    assert study.mean("i(L2)") == pytest.approx(I_OUT, rel=1e-3)


def test_second_published_set_of_figures() -> None:
    """48 V, duty ratio 0.6, 20 ohm: boost to 120 V with 16.44 A, inverting 72 V with 10.44 A."""
    boost = one_coil("L1 IN SW 100u\nM1 SW g 0 0 FET\nD1 SW OUT DX", "OUT", "0", 120)
    inverting = one_coil("M1 IN g SW SW FET\nL1 SW 0 100u\nD1 OUT SW DX", "0", "OUT", 72)
    boost = Study(boost.cards, boost.sheet.replace("draws: 24", "draws: 6"))
    inverting = Study(inverting.cards, inverting.sheet.replace("draws: 14.4", "draws: 3.6"))
    boost.expect("M1", off=(120, 120), on=(None, 16.44), quadrants="I")
    inverting.expect("M1", off=(120, 120), on=(None, 10.44), quadrants="I")


def test_four_switch_cell_blocks_input_on_one_leg_and_output_on_the_other() -> None:
    cards = """
    M1 IN g1 A A FET
    M2 A g2 0 0 FET
    L1 A B 100u
    M3 OUT g3 B B FET
    M4 B g4 0 0 FET
    """
    output = dc("out", "OUT", voltage=80, draws=(-10, 10))
    study = Study(cards, sheet(dc("in", "IN", voltage=48), output))
    for name, rail in (("M1", 48), ("M2", 48), ("M3", 80), ("M4", 80)):
        study.expect(name, off=(None, rail), quadrants="I+IV")


@pytest.mark.parametrize("supplies", [(-30, 30), (5, 30), (-30, -5)])
def test_synchronous_leg_needs_both_current_directions_only_when_used_both_ways(
    supplies: tuple[float, float],
) -> None:
    """The coil's current has the sign of the power flow; each position blocks the upper rail."""
    cards = "L1 BAT SW 100u\nM1 BUS g1 SW SW FET\nM2 SW g2 0 0 FET"
    ports = (dc("battery", "BAT", voltage=48, supplies=supplies), dc("bus", "BUS", voltage=96))
    study = Study(cards, sheet(*ports))
    half = 48 * 0.5 / LF / 2
    low, high = supplies[0] - half, supplies[1] + half
    lower = "I+IV" if low < 0 < high else "I" if low > 0 else "IV"
    upper = {"I": "IV", "IV": "I"}.get(lower, lower)
    study.expect("M1", off=(96, 96), on=(-high, -low), quadrants=upper)
    study.expect("M2", off=(96, 96), on=(low, high), quadrants=lower)


@pytest.mark.parametrize("k", K_VALUES)
def test_buck_in_discontinuous_conduction(k: float) -> None:
    """V_o / V_in = 2 / (1 + sqrt(1 + 4 K / D^2)) with K = 2 L f / R, peak (V_in - V_o) D / (L f).

    Source: Erickson and Maksimovic, Fundamentals of Power Electronics, chapter on the
    discontinuous conduction mode (from memory). While the coil is idle the transistor blocks the
    difference and the diode the output.
    """
    duty = 0.4
    v_out = V_IN * 2 / (1 + math.sqrt(1 + 4 * k / duty**2))
    peak, current = (V_IN - v_out) * duty / LF, v_out * k / (2 * LF)
    bound = current + v_out * (1 - v_out / V_IN) / LF / 2
    output = dc("out", "OUT", voltage=v_out, draws=current)
    cards = "M1 IN g SW SW FET\nD1 0 SW DX\nL1 SW OUT 100u\nC9 OUT 0 100u"
    study = Study(cards, sheet(dc("in", "IN", voltage=V_IN), output))
    study.expect("M1", off=(V_IN - v_out, V_IN), on=(0, None), quadrants="I")
    study.expect("D1", off=(-V_IN, -v_out), on=(0, None), quadrants="II")
    for name in ("M1", "D1"):
        assert peak <= study.position(name)["demand"]["on_current"][1] <= bound * 1.001


@pytest.mark.parametrize("k", K_VALUES)
def test_boost_in_discontinuous_conduction(k: float) -> None:
    """V_o / V_in = (1 + sqrt(1 + 4 D^2 / K)) / 2, peak V_in D / (L f); the same source."""
    duty = 0.4
    v_out = V_IN * (1 + math.sqrt(1 + 4 * duty**2 / k)) / 2
    peak, current = V_IN * duty / LF, v_out * k / (2 * LF)
    output = dc("out", "OUT", voltage=v_out, draws=current)
    cards = "L1 IN SW 100u\nM1 SW g 0 0 FET\nD1 SW OUT DX\nC9 OUT 0 100u"
    study = Study(cards, sheet(dc("in", "IN", voltage=V_IN), output))
    study.expect("M1", off=(V_IN, v_out), on=(0, None), quadrants="I")
    study.expect("D1", off=(-v_out, V_IN - v_out), on=(0, None), quadrants="II")
    for name in ("M1", "D1"):
        assert study.position(name)["demand"]["on_current"][1] >= peak
