"""Every whole stage says what the textbook says, and every faulty one its one mistake."""

import difflib

import pytest

from tests.kit.corpus import (
    CIRCUITS,
    Case,
    cases,
    finding_differences,
    leg_differences,
    position_differences,
    undetermined_differences,
)

SOUND, FAULTY = cases("sound"), cases("faulty")


@pytest.mark.parametrize("case", [*SOUND, *FAULTY], ids=str)
def test_positions_and_legs(case: Case) -> None:
    found = position_differences(case) + leg_differences(case) + undetermined_differences(case)
    assert not found, "\n".join(found)


@pytest.mark.parametrize("case", SOUND, ids=str)
def test_sound_stages_have_no_finding(case: Case) -> None:
    assert case.expected["findings"] == []
    assert not case.broken(), case.broken()


@pytest.mark.parametrize("case", SOUND, ids=str)
def test_what_sound_stages_state_is_enough_to_decide(case: Case) -> None:
    if not case.expected["undetermined"]:
        assert not case.undecided(), case.undecided()


@pytest.mark.parametrize("case", FAULTY, ids=str)
def test_faulty_stages_have_exactly_their_findings(case: Case) -> None:
    found = finding_differences(case)
    assert case.expected["findings"], "a faulty stage has findings"
    assert not found, "\n".join(found)


@pytest.mark.parametrize("case", FAULTY, ids=str)
def test_faulty_stages_differ_from_their_sound_twin_by_little(case: Case) -> None:
    twin = CIRCUITS / "sound" / f"{case.expected['twin']}.cir"
    pair = [p.read_text(encoding="latin-1").splitlines()[1:] for p in (twin, case.netlist)]
    changed = [line for line in difflib.ndiff(*pair) if line[:2] in ("- ", "+ ")]
    assert 0 < len(changed) <= 24, "\n".join(changed)


def test_the_corpus_is_whole() -> None:
    assert len(SOUND) >= 20
    assert len(FAULTY) >= 20
