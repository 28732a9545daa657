"""Run the examples that packs carry, each pack over the shipped rules and nothing else.

Examples are written for the values that their own pack knows; what a project sets is left out.
"""

import re
from collections.abc import Iterable

from rulecheck.cli.packs import find_pack, load_rulebook
from rulecheck.facts import Facts
from rulecheck.netlist import Access
from rulecheck.pipeline import Unusable, analyse_text
from rulecheck.reading import SourceText
from rulecheck.rulebook import IN_FORCE, Rulebook, Trial, try_examples
from rulecheck.values import USUAL, Limits, Problem
from rulecheck.values.record import Record

_NO_FILES = Access(beside=False)
"""An example is all in its pack: it includes nothing."""
_PACK_NAME = re.compile(r"^pack:\s*([\w/-]+)", re.MULTILINE)


class Trials(Record):
    """Every example that was run."""

    trials: tuple[Trial, ...]

    @property
    def passed(self) -> bool:
        return all(trial.passed for trial in self.trials)


def try_packs(packs: tuple[str, ...], limits: Limits = USUAL) -> Trials | tuple[Problem, ...]:
    """The examples of the packs named, or of all shipped ones where none is."""
    found: list[Trial] = []
    for pack in packs or IN_FORCE:
        trials = _try_pack(pack, limits)
        if not isinstance(trials, list):
            return trials
        found += trials
    return Trials(tuple(found))


def trials_text(trials: Trials) -> str:
    """One line an example that says something else than it should, then the count."""
    lines = [line for trial in trials.trials if not trial.passed for line in _failure(trial)]
    count, failed = len(trials.trials), sum(not trial.passed for trial in trials.trials)
    rules = len({trial.rule for trial in trials.trials})
    noun = "rule" if rules == 1 else "rules"
    verdict = f"{failed} not as expected" if failed else "all as expected"
    return "\n".join([*lines, f"{count} examples of {rules} {noun}: {verdict}"]) + "\n"


def _try_pack(name: str, limits: Limits) -> list[Trial] | tuple[Problem, ...]:
    source = find_pack(name, limits)
    if isinstance(source, Problem):
        return (source,)
    instead_of = _replaced_by(source) if name not in IN_FORCE else ()
    rulebook = load_rulebook((name,), instead_of, limits)
    if not isinstance(rulebook, Rulebook):
        return rulebook
    own = (rule.id for rule in rulebook.rules if rule.span.file == source.file)
    return list(try_examples(rulebook, _facts, own))


def _replaced_by(source: SourceText) -> tuple[str, ...]:
    """The shipped pack that a file calls itself: the one being worked on is tried in its place."""
    said = _PACK_NAME.search(source.text)
    return (said[1],) if said and said[1] in IN_FORCE else ()


def _facts(
    netlist: SourceText, sheet: SourceText | None, parts: Iterable[SourceText]
) -> Facts | tuple[Problem, ...]:
    analysis = analyse_text(netlist, sheet, tuple(parts), _NO_FILES)
    return analysis.problems if isinstance(analysis, Unusable) else analysis.facts


def _failure(trial: Trial) -> list[str]:
    expected = trial.example.expect
    what = f"example {trial.number} of {trial.rule} should be {expected} and is {trial.said}"
    said = [verdict.message for verdict in trial.verdicts if verdict.message]
    reasons = [*said, *(problem.line() for problem in trial.problems)]
    return [f"{trial.span}: error: {what}", *(f"    {reason}" for reason in reasons)]
