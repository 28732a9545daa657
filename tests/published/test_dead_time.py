"""Dead time and reverse recovery: published formulas against their worked examples."""

import pytest

from rulecheck.facts.recovery import peak_recovery_current, recovery_loss
from tests.kit.facts import facts_of, verdict_of

NETLIST = """* a leg with a driver
C1 BUS 0 470u
M1 BUS GH SW SW FET
M2 SW GL 0 0 FET
L1 SW BAT 1m
C2 BAT 0 470u
XU1 V15 0 HIN LIN VB HO SW LO DR
R1 HO GH 5
R2 LO GL 5
.model FET NMOS
"""
SHEET = """
ports:
  battery: {{between: [BAT, 0], voltage: 100 V, supplies: [-8 A, 8 A]}}
  bus: {{between: [BUS, 0], voltage: 400 V}}
switching: {{frequency: 20 kHz, dead-time: {dead}}}
"""
PARTS = """
parts:
  FET: {{kind: mosfet, gate: {{turn-on: {on}, turn-off: {off}}}}}
  DR:
    kind: driver
    pins: [supply, ground, input-high, input-low, bootstrap, output-high, return-high, output-low]
    driver: {{delay: {delay}, interlock: false}}
"""


def texts(dead: str, on: str, off: str, delay: str) -> tuple[str, str, str]:
    return (
        NETLIST,
        SHEET.format(dead=dead),
        PARTS.format(on=on, off=off, delay=delay),
    )


@pytest.mark.parametrize(("dead", "verdict"), [("937 ns", "holds"), ("935 ns", "broken")])
def test_needed_dead_time_of_the_worked_example(dead: str, verdict: str) -> None:
    """[(800 - 120) + (350 - 250)] ns times 1.2 is 936 ns (AN2007-04; formula from memory)."""
    stage = texts(dead, "[120 ns, 300 ns]", "[500 ns, 800 ns]", "[250 ns, 350 ns]")
    assert verdict_of("dead-time-short", "SW", *stage) == verdict


def test_effective_dead_time_of_the_worked_example() -> None:
    """3.0 us less 1.3 us of off delays and more 0.6 us of on delays is 2.3 us (application
    manual for IGBT modules, equation 28)."""
    stage = texts("3 us", "[0.4 us, 0.5 us]", "[0.9 us, 1.0 us]", "[0.2 us, 0.3 us]")
    leg = facts_of(*stage).by_name[("leg", "SW")].values
    assert leg["effective-dead-time"] == pytest.approx(2.3e-6)


def test_voltage_error_of_the_worked_example() -> None:
    """1 us at 20 kHz on 400 V costs 8 V, 2 % of the duty (textbook, from memory)."""
    stage = texts("1 us", "100 ns", "200 ns", "[20 ns, 40 ns]")
    leg = facts_of(*stage).by_name[("leg", "SW")].values
    assert leg["dead-time"] * leg["frequency"] * leg["rail-voltage"] == pytest.approx(8.0)
    assert leg["dead-time"] * leg["frequency"] == pytest.approx(0.02)


def test_recovery_loss_and_peak_of_the_worked_examples() -> None:
    """200 nC, 400 V, 100 kHz: 8 W; 100 A/us, softness 0 and 0.5: 6.325 A and 5.164 A (textbook
    formulas, from memory)."""
    assert recovery_loss(200e-9, 400.0, 100e3) == pytest.approx(8.0)
    assert peak_recovery_current(200e-9, 100e6) == pytest.approx(6.325, abs=5e-4)
    assert peak_recovery_current(200e-9, 100e6, 0.5) == pytest.approx(5.164, abs=5e-4)
