"""Gated positions straight across a stiff voltage."""

from tests.kit.stages import demands_of

SHEET = """
ports:
  string: {between: [PV, "0"], voltage: [120 V, 200 V], supplies: [0 A, 12 A]}
  bus: {between: [BUS, "0"], voltage: [360 V, 400 V]}
switching: {frequency: 30 kHz}
"""


def test_a_transistor_across_the_bus_shorts_it() -> None:
    demands = demands_of("L1 PV BUS 1.2m\nM1 BUS G1 0 0 FET\nC2 BUS 0 470u\n", SHEET)
    (group,) = demands.groups
    assert group.positions == ("M1",)
    assert group.cannot_work
    assert "shorts v(bus)" in group.why_not


def test_a_leg_on_the_same_bus_shorts_nothing() -> None:
    cards = "L1 PV SW 1.2m\nM1 SW G1 0 0 FET\nM2 BUS G2 SW SW FET\nC2 BUS 0 470u\n"
    assert all(group.analysed for group in demands_of(cards, SHEET).groups)
