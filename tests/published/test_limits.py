"""Where the method's assumptions end: a number comes with its limit, or not at all.

Common practice throughout. Resonant peaks and the charging pulses of a capacitor behind diodes
are not found by constant quantities; what those stages block is.
"""

import math

import pytest

from tests.kit.published import Study, ac, dc, phases, sheet

CHARGING = "charging pulses"


def cautions(study: Study) -> str:
    """What the table says is not covered."""
    return " / ".join(study.table["not_covered"])


def test_single_phase_bridge_into_a_capacitor() -> None:
    cards = "D1 L P DX\nD2 N P DX\nD3 0 L DX\nD4 0 N DX\nC1 P 0 470u"
    mains = ac("mains", "L", "N", voltage="230 V rms")
    study = Study(cards, sheet(mains, dc("load", "P", draws=2)))
    for number in range(1, 5):
        study.expect(f"D{number}", off=(-230 * math.sqrt(2), None), quadrants="II")
    assert CHARGING in cautions(study)


def test_three_phase_bridge_into_a_capacitor() -> None:
    upper = [f"D{k} {net} P DX" for k, net in enumerate("abc", start=1)]
    lower = [f"D{k + 3} 0 {net} DX" for k, net in enumerate("abc", start=1)]
    mains = phases("mains", "a", "b", "c", line_voltage="400 V rms")
    cards = "\n".join([*upper, *lower, "C1 P 0 470u"])
    study = Study(cards, sheet(mains, dc("load", "P", draws=20)))
    for number in range(1, 7):
        study.expect(f"D{number}", off=(-400 * math.sqrt(2), None), quadrants="II")
    assert CHARGING in cautions(study)


def test_voltage_doubler() -> None:
    """Each capacitor charges to the peak; each diode blocks twice of it, or its bound is open."""
    cards = "D1 L P DX\nD2 N L DX\nC1 P M 470u\nC2 M N 470u"
    mains = ac("mains", "L", "M", voltage="115 V rms")
    study = Study(cards, sheet(mains, dc("load", "P", "N", draws=2)))
    for name in ("D1", "D2"):
        off = study.position(name)["demand"]["off_voltage"]
        known = off is not None and off[0] is not None
        assert not known or off[0] == pytest.approx(-2 * 115 * math.sqrt(2), rel=0.01)
        assert known or any("C1" in entry["what"] for entry in study.table["undetermined"])
    assert CHARGING in cautions(study)


def test_resonant_half_bridge() -> None:
    """Blocking is the bus and twice the output; the currents are not claimed."""
    cards = """
    M1 IN g1 A A FET
    M2 A g2 0 0 FET
    C1 A R 47n
    L1 R P 60u
    L2 P 0 300u
    L3 S1 SG 3u
    L4 SG S2 3u
    K1 L2 L3 L4 1
    D1 S1 OUT DX
    D2 S2 OUT DX
    C2 OUT SG 1m
    """
    output = dc("out", "OUT", "SG", voltage=24, draws=(0, 10))
    study = Study(cards, sheet(dc("in", "IN", voltage=400), output))
    for name in ("M1", "M2"):
        study.expect(name, off=(None, 400))
        current = study.position(name)["demand"]["on_current"]
        assert current is None or current[0] != 0 or current[1] != 0, current
    for name in ("D1", "D2"):
        study.expect(name, off=(-48, None))
    assert "resonan" in cautions(study)


def test_supplies_joined_by_diodes_are_no_short() -> None:
    """The bus follows the higher supply; each diode blocks the difference, or what a had before."""
    ports = (
        dc("a", "A", voltage=(42, 58)),
        dc("b", "B", voltage=(40, 54)),
        dc("load", "BUS", draws=(0, 30)),
    )
    study = Study("D1 A BUS DX\nD2 B BUS DX\nC1 BUS 0 1m", sheet(*ports))
    assert not study.analysis.demands.free_shorts
    study.expect("D2", off=(40 - 58, None))
    assert 42 - 58 <= study.position("D1")["demand"]["off_voltage"][0] <= 42 - 54


def test_coil_without_a_freewheeling_diode() -> None:
    """A relay's coil behind a transistor: with the gate off its current has no way on."""
    study = Study("M1 SW g 0 0 FET\nL1 BAT SW 10m", sheet(dc("battery", "BAT", voltage=48)))
    assert {rule for rule, _ in study.broken()} & {"interrupted-current", "group-not-analysed"}


def test_two_coils_wound_against_each_other_share_the_input_current() -> None:
    """Interleaved boost on one core: 20 A of input current are 10 A a coil, or left open."""
    cards = """
    L1 IN A 100u
    L2 IN B 100u
    K1 L1 L2 -0.95
    M1 A g1 0 0 FET
    M2 B g2 0 0 FET
    D1 A OUT DX
    D2 B OUT DX
    C2 OUT 0 100u
    """
    ports = dc("in", "IN", voltage=48, supplies=20), dc("out", "OUT", voltage=96)
    study = Study(cards, sheet(*ports))
    for name in ("M1", "M2", "D1", "D2"):
        current = study.position(name)["demand"]["on_current"]
        assert current is None or current[1] is None or current[1] >= 10, (name, current)
