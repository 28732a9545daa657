"""The derating profiles against the figures of their sources."""

import pytest

from rulecheck.rulebook import PROFILES
from tests.rules.shipped import rulebook

ECSS, NASA = "derating/ecss-q-st-30-11c", "derating/eee-inst-002"
SEVERE, BENIGN = "derating/rac-severe", "derating/rac-benign"


@pytest.mark.parametrize(
    ("profile", "parameter", "word", "rating", "limit"),
    [
        # ECSS-Q-ST-30-11C Rev.1, clause 6, from memory
        (ECSS, "derate.blocking", "mosfet", 650.0, 520.0),
        (ECSS, "derate.blocking", "diode", 600.0, 450.0),
        (ECSS, "derate.gate-voltage", "", 20.0, 15.0),
        # NASA EEE-INST-002, sections D1, T1 and C1, table 4 (semiconductors from memory)
        (NASA, "derate.blocking", "mosfet", 200.0, 150.0),
        (NASA, "derate.blocking", "diode", 100.0, 70.0),
        (NASA, "derate.current", "diode", 10.0, 5.0),
        (NASA, "derate.gate-voltage", "", 20.0, 12.0),
        (NASA, "derate.capacitor-voltage", "tantalum", 35.0, 17.5),
        # Reliability Analysis Center, Electronic Derating for Optimum Performance (2000)
        (SEVERE, "derate.blocking", "diode", 650.0, 455.0),
        (SEVERE, "derate.capacitor-voltage", "electrolytic", 450.0, 315.0),
        (BENIGN, "derate.capacitor-voltage", "electrolytic", 450.0, 360.0),
        # common practice: 80 % of 500 V for a stress of 400 V
        ("derating/plain-80-percent", "derate.blocking", "", 500.0, 400.0),
    ],
)
def test_the_published_limits(profile, parameter, word, rating, limit):
    row = rulebook(profile).parameters[parameter].row_for((word,))
    assert rating * row.value == pytest.approx(limit)


@pytest.mark.parametrize("profile", PROFILES)
def test_a_profile_loads_after_the_packs_and_names_its_source(profile):
    book = rulebook(profile)
    assert [problem.line() for problem in book.problems] == []
    changed = [line for line in book.changes if profile in line]
    assert len(changed) >= 3
    factors = [p for name, p in book.parameters.items() if name.startswith("derate.")]
    assert factors
    for parameter in factors:
        assert all(0.0 < row.value <= 1.0 for row in parameter.rows.values())
        assert all(row.source for row in parameter.rows.values())


@pytest.mark.parametrize("profile", [ECSS, NASA, SEVERE, BENIGN])
def test_what_a_source_does_not_name_is_not_laid_at_its_door(profile):
    own = rulebook().parameters["derate.blocking"].row_for(("igbt",))
    assert rulebook(profile).parameters["derate.blocking"].row_for(("igbt",)) == own


@pytest.mark.parametrize("profile", [ECSS, NASA])
def test_a_factor_from_memory_says_so(profile):
    for name in ("derate.blocking", "derate.current", "derate.gate-voltage"):
        assert "from memory" in rulebook(profile).parameters[name].row_for(("mosfet",)).source
