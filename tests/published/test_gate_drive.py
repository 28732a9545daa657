"""Gate drive: published formulas against their worked examples, and against integration."""

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import solve_ivp

from rulecheck.facts import Bounds
from rulecheck.facts.gate_formulas import (
    bootstrap_charge,
    capacitive_bound,
    gate_power,
    induced_gate_voltage,
)
from tests.kit.facts import facts_of, verdict_of

LEG = """* upper and lower switch with a bootstrap driver
C1 BUS 0 470u
M1 BUS GH SW SW FET
M2 SW GL 0 0 FET
L1 SW BAT 33u
C2 BAT 0 470u
XU1 V15 0 HIN LIN VB HO SW LO DR
R1 HO GH {ohms}
R2 LO GL {ohms}
D1 V15 VB DX
C3 VB SW {bootstrap}
.model FET NMOS
.model DX D
"""
SHEET = """
ports:
  battery: {{between: [BAT, 0], voltage: 100 V, supplies: [-8 A, 8 A]}}
  bus: {{between: [BUS, 0], voltage: 400 V}}
switching: {{frequency: {frequency}, edge: {edge}}}
gate-supplies: {{V15: {supply}}}
"""
PARTS = """
parts:
  FET:
    kind: mosfet
    ratings: {{blocking: 650 V, gate: [-25 V, 25 V]}}
    gate: {{charge: {charge}, threshold: [2 V, 4 V], miller-capacitance: {miller},
      input-capacitance: {input}, resistance: {inner}}}
  DR:
    kind: driver
    pins: [supply, ground, input-high, input-low, bootstrap, output-high, return-high, output-low]
    driver: {{lockout: 10 V, supply: [10 V, 25 V], sink-resistance: {driver},
      source-resistance: {driver}, quiescent-current: {quiescent}}}
"""
PLAIN = {
    "ohms": 5,
    "bootstrap": "1u",
    "frequency": "100 kHz",
    "edge": "8 ns",
    "supply": "15 V",
    "charge": "60 nC",
    "miller": "50 pF",
    "input": "3.05 nF",
    "inner": "0 ohm",
    "driver": "0 ohm",
    "quiescent": "120 uA",
}


def facts(**given):
    words = {**PLAIN, **given}
    return facts_of(LEG.format(**words), SHEET.format(**words), PARTS.format(**words))


def verdict(rule: str, **given) -> str:
    words = {**PLAIN, **given}
    texts = (LEG.format(**words), SHEET.format(**words), PARTS.format(**words))
    return verdict_of(rule, "VB", *texts)


def test_induced_voltage_of_the_worked_example() -> None:
    """5 ohm, 50 pF, 3 nF, 50 V/ns, 400 V: 5.1025 V, and 6.5574 V at most.

    Divider of application notes; expression from memory, checked by integration below.
    """
    low = facts().by_name[("gate-drive", "GL")].values
    assert low["induced-voltage"] == pytest.approx(5.1025, abs=5e-4)
    unheld = facts(driver="1 Gohm").by_name[("gate-drive", "GL")].values
    assert unheld["induced-voltage"] == pytest.approx(6.5574, abs=5e-4)


def test_induced_voltage_of_the_second_example() -> None:
    """10 ohm, 100 pF, 1.9 nF, 10 V/ns: 8.6466 V, and 20.0 V at most."""
    assert induced_gate_voltage(10.0, 100e-12, 2e-9, 10e9, 400.0) == pytest.approx(8.6466, abs=5e-4)
    assert capacitive_bound(100e-12, 2e-9, 400.0) == pytest.approx(20.0)


def test_where_the_edge_is_not_stated_the_bound_holds() -> None:
    value = facts(edge="8 ns", driver="0 ohm").by_name[("gate-drive", "GL")]
    assert isinstance(value.values["induced-voltage"], float)
    open_edge = (
        facts_of(
            LEG.format(**PLAIN),
            SHEET.format(**PLAIN).replace(", edge: 8 ns", ""),
            PARTS.format(**PLAIN),
        )
        .by_name[("gate-drive", "GL")]
        .values["induced-voltage"]
    )
    assert isinstance(open_edge, Bounds)
    assert open_edge.range.high == pytest.approx(6.5574, abs=5e-4)


@settings(max_examples=25, deadline=None)
@given(st.floats(0.5, 50.0), st.floats(1e-12, 3e-10), st.floats(2e-10, 2e-8), st.floats(1e8, 1e11))
def test_induced_voltage_against_integration(
    ohms: float, miller: float, source: float, rate: float
) -> None:
    """(Cgs + Cgd) dv/dt = Cgd s - v/R while the drain rises at s to 400 V, by scipy."""
    end = 400.0 / rate
    solved = solve_ivp(
        lambda _, v: (miller * rate - v / ohms) / (miller + source),
        (0.0, end),
        [0.0],
        method="LSODA",
        rtol=1e-9,
        atol=1e-12,
    )
    found = induced_gate_voltage(ohms, miller, miller + source, rate, 400.0)
    assert found == pytest.approx(float(solved.y[0, -1]), rel=1e-5, abs=1e-9)
    assert found <= capacitive_bound(miller, miller + source, 400.0) * (1 + 1e-9)


def test_bootstrap_charge_of_the_worked_example() -> None:
    """60 nC, 130 uA, 95 us, 5 nC at 0.5 V: 154.7 nF (application notes on bootstrap supplies)."""
    needed = bootstrap_charge(60e-9, 130e-6, 95e-6, 5e-9) / 0.5
    assert needed == pytest.approx(154.7e-9, rel=1e-3)
    assert bootstrap_charge(5e-9, 0.0, 95e-6, 5e-9) / 0.5 == pytest.approx(20e-9)


def test_the_rule_asks_for_what_the_worked_example_asks_for() -> None:
    """The same as rule bootstrap-capacitor-small judges it: 10 kHz stands for 100 us on."""
    stage = {"frequency": str(1e6 / 95) + " Hz", "quiescent": "120 uA"}
    assert verdict("bootstrap-capacitor-small", **stage, bootstrap="155n") == "holds"
    assert verdict("bootstrap-capacitor-small", **stage, bootstrap="154n") == "broken"


def test_the_fuller_estimate_asks_for_92_nanofarad() -> None:
    """60 nC, 120 uA, 10 kHz, 5 nC, 10 uA, 15/1/1/10 V: 92.0 nF (design tip DT98-2, as quoted)."""
    stage = {"frequency": "10 kHz", "quiescent": "120 uA"}
    assert verdict("bootstrap-capacitor-margin", **stage, bootstrap="92.1n") == "holds"
    assert verdict("bootstrap-capacitor-margin", **stage, bootstrap="91.9n") == "broken"


def test_gate_power_and_its_share_in_the_resistor() -> None:
    """100 nC, 20 V, 100 kHz: 0.200 W; of 2 + 1 + 1 ohm 0.100 W in the 2 ohm, 5.0 A at the peak
    (application notes, from memory)."""
    assert gate_power(100e-9, 20.0, 100e3) == pytest.approx(0.2)
    found = (
        facts(charge="100 nC", ohms=2, inner="1 ohm", driver="1 ohm", supply="20 V")
        .by_name[("gate-drive", "GL")]
        .values
    )
    assert found["power"] == pytest.approx(0.2)
    assert found["resistor-power"] == pytest.approx(0.1)
    assert found["hottest-resistor"] == "R2"
    whole = facts(charge="100 nC", ohms=4, supply="20 V").by_name[("gate-drive", "GL")].values
    assert whole["peak-current"] == pytest.approx(5.0)


def test_the_bootstrap_diode_sees_bus_and_supply() -> None:
    """A 400 V bus and a 15 V supply: 415 V."""
    found = facts().by_name[("gate-supply", "VB")].values
    assert found["diode-voltage"] == pytest.approx(415.0)
    assert math.isclose(found["on-time"], 1e-5)
