"""Every shipped rule gives on its own examples what they say, and only as it stands."""

import pytest

from rulecheck.rulebook.examples import try_rule
from rulecheck.rulebook.ready import make_ready
from rulecheck.rulebook.rulebook import ReadyRule
from rulecheck.rulebook.tree import Compared, Negated, Node
from rulecheck.values.record import replace
from tests.rules.shipped import analyse, rulebook

READY = {rule.rule.id: rule for rule in rulebook().ready}
OPPOSITE = {"<": ">=", "<=": ">", ">": "<=", ">=": "<", "=": "!=", "!=": "="}


def test_there_are_enough_rules_and_no_mistake_in_them():
    assert [problem.line() for problem in rulebook().problems] == []
    assert len(READY) >= 35


@pytest.mark.parametrize("rule", READY)
def test_all_examples_are_as_expected(rule):
    for trial in try_rule(READY[rule], analyse):
        assert trial.problems == ()
        assert trial.said == trial.example.expect, (trial.number, trial.example.shows)


@pytest.mark.parametrize("rule", READY)
def test_a_rule_is_its_own_manual_page(rule):
    page = READY[rule].rule
    assert page.why
    assert page.remedy
    assert page.source
    assert len(page.examples) >= 2
    assert len({example.expect for example in page.examples}) >= 2
    assert all(example.shows for example in page.examples)


@pytest.mark.parametrize("rule", READY)
def test_what_is_broken_says_so_in_a_sentence_without_gaps(rule):
    broken = [
        verdict
        for trial in try_rule(READY[rule], analyse)
        for verdict in trial.verdicts
        if verdict.verdict == "broken"
    ]
    for verdict in broken:
        assert verdict.message
        assert "{" not in verdict.message
        assert "unknown" not in verdict.message
        assert verdict.fingerprint


@pytest.mark.parametrize("rule", READY)
def test_turning_any_comparison_round_breaks_an_example(rule):
    """Mutation: each comparison of the requirement, and the requirement as a whole."""
    ready = READY[rule]
    for mutant in _mutants(ready.rule.requires):
        changed = make_ready(replace(ready.rule, requires=mutant), rulebook().parameters)
        assert isinstance(changed, ReadyRule)
        assert not all(trial.passed for trial in try_rule(changed, analyse)), mutant


@pytest.mark.parametrize("rule", [r for r in READY if READY[r].rule.applies is not None])
def test_turning_round_when_it_applies_breaks_an_example(rule):
    ready = READY[rule]
    applies = ready.rule.applies
    assert applies is not None
    for mutant in _mutants(applies):
        changed = make_ready(replace(ready.rule, applies=mutant), rulebook().parameters)
        assert isinstance(changed, ReadyRule)
        assert not all(trial.passed for trial in try_rule(changed, analyse)), mutant


def _mutants(node: Node) -> list[Node]:
    """The tree negated, and the tree with one comparison turned round, for each comparison."""
    return [Negated(0, node), *_turned(node)]


def _turned(node: Node) -> list[Node]:
    found: list[Node] = []
    if isinstance(node, Compared):
        found.append(replace(node, sign=OPPOSITE[node.sign]))
    for name in node.__struct_fields__:
        value = getattr(node, name)
        if isinstance(value, Node):
            found += [replace(node, **{name: inner}) for inner in _turned(value)]
        elif isinstance(value, tuple):
            for place, item in enumerate(value):
                if isinstance(item, Node):
                    found += [
                        replace(node, **{name: (*value[:place], inner, *value[place + 1 :])})
                        for inner in _turned(item)
                    ]
    return found
