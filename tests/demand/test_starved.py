"""Capacitor islands that give power and get none."""

from tests.kit.stages import demands_of

CARDS = "C1 P 0 220u\nM1 P G1 SW SW FET\nD2 0 SW DX\nL1 SW OUT 100u\nC2 OUT 0 470u\n"
OUT = 'out: {between: [OUT, "0"], voltage: 12 V, draws: [2 A, 8 A]}'
REST = "switching: {frequency: 100 kHz}\nset: {C1: {voltage: [18 V, 40 V]}}\n"


def open_points(cards: str, ports: str) -> list[str]:
    demands = demands_of(cards, f"ports:\n  {ports}\n  {OUT}\n{REST}")
    return [item.what for item in demands.undetermined]


def test_a_panel_that_is_not_connected_is_missed() -> None:
    panel = 'panel: {between: [PV, "0"], voltage: [18 V, 40 V]}'
    assert any("far side of M1" in what for what in open_points(CARDS + "C9 PV 0 1u\n", panel))


def test_a_connected_panel_feeds_it() -> None:
    panel = 'panel: {between: [PV, "0"], voltage: [18 V, 40 V]}'
    assert open_points(CARDS + "D1 PV P DX\n", panel) == []


def test_a_cell_whose_current_alternates_needs_no_feed() -> None:
    cards = "M1 A G1 X X FET\nM2 X G2 0 0 FET\nC1 A 0 10m\nL1 Y X 1m\n"
    sheet = """
ports: {arm: {between: [Y, "0"], draws: 100 A peak, frequency: 50 Hz}}
set: {C1: {voltage: 800 V}}
"""
    whats = [item.what for item in demands_of(cards, sheet).undetermined]
    assert not any("far side" in what for what in whats)
