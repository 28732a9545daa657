"""Strong three-valued logic (Kleene, Introduction to Metamathematics, 1952, section 64; from
memory): an answer is unknown only where the unknown operand could change it.

A conjunction with one false operand is false whatever the others are; an unknown answer carries
the data that it waits for.
"""

from collections.abc import Iterable

from rulecheck.values import Unknown
from rulecheck.values.record import Record


class Answer(Record):
    """True, false, or None for unknown, and then what is missing."""

    truth: bool | None
    missing: tuple[Unknown, ...] = ()


YES = Answer(True)
NO = Answer(False)


def answer(truth: bool) -> Answer:
    return YES if truth else NO


def undecided(missing: Iterable[Unknown]) -> Answer:
    return Answer(None, tuple(dict.fromkeys(missing)))


def negation(operand: Answer) -> Answer:
    if operand.truth is None:
        return operand
    return NO if operand.truth else YES


def conjunction(operands: Iterable[Answer]) -> Answer:
    """False as soon as one operand is; true where all are, of none at all too."""
    return _first_or_unknown(operands, NO, YES)


def disjunction(operands: Iterable[Answer]) -> Answer:
    """True as soon as one operand is; false where all are, of none at all too."""
    return _first_or_unknown(operands, YES, NO)


def implication(premise: Answer, conclusion: Answer) -> Answer:
    return disjunction((negation(premise), conclusion))


def _first_or_unknown(operands: Iterable[Answer], decisive: Answer, otherwise: Answer) -> Answer:
    missing: list[Unknown] = []
    open_ones = 0
    for operand in operands:
        if operand.truth is decisive.truth:
            return decisive
        if operand.truth is None:
            open_ones += 1
            missing += operand.missing
    return undecided(missing) if open_ones else otherwise
