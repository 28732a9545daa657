"""Currents over time against closed forms and worked figures.

Sources: Kolar and Round, IEE Proc. Electr. Power Appl. 153(4), 535-543, 2006 (three-phase bus
capacitor, from memory); Mohan, Undeland and Robbins, Power Electronics (cells, from memory); the
figures were confirmed by integration in the time domain, independent of both.
"""

import math

import pytest

from tests.kit.published import Study, ac, dc, phases, sheet
from tests.kit.waveforms import Waves, highest, open_points, span

BUCK = "C1 IN 0 100u\nM1 IN g SW SW FET\nD1 0 SW DX\nL1 SW OUT {henry:.9g}\nC2 OUT 0 100u"
BOOST = "C1 IN 0 100u\nL1 IN SW {henry:.9g}\nM1 SW g 0 0 FET\nD1 SW OUT DX\nC2 OUT 0 100u"
LARGE = 1e4
F = 100e3


def buck(duty: float, current: float, ripple: float = 0.0) -> Waves:
    volts = 100.0
    henry = volts * duty * (1 - duty) / (ripple * F) if ripple else LARGE
    ports = dc("in", "IN", voltage=volts), dc("out", "OUT", voltage=volts * duty, draws=current)
    return Waves(Study(BUCK.format(henry=henry), sheet(*ports, frequency=F)))


def boost(duty: float, current: float, ripple: float = 0.0) -> Waves:
    volts = 100.0
    henry = volts * duty * (1 - duty) / (ripple * F) if ripple else LARGE
    ports = (
        dc("in", "IN", voltage=volts * (1 - duty)),
        dc("out", "OUT", voltage=volts, draws=current),
    )
    return Waves(Study(BOOST.format(henry=henry), sheet(*ports, frequency=F)))


@pytest.mark.parametrize(
    ("duty", "current", "ripple", "rms"),
    [(0.5, 10, 0, 5.0), (0.25, 10, 0, 4.3301), (0.25, 10, 4, 4.3684), (0.4, 20, 6, 9.8590)],
)
def test_input_capacitor_of_a_buck_cell(duty, current, ripple, rms):
    waves = buck(duty, current, ripple)
    assert waves.capacitor("C1", "rms") == pytest.approx(rms, rel=2e-5, abs=1e-4)
    # triangular: ripple over root 12
    assert waves.capacitor("C2", "rms") == pytest.approx(ripple / math.sqrt(12), abs=1e-4)


@pytest.mark.parametrize(
    ("duty", "current", "ripple", "rms"),
    [(0.5, 5, 0, 5.0), (0.5, 5, 2, 5.0166), (0.7, 2.5, 3, 3.8482)],
)
def test_output_capacitor_of_a_boost_cell(duty, current, ripple, rms):
    assert boost(duty, current, ripple).capacitor("C2", "rms") == pytest.approx(rms, rel=2e-5)


def interleaved(count: int, duty: float, timing: str = "") -> Waves:
    """Legs on one input, 1 A together, their turn-on spread evenly over the period."""
    volts = 100.0
    cards = ["C1 IN 0 100u", "C2 OUT 0 100u"]
    for k in range(1, count + 1):
        cards += [f"M{k} IN g{k} S{k} S{k} FET", f"D{k} 0 S{k} DX", f"L{k} S{k} OUT {LARGE}"]
    legs = ", ".join(f"S{k + 1}: {{phase: {360 * k / count:.9g}}}" for k in range(count))
    extra = timing if timing else f"legs: {{{legs}}}"
    ports = dc("in", "IN", voltage=volts), dc("out", "OUT", voltage=volts * duty, draws=1)
    return Waves(Study("\n".join(cards), sheet(*ports, frequency=F, extra=extra)))


@pytest.mark.parametrize(
    ("count", "duty", "share"),
    [(1, 0.5, 0.5), (2, 0.25, 0.25), (2, 0.3, 0.24495), (3, 0.4, 0.13333),
     (4, 0.1, 0.12247), (2, 0.5, 0.0)],
)  # fmt: skip
def test_input_capacitor_of_interleaved_legs(count, duty, share):
    assert interleaved(count, duty).capacitor("C1", "rms") == pytest.approx(share, abs=2e-5)


def test_interleaved_legs_of_unknown_delays_are_bounded_and_say_so():
    found = interleaved(2, 0.3, "efficiency: 1").found.capacitors["C1"].rms
    assert span(found) == pytest.approx((0.0, math.sqrt(0.3 * 0.7)), rel=1e-4)
    assert open_points(found) == ["switching: {legs: {S1: {phase: ...}, S2: {phase: ...}}}"]


BRIDGE = """C1 P 0 1m
M1 P g1 U U FET
M2 U g2 0 0 FET
M3 P g3 V V FET
M4 V g4 0 0 FET
M5 P g5 W W FET
M6 W g6 0 0 FET"""


def three_phase(amplitude: float, index: str, factor: str, **more: str) -> Waves:
    load = {"draws": f"{amplitude:.9g} A peak", "modulation-index": index, "power-factor": factor}
    port = phases("load", "U", "V", "W", **load, **more)
    return Waves(Study(BRIDGE, sheet(dc("bus", "P", voltage=700), port, frequency=10e3)))


@pytest.mark.parametrize(
    ("rms_current", "index", "factor", "rms"),
    [(10, 0.8, 1, 6.1859), (10, 0.8, 0.9, 5.9317), (10, 1, 1, 5.0331), (10, 0.9, 0, 4.9809),
     (10, 0.6126, 1, 6.4975), (100, 0.9, 0.85, 55.383), (20, 0.8, 0.9, 11.863)],
)  # fmt: skip
def test_bus_capacitor_of_a_three_phase_bridge(rms_current, index, factor, rms):
    waves = three_phase(rms_current * math.sqrt(2), f"{index}", f"{factor}")
    assert waves.capacitor("C1", "rms") == pytest.approx(rms, rel=5e-5)


def test_the_worst_modulation_is_found_within_a_range():
    waves = three_phase(10 * math.sqrt(2), "[0, 1.1]", "[0.2, 1]")
    assert waves.capacitor("C1", "rms") == pytest.approx(6.497, rel=2e-3)


def test_without_modulation_and_power_factor_the_widest_is_a_bound():
    study = Study(BRIDGE, sheet(dc("bus", "P", voltage=700),
                                phases("load", "U", "V", "W", draws="14.142136 A peak"),
                                frequency=10e3))  # fmt: skip
    found = study.analysis.demands.waveforms.capacitors["C1"].rms
    assert highest(found) == pytest.approx(6.497, rel=2e-3)
    assert open_points(found) == [
        "ports: {load: {modulation-index: [LOW, HIGH]}}",
        "ports: {load: {power-factor: [LOW, HIGH]}}",
    ]


def test_leg_currents_of_sine_modulation():
    """Transistor and diode apart: amplitude 1, M = 0.8, cos phi = 0.9."""
    waves = three_phase(1.0, "0.8", "0.9")
    forward = waves.position("M1", "forward_mean"), waves.position("M1", "forward_rms")
    reverse = waves.position("M1", "reverse_mean"), waves.position("M1", "reverse_rms")
    assert forward == pytest.approx((0.24915, 0.44877), rel=2e-3)
    assert reverse == pytest.approx((0.06915, 0.22047), rel=5e-3)
    assert waves.position("M1", "rms") == pytest.approx(0.5, rel=1e-6)


def test_double_frequency_of_a_single_phase_bus():
    """3.3 kVA, 50 Hz, 1 mF, 400 V: 26.26 V peak to peak, 5.834 A, the rest is switching."""
    volts, power = 400.0, 3300.0
    index = 0.8
    amplitude = 2 * power / (index * volts)
    cards = "C1 P 0 1m\nM1 P g1 A A FET\nM2 A g2 0 0 FET\nM3 P g3 B B FET\nM4 B g4 0 0 FET"
    load = {"draws": f"{amplitude:.9g} A peak", "modulation-index": f"{index}",
            "power-factor": "1", "modulation": "unipolar"}  # fmt: skip
    study = Study(cards, sheet(dc("bus", "P", voltage=volts), ac("load", "A", "B", **load),
                               frequency=1e9))  # fmt: skip
    waves = Waves(study)
    assert waves.capacitor("C1", "ripple") == pytest.approx(26.26, rel=5e-4)
    # i^2 |m| over the cycle less the mean squared; the 2w part is S / (sqrt 2 V) of it
    square = amplitude**2 * (index / math.pi + index / (3 * math.pi) - index**2 / 4)
    assert waves.capacitor("C1", "rms") == pytest.approx(math.sqrt(square), rel=1e-4)
    assert power / (math.sqrt(2) * volts) == pytest.approx(5.834, abs=1e-3)
    assert waves.capacitor("C1", "rms") > 5.834


INVERTING = "C1 IN 0 100u\nM1 IN g SW SW FET\nL1 SW 0 100u\nD1 OUT SW DX\nC2 0 OUT 100u"
CUK = (
    "C3 IN 0 100u\nL1 IN A 100u\nM1 A g 0 0 FET\nC1 A B 100u\nD1 B 0 DX\n"
    "L2 OUT B 100u\nC2 0 OUT 100u"
)
SEPIC = (
    "C3 IN 0 100u\nL1 IN A 100u\nM1 A g 0 0 FET\nC1 A B 100u\nL2 0 B 100u\n"
    "D1 B OUT DX\nC2 OUT 0 100u"
)
ZETA = (
    "C3 IN 0 100u\nM1 IN g A A FET\nL1 A 0 100u\nC1 A B 100u\nD1 0 B DX\n"
    "L2 B OUT 100u\nC2 OUT 0 100u"
)


@pytest.mark.parametrize(
    ("cards", "plus", "minus", "volts", "switch", "diode"),
    [
        (BUCK.format(henry=1e-4), "OUT", "0", 19.2, (1.5360, 2.4377, 4.4160), (2.3040, 2.9856)),
        (BOOST.format(henry=1e-4), "OUT", "0", 80.0, (10.667, 16.869, 27.626), (16.0, 20.660)),
        (INVERTING, "0", "OUT", 32.0, (4.2667, 6.7551, 11.626), (6.4, 8.2734)),
        (CUK, "0", "OUT", 32.0, (4.266, 6.782, 12.585), (6.4, 8.306)),
        (SEPIC, "OUT", "0", 32.0, (4.266, 6.782, 12.585), (6.4, 8.306)),
        (ZETA, "OUT", "0", 32.0, (4.266, 6.782, 12.585), (6.4, 8.306)),
    ],
)  # fmt: skip
def test_cells_at_48_volt_and_a_duty_of_0_4(cards, plus, minus, volts, switch, diode):
    """5 ohm, 100 kHz, 100 uH; mean, rms and peak of the switch, mean and rms of the diode."""
    out = dc("out", plus, minus, voltage=volts, draws=volts / 5)
    waves = Waves(Study(cards, sheet(dc("in", "IN", voltage=48), out, frequency=F)))
    has = [waves.position("M1", quantity) for quantity in ("mean", "rms")]
    assert has == pytest.approx(switch[:2], rel=5e-4)
    waves.study.expect("M1", on=(None, switch[2]), within=1e-3)
    has = [waves.position("D1", quantity) for quantity in ("mean", "rms")]
    assert has == pytest.approx(diode, rel=5e-4)


@pytest.mark.parametrize(
    ("cards", "plus", "minus", "volts", "currents"),
    [(BOOST.format(henry=1e-4), "OUT", "0", 120.0, (9.0, 11.637, 16.440)),
     (INVERTING, "0", "OUT", 72.0, (5.4, 7.001, 10.440))],
)  # fmt: skip
def test_cells_at_a_duty_of_0_6(cards, plus, minus, volts, currents):
    out = dc("out", plus, minus, voltage=volts, draws=volts / 20)
    waves = Waves(Study(cards, sheet(dc("in", "IN", voltage=48), out, frequency=F)))
    has = [waves.position("M1", quantity) for quantity in ("mean", "rms")]
    assert has == pytest.approx(currents[:2], rel=5e-4)
    waves.study.expect("M1", on=(None, currents[2]), within=1e-3)


def test_discontinuous_conduction_of_a_buck_cell():
    """100 V to 40 V, 100 uH, 100 kHz, 2 A: ripple would be 2.4 A, so it stops below 1.2 A."""
    ports = dc("in", "IN", voltage=100), dc("out", "OUT", voltage=40, draws=0.3)
    waves = Waves(Study(BUCK.format(henry=1e-4), sheet(*ports, frequency=F)))
    # the triangle rises for s D and falls for s (1 - D); its peak is s 2.4 A, its mean 0.3 A
    s = math.sqrt(2 * 0.3 / 2.4)
    peak = 2.4 * s
    assert waves.inductor("L1", "peak") == pytest.approx(peak)
    assert waves.inductor("L1", "rms") == pytest.approx(peak * math.sqrt(s / 3))
    assert waves.position("M1", "rms") == pytest.approx(peak * math.sqrt(0.4 * s / 3))
