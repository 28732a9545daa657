"""Packs that come into force only where they are named give on their examples what they say."""

import pytest

from rulecheck.rulebook import BY_NAME
from rulecheck.rulebook.examples import try_rule
from tests.rules.shipped import analyse, rulebook

READY = {rule.rule.id: rule for rule in rulebook(*BY_NAME).ready}
OWN = [name for name in READY if name not in {rule.rule.id for rule in rulebook().ready}]


def test_no_mistake_is_in_them():
    assert [problem.line() for problem in rulebook(*BY_NAME).problems] == []
    assert len(OWN) >= 14


@pytest.mark.parametrize("rule", OWN)
def test_all_examples_are_as_expected(rule):
    page = READY[rule].rule
    assert page.why
    assert page.remedy
    assert page.source
    assert len({example.expect for example in page.examples}) >= 2
    for trial in try_rule(READY[rule], analyse):
        assert trial.problems == ()
        assert trial.said == trial.example.expect, (trial.number, trial.example.shows)
