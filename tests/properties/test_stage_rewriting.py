"""Rewriting a stage without changing it changes nothing in what is said of it."""

import random
from dataclasses import replace
from typing import Any

from hypothesis import given
from hypothesis import strategies as st

from tests.kit.published import Study
from tests.kit.small_stages import FEW, SmallStage, in_a_box, positions, stages, verdicts


def said(study: Study) -> tuple[dict[str, dict[str, Any]], dict[tuple[str, str, str], str]]:
    return positions(study), verdicts(study)


def without_names(study: Study) -> list[str]:
    """What is asked of and offered by every position, whatever it is called."""
    return sorted(
        str((entry["demand"], entry["capability"], entry["covered"]))
        for entry in study.table["positions"]
    )


@FEW
@given(stages(), st.integers())
def test_the_order_of_cards_and_ports_changes_nothing(stage: SmallStage, seed: int) -> None:
    cards, ports = list(stage.cards), list(stage.ports)
    random.Random(seed).shuffle(cards)
    random.Random(seed).shuffle(ports)
    shuffled = replace(stage, cards=tuple(cards), ports=tuple(ports))
    assert said(shuffled.study()) == said(stage.study())


@FEW
@given(stages())
def test_the_case_of_letters_changes_nothing(stage: SmallStage) -> None:
    study = stage.study()
    lower = Study(study.cards.lower(), study.sheet)
    folded = {name.upper(): entry for name, entry in positions(lower).items()}
    for name, entry in positions(study).items():
        for key in ("demand", "capability", "covered"):
            assert folded[name.upper()][key] == entry[key]
    upper = {(rule, s.upper(), p.upper()): v for (rule, s, p), v in verdicts(lower).items()}
    expected = {(rule, s.upper(), p.upper()): v for (rule, s, p), v in verdicts(study).items()}
    assert upper == expected


@FEW
@given(stages())
def test_blanks_comments_and_continuations_change_nothing(stage: SmallStage) -> None:
    study = stage.study()
    lines = [card.text().split(" ") for card in stage.cards]
    airy = [f"*\n  {'   '.join(words[:2])} ; note\n\n+ {'  '.join(words[2:])}" for words in lines]
    assert said(Study("\n".join(airy), study.sheet)) == said(study)


@FEW
@given(stages())
def test_new_names_rename_the_findings_and_change_nothing_else(stage: SmallStage) -> None:
    """The new numbers keep the order of the old, which decides what a position is named after."""

    def part(name: str) -> str:
        return f"{name[0]}{int(name[1:]) + 40}"

    def net(name: str) -> str:
        return name if name == "0" else f"N{name}_7"

    renamed = stage.renamed(part, net).study()
    before, after = positions(stage.study()), positions(renamed)
    assert list(map(part, before)) == list(after)
    for name, entry in before.items():
        for key in ("demand", "capability", "covered"):
            assert after[part(name)][key] == entry[key]
        assert after[part(name)]["from"] == net(entry["from"])
    assert count(verdicts(renamed)) == count(verdicts(stage.study()))


@FEW
@given(stages())
def test_flat_and_hierarchical_forms_agree(stage: SmallStage) -> None:
    boxed = in_a_box(stage)
    assert without_names(boxed) == without_names(stage.study())
    assert count(verdicts(boxed)) == count(verdicts(stage.study()))


def count(found: dict[tuple[str, str, str], str]) -> list[tuple[str, str]]:
    """Rule and verdict of every finding, for stages whose names differ."""
    return sorted((rule, verdict) for (rule, _, _), verdict in found.items())
