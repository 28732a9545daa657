"""Judge the facts by the rules: holds, broken or undecided, never a guess.

A rule that does not apply is silent. Where it is not known whether it applies, the verdict is
undecided, unless the requirement is met anyhow: then, too, there is nothing to say.
"""

from collections.abc import Iterable, Iterator

from rulecheck.facts import Facts, Subject
from rulecheck.rulebook.fingerprint import fingerprint_of
from rulecheck.rulebook.kleene import YES, Answer
from rulecheck.rulebook.message import plain_value, write_message
from rulecheck.rulebook.rulebook import ReadyRule, Rulebook
from rulecheck.rulebook.scope import OWN, Scene, Steps, TooManyStepsError
from rulecheck.rulebook.verdicts import BROKEN, HOLDS, UNDECIDED, Verdict, Verdicts
from rulecheck.rulebook.waiting import tally_of, waiting_for
from rulecheck.values import USUAL, Limits, Unknown, raise_limit
from rulecheck.values.record import replace


def judge(rulebook: Rulebook, facts: Facts, limits: Limits = USUAL) -> Verdicts:
    """Every rule in force on every subject of its kind, in the order of rules and of names."""
    most = limits["condition-steps"]
    verdicts = tuple(
        verdict
        for rule, steps in ((rule, Steps(most)) for rule in rulebook.ready)
        for subject in facts.of_kind(rule.rule.subject)
        for verdict in judge_one(rule, subject, facts, steps)
    )
    return Verdicts(
        facts.netlist,
        verdicts,
        waiting_for(verdicts),
        tally_of(verdicts),
        rulebook.switched_off,
    )


def judge_one(
    rule: ReadyRule, subject: Subject, facts: Facts, steps: Steps | None = None
) -> Iterator[Verdict]:
    """The one verdict of a rule on a subject; none where the rule is silent.

    A rule that takes too many steps is undecided from there on.
    """
    steps = steps or Steps(USUAL["condition-steps"])
    try:
        yield from tuple(_judged(rule, subject, Scene(facts, {OWN: subject}, steps)))
    except TooManyStepsError:
        yield _not_finished(rule, subject)


def _not_finished(rule: ReadyRule, subject: Subject) -> Verdict:
    settle = raise_limit("condition-steps")
    missing = Unknown(f"what {rule.rule.id} says of {subject.name}, in too many steps", settle)
    return replace(
        _held(rule, subject),
        verdict=UNDECIDED,
        message=f"not known: {missing.what}",
        missing=(missing,),
        fingerprint=fingerprint_of(rule.rule.id, subject.kind, subject.name),
    )


def _judged(rule: ReadyRule, subject: Subject, scene: Scene) -> Iterator[Verdict]:
    applies = rule.applies.run(scene) if rule.applies else YES
    if applies.truth is False:
        return
    requires = rule.requires.run(scene)
    if applies.truth is None and requires.truth is True:
        return
    if applies.truth is None or requires.truth is None:
        yield _undecided(rule, subject, scene, (*applies.missing, *requires.missing))
    elif requires.truth:
        yield _held(rule, subject)
    else:
        message = write_message(rule.message, scene)
        found = _found(rule, subject, scene, BROKEN, message)
        yield replace(found, level=_level(rule, scene))


def _level(rule: ReadyRule, scene: Scene) -> str:
    if rule.graver_when is None:
        return rule.rule.level
    graver: Answer = rule.graver_when.run(scene)
    return rule.rule.graver_level if graver.truth else rule.rule.level


def _undecided(
    rule: ReadyRule, subject: Subject, scene: Scene, missing: Iterable[Unknown]
) -> Verdict:
    wanted = tuple(dict.fromkeys(missing))
    words = list(dict.fromkeys(item.what for item in wanted))
    message = f"not known: {', '.join(words)}" if words else "not known"
    return replace(_found(rule, subject, scene, UNDECIDED, message), missing=wanted)


def _found(rule: ReadyRule, subject: Subject, scene: Scene, verdict: str, message: str) -> Verdict:
    values = {name: plain_value(bound, scene) for name, bound in rule.values.items()}
    mark = fingerprint_of(rule.rule.id, subject.kind, subject.name)
    held = _held(rule, subject)
    return replace(held, verdict=verdict, message=message, values=values, fingerprint=mark)


def _held(rule: ReadyRule, subject: Subject) -> Verdict:
    return Verdict(
        rule.rule.id,
        rule.rule.level,
        HOLDS,
        subject.kind,
        subject.name,
        subject.parts,
        subject.nets,
        "",
        {},
        (),
        subject.span,
        subject.related,
    )
