"""Run the examples that rules carry: each rule is its own test."""

from collections.abc import Callable, Iterable, Iterator

from rulecheck.facts import Facts
from rulecheck.reading import SourceText
from rulecheck.rulebook.judge import judge_one
from rulecheck.rulebook.rulebook import Example, ReadyRule, Rulebook
from rulecheck.rulebook.verdicts import BROKEN, HOLDS, UNDECIDED, Verdict
from rulecheck.values import Problem, Span
from rulecheck.values.record import Record

SILENT = "silent"
Analyse = Callable[
    [SourceText, SourceText | None, tuple[SourceText, ...]], Facts | tuple[Problem, ...]
]
"""Netlist, sheet and part data as texts -> the facts, or why there are none."""
_WORST_FIRST = (BROKEN, UNDECIDED, HOLDS)


class Trial(Record):
    """One example: what its rule should have said, and what it said."""

    rule: str
    example: Example
    number: int
    said: str
    verdicts: tuple[Verdict, ...]
    problems: tuple[Problem, ...] = ()

    @property
    def passed(self) -> bool:
        return self.said == self.example.expect and not self.problems

    @property
    def span(self) -> Span:
        return self.example.span


def try_examples(
    rulebook: Rulebook, analyse: Analyse, rules: Iterable[str] | None = None
) -> tuple[Trial, ...]:
    """Judge every example of every rule (or of those named) by that rule."""
    wanted = None if rules is None else frozenset(rules)
    chosen = (r for r in rulebook.ready if wanted is None or r.rule.id in wanted)
    return tuple(trial for rule in chosen for trial in try_rule(rule, analyse))


def try_rule(rule: ReadyRule, analyse: Analyse) -> Iterator[Trial]:
    for number, example in enumerate(rule.rule.examples, 1):
        facts = analyse(*_sources(rule, example, number))
        if isinstance(facts, Facts):
            verdicts = tuple(_verdicts(rule, example, facts))
            yield Trial(rule.rule.id, example, number, _said(verdicts), verdicts)
        else:
            yield Trial(rule.rule.id, example, number, "nothing", (), facts)


def _verdicts(rule: ReadyRule, example: Example, facts: Facts) -> Iterator[Verdict]:
    for subject in facts.of_kind(rule.rule.subject):
        if example.of is None or subject.name.casefold() == example.of.casefold():
            yield from judge_one(rule, subject, facts)


def _said(verdicts: Iterable[Verdict]) -> str:
    """The gravest verdict over the subjects; silent where there is none."""
    said = {verdict.verdict for verdict in verdicts}
    return next((word for word in _WORST_FIRST if word in said), SILENT)


def _sources(
    rule: ReadyRule, example: Example, number: int
) -> tuple[SourceText, SourceText | None, tuple[SourceText, ...]]:
    name = f"{rule.rule.id}-{number}"
    sheet = None if example.sheet is None else SourceText(f"{name}.stage.yaml", example.sheet)
    parts = () if example.parts is None else (SourceText(f"{name}.parts.yaml", example.parts),)
    return SourceText(f"{name}.cir", example.netlist), sheet, parts
