"""How far apart two nets can be, along what is known to stand between them."""

import pytest

from rulecheck.facts import Bounds
from tests.kit.facts import facts_of

CARDS = """* two transistors back to back between bank and bus, an isolated driver
M1 BAT G1 SC SC FET
M2 BUS G2 SC SC FET
C1 BUS 0 470u
XU1 V5 GL EN VG GD SC DR
R1 GD G1 10
R2 GD G2 10
.model FET NMOS
"""
PORTS = """ports:
  battery: {between: [BAT, 0], voltage: [42 V, 58 V], supplies: [-80 A, 80 A]}
  bus: {between: [BUS, 0], voltage: [40 V, 60 V]}
"""
PARTS = """parts:
  DR: {kind: driver, pins: [supply-in, ground-in, input, supply, output, return]}
"""
BARRIER = """domains: {power: [BAT, BUS, 0], logic: [GL]}
barriers: [{between: [power, logic], voltage: 100 V}]
"""


def potential(sheet: str) -> object:
    return facts_of(CARDS, sheet, PARTS).by_name[("gate-drive", "G1")].values["return-potential"]


def test_nothing_joins_the_two_sides() -> None:
    assert "domains and barriers" in str(potential(PORTS))


def test_a_barrier_of_the_sheet_and_the_net_inside_a_position() -> None:
    """100 V between the domains; the common source stays within the switch's 18 V of the bank."""
    found = potential(PORTS + BARRIER)
    assert isinstance(found, Bounds)
    assert found.range.high == pytest.approx(118.0)
