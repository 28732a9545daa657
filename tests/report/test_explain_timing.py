"""The timing diagram of a leg: one period to scale, and the dead time at both edges."""

from rulecheck.demand import find_demands
from rulecheck.report.explain_timing import timing_entries
from rulecheck.report.look import Look
from tests.kit.stages import stage_of

LEG = """
C1 BUS 0 470u
M1 BUS GH SW SW FET
M2 SW GL 0 0 FET
L1 SW BAT 33u
C2 BAT 0 470u
V1 GH SW PULSE(0 12 0 10n 10n 8.2u 20u)
V2 GL 0 PULSE(0 12 {delay} 10n 10n 11u 20u)
"""
SHEET = """
ports:
  battery: {between: [BAT, 0], voltage: [42 V, 58 V], supplies: [-8 A, 8 A]}
  bus: {between: [BUS, 0], voltage: [80 V, 120 V]}
"""


def entries(delay: str) -> dict[str, str]:
    stage = stage_of(LEG.format(delay=delay), SHEET)
    (leg,) = find_demands(stage).legs
    return {e.label: e.text for e in timing_entries(leg, stage, Look(ascii=True))}


def test_rows_are_to_scale_and_the_pause_across_the_period_counts() -> None:
    """On from 5 ns to 8.215 us, and from 8.605 us to 19.615 us, of 20 us."""
    found = entries("8.6u")
    assert found["timing"] == "20 us, from V1 and V2"
    assert found["M1"] == "#" * 25 + "_" * 35
    assert found["M2"] == "_" * 26 + "#" * 33 + "_"
    assert found["both off"] == "390 ns before M2 turns on, 390 ns before M1 turns on"
    assert "both on" not in found


def test_an_overlap_is_told() -> None:
    found = entries("8u")
    assert found["both on"] == "210 ns in that time"
