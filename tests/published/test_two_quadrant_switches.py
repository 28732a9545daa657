"""Current-bidirectional switches: where they are needed and what realises them.

Common practice of the trade throughout: a position whose current reverses under one polarity of
voltage needs quadrants I and IV, which a transistor with an anti-parallel diode covers.
"""

import pytest

from tests.kit.published import Study, ac, dc, phases, sheet

HALF_BUS = 24.0
SPLIT_BUS = (dc("upper", "P", "M", voltage=HALF_BUS), dc("lower", "M", "N", voltage=HALF_BUS))
MOSFETS = "M1 P g1 SW SW FET\nM2 SW g2 N N FET"
BARE = "Q1 P b1 SW NPX\nQ2 SW b2 N NPX"
WITH_DIODES = BARE + "\nD1 SW P DX\nD2 N SW DX"
DIODES_BACKWARDS = BARE + "\nD1 P SW DX\nD2 SW N DX"
UPSIDE_DOWN = "Q1 SW b1 P NPX\nQ2 N b2 SW NPX\nD1 P SW DX\nD2 SW N DX"


def half_bridge(switches: str, duty: float = 0.75) -> Study:
    v_out = (2 * duty - 1) * HALF_BUS
    output = dc("out", "OUT", "M", voltage=v_out, draws=(-10, 10))
    return Study(switches + "\nL1 SW OUT 100u", sheet(*SPLIT_BUS, output))


@pytest.mark.parametrize("duty", [0.25, 0.5, 0.75])
def test_split_bus_half_bridge_needs_two_quadrants_and_blocks_both_halves(duty: float) -> None:
    """Output (2 D - 1) V_g; ripple 2 V_g D (1 - D) / (L f), which only that output gives."""
    study = half_bridge(MOSFETS, duty)
    peak = 10 + 2 * HALF_BUS * duty * (1 - duty) / (100e-6 * 100e3) / 2
    for name in ("M1", "M2"):
        study.expect(name, off=(48, 48), on=(-peak, peak), quadrants="I+IV")
        assert study.position(name)["covered"] is True
        assert study.position(name)["demand"]["class"] == "current-bidirectional"
    assert study.legs()["SW"]["levels"] == 2
    assert study.table["groups"] == [{"positions": ["M1", "M2"], "legal_states": 2}]


def test_transistors_without_diodes_lack_the_reverse_direction() -> None:
    study = half_bridge(BARE)
    for name in ("Q1", "Q2"):
        study.expect(name, off=(48, 48), quadrants="I+IV")
        position = study.position(name)
        assert position["capability"]["quadrants"] == ["I"]
        assert position["covered"] is False
    assert not study.analysis.demands.free_shorts


def test_the_same_with_diodes_is_covered() -> None:
    study = half_bridge(WITH_DIODES)
    assert [entry["name"] for entry in study.table["positions"]] == ["Q1", "Q2"]
    assert all(entry["covered"] for entry in study.table["positions"])
    assert study.position("Q1")["capability"]["quadrants"] == ["I", "IV"]


def test_diodes_drawn_backwards_short_the_bus_with_all_gates_off() -> None:
    study = half_bridge(DIODES_BACKWARDS)
    (short,) = study.analysis.demands.free_shorts
    assert set(short.positions) == {"Q1", "Q2"}
    assert "free-short" in {rule for rule, _ in study.broken()}, study.broken()
    assert not any(entry["covered"] for entry in study.table["positions"])


def test_the_other_way_up_means_quadrants_two_and_three() -> None:
    """Seen from the collector the leg asks for v < 0 and both directions of current."""
    study = half_bridge(UPSIDE_DOWN)
    for name, collector in (("Q1", "SW"), ("Q2", "N")):
        assert study.position(name)["from"] == collector
        study.expect(name, off=(-48, -48), quadrants="II+III")
        assert study.position(name)["covered"] is False


def test_the_other_way_up_suits_a_bus_of_the_other_polarity() -> None:
    negative = SPLIT_BUS[0].replace("24", "-24"), SPLIT_BUS[1].replace("24", "-24")
    output = dc("out", "OUT", "M", voltage=0, draws=(-10, 10))
    study = Study(UPSIDE_DOWN + "\nL1 SW OUT 100u", sheet(*negative, output))
    for name in ("Q1", "Q2"):
        study.expect(name, off=(48, 48), quadrants="I+IV")
        assert study.position(name)["covered"] is True


REALISATIONS = {
    # the upper position of a leg between P and SW: its cards, its quadrants
    "MOSFET alone": ("M1 P g1 SW SW FET", "I+IV"),
    "MOSFET, series diode, anti-parallel diode": (
        "M1 P g1 X X FET\nD1 X SW DX\nD2 SW P DX", "I+IV"),
    "MOSFET, series diode at the drain, anti-parallel diode": (
        "D1 P X DX\nM1 X g1 SW SW FET\nD2 SW P DX", "I+IV"),
    "MOSFET and series diode": ("M1 P g1 X X FET\nD1 X SW DX", "I+II"),
    "bare transistor": ("Q1 P g1 SW NPX", "I"),
    "bare transistor and series diode": ("Q1 P g1 X NPX\nD1 X SW DX", "I+II"),
}  # fmt: skip


@pytest.mark.parametrize("name", REALISATIONS)
def test_series_and_anti_parallel_diodes(name: str) -> None:
    """A series diode keeps the body diode from conducting and needs an external one beside it."""
    cards, quadrants = REALISATIONS[name]
    study = half_bridge(cards + "\nM2 SW g2 N N FET")
    position = study.position(cards.split()[0] if cards[0] != "D" else "M1")
    assert position["capability"]["quadrants"] == quadrants.split("+")
    assert position["covered"] is (quadrants == "I+IV")


def battery(cards: str, draws: tuple[float, float]) -> Study:
    ports = dc("bus", "BUS", voltage=96), dc("battery", "BAT", voltage=(42, 58), draws=draws)
    return Study(cards + "\nL1 SW BAT 100u", sheet(*ports))


def test_a_battery_converter_used_both_ways_needs_two_quadrants_twice() -> None:
    study = battery("M1 BUS g1 SW SW FET\nM2 SW g2 0 0 FET", (-80, 80))
    study.expect("M1", off=(96, 96), quadrants="I+IV")
    study.expect("M2", off=(96, 96), quadrants="I+IV")


def test_a_battery_charger_needs_one_transistor_and_one_diode() -> None:
    study = battery("M1 BUS g1 SW SW FET\nM2 SW g2 0 0 FET", (20, 80))
    study.expect("M1", off=(96, 96), quadrants="I")
    study.expect("M2", off=(96, 96), quadrants="IV")
    with_diode = battery("Q1 BUS g1 SW NPX\nD1 0 SW DX", (20, 80))
    with_diode.expect("Q1", off=(96, 96), quadrants="I")
    with_diode.expect("D1", off=(-96, -96), quadrants="II")
    assert all(entry["covered"] for entry in with_diode.table["positions"])


def test_three_phase_bridge_from_a_battery() -> None:
    """Six positions, each blocks the bus and carries the amplitude of the phase both ways."""
    legs = "".join(
        f"Q{k} BUS h{k} {net} IGD\nQ{k + 3} {net} l{k} 0 IGD\n"
        for k, net in enumerate("UVW", start=1)
    ).replace("Q", "Z")
    ports = (
        dc("battery", "BUS", voltage=(42, 58)),
        phases("pump", "U", "V", "W", draws="25 A peak", frequency=(0, 60)),
    )
    study = Study(legs, sheet(*ports, frequency=20e3))
    for number in range(1, 7):
        study.expect(f"Z{number}", off=(42, 58), on=(-25, 25), quadrants="I+IV")
        assert study.position(f"Z{number}")["covered"] is True
    assert {leg["midpoint"] for leg in study.table["legs"]} == {"U", "V", "W"}


def test_h_bridge_output_follows_two_duty_minus_one() -> None:
    """Unipolar control of an H-bridge from 400 V: every position blocks 400 V, I and IV."""
    cards = "".join(
        f"M{k} P h{k} {net} {net} FET\nM{k + 1} {net} l{k} 0 0 FET\n"
        for k, net in ((1, "A"), (3, "B"))
    )
    load = ac("load", "A", "B", draws="20 A peak")
    study = Study(cards, sheet(dc("bus", "P", voltage=400), load))
    for number in range(1, 5):
        study.expect(f"M{number}", off=(400, 400), on=(-20, 20), quadrants="I+IV")
