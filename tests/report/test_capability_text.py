"""The canonical text of the capabilities."""

from rulecheck.capability import capabilities_text
from tests.report.stage_example import battery_leg


def test_each_position_shows_both_directions_and_what_is_missing():
    _, capabilities, _ = battery_leg()
    assert capabilities_text(capabilities).splitlines()[:3] == [
        "Q1  I+IV",
        "  forward  blocks 100 V by Q1; carries unknown through Q1, gated;"
        " missing ratings.current of part SW-N100-7",
        "  reverse  blocks nothing; carries 120 A through Q1, free",
    ]
