"""Discharge, precharge and balancing against worked figures (elementary formulas).

Limits: IEC 60204-1:2016, 6.2.4; NFPA 79-2024, 6.5.1; IEC 61010-1, 6.10.3 (confirmed); IEC
61800-5-1:2007 and UN R94 (from memory).
"""

import math

import pytest

from rulecheck.rulebook import DISCHARGE_LIMITS, judge
from tests.kit.published import Study, dc, sheet
from tests.rules.shipped import rulebook

BUCK = "M1 IN g SW SW FET\nD1 0 SW DX\nL1 SW OUT 1m\nC9 OUT 0 1u"


def study(volts: float, cards: str) -> Study:
    ports = dc("in", "IN", voltage=volts), dc("out", "OUT", voltage=volts / 20, draws=1)
    return Study(f"{BUCK}\n{cards}", sheet(*ports))


def bank(volts: float, cards: str, name: str = "C1") -> dict[str, object]:
    facts = study(volts, cards).analysis.facts
    return dict(facts.by_name["bank", name].values)


@pytest.mark.parametrize(
    ("ohm", "farad", "volts", "seconds", "energy"),
    [(10e3, 500e-6, 800, 12.951, 160), (100e3, 2e-3, 800, 518.05, 640),
     (47e3, 470e-6, 400, 41.907, 37.6), (3860.6, 500e-6, 800, 5.0, 160),
     (5607.6, 470e-6, 400, 5.0, 37.6), (92654.5, 500e-6, 800, 120.0, 160)],
)  # fmt: skip
def test_time_to_60_volt(ohm, farad, volts, seconds, energy):
    found = bank(volts, f"C1 IN 0 {farad}\nR1 IN 0 {ohm}")
    assert found["time-to-60-volt"] == pytest.approx(seconds, rel=1e-4)
    assert found["time-to-37-percent"] == pytest.approx(ohm * farad, rel=1e-6)
    assert found["energy"] == pytest.approx(energy, rel=1e-6)


def test_a_string_discharges_as_one_capacitor():
    """Two times 1 mF with 5 kilohm each are 500 uF with 10 kilohm; to 60 V each from 400 V."""
    cards = "C1 IN M 1m\nC2 M 0 1m\nR1 IN M 5k\nR2 M 0 5k"
    found = bank(800, cards)
    assert found["time-to-60-volt"] == pytest.approx(5 * math.log(400 / 60), rel=1e-6)
    assert (found["in-series"], found["string-voltage"]) == (2.0, 800.0)
    across = bank(800, "C1 IN M 1m\nC2 M 0 1m\nR1 IN 0 10k")
    assert across["time-to-60-volt"] == pytest.approx(5 * math.log(400 / 60), rel=1e-6)
    assert across["balanced"] is False


def test_precharge():
    """800 V, 100 ohm, 1 mF: 8 A, 320 J."""
    cards = "XK1 A B SRC IN RE\nR5 SRC IN 100\nC1 IN 0 1m"
    ports = dc("in", "SRC", voltage=800, source="battery"), dc("out", "OUT", voltage=40, draws=1)
    relay = "parts:\n  RE: {kind: relay, pins: [a, b, common, normally-open]}\n"
    relay = relay.replace("[a, b,", "[coil-plus, coil-minus,")
    facts = Study(f"{BUCK}\n{cards}", sheet(*ports), relay).analysis.facts
    found = facts.by_name["bank", "C1"].values
    assert found["precharge-current"] == pytest.approx(8.0)
    assert found["energy"] == pytest.approx(320.0)
    assert found["inrush-limited"] is True


@pytest.mark.parametrize(("milliohm", "verdict"), [(199_000_000, "holds"), (201_000_000, "broken")])
def test_balancing_resistance(milliohm, verdict):
    """Two of 450 V on 800 V, 0.5 mA of difference in leakage: at most 200 kilohm."""
    ohm = milliohm / 1000
    card = "C{k} {a} {b} 470u voltage=450 dielectric=electrolytic\nR{k} {a} {b} {ohm}\n"
    cards = card.format(k=1, a="IN", b="M", ohm=ohm) + card.format(k=2, a="M", b="0", ohm=ohm)
    verdicts = judge(rulebook("bus"), study(800, cards).analysis.facts).verdicts
    found = {v.subject: v.verdict for v in verdicts if v.rule == "balancing-resistance"}
    assert found == {"C1": verdict, "C2": verdict}


@pytest.mark.parametrize(
    ("pack", "seconds", "charge"),
    [("discharge/iec-60204-1", 5, 60e-6), ("discharge/nfpa-79", 5, 60e-6),
     ("discharge/iec-61800-5-1", 5, 50e-6), ("discharge/iec-61010-1", 10, 45e-6),
     ("discharge/un-r94", 60, 50e-6), ("discharge/vehicle-active", 5, 50e-6)],
)  # fmt: skip
def test_limits_of_the_standards(pack, seconds, charge):
    book = rulebook("bus", pack)
    assert [problem.line() for problem in book.problems] == []
    values = {name: book.parameters[name].row_for(()) for name in book.parameters}
    assert values["discharge.time"].value == seconds
    assert values["discharge.charge"].value == pytest.approx(charge)
    slow = study(800, f"C1 IN 0 500u\nR1 IN 0 {1.02 * seconds / 500e-6 / math.log(800 / 60)}")
    quick = study(800, f"C1 IN 0 500u\nR1 IN 0 {0.98 * seconds / 500e-6 / math.log(800 / 60)}")
    for stage, verdict in ((slow, "broken"), (quick, "holds")):
        found = judge(book, stage.analysis.facts).verdicts
        (own,) = [v for v in found if v.rule == "discharge-time" and v.subject == "C1"]
        assert (own.verdict, own.level) == (verdict, "error")


def test_every_shipped_limit_is_tested():
    assert len(DISCHARGE_LIMITS) == 6
