"""Whether all gated devices of a stage look as if their pins came in another order.

Q1 and Q2 of a leg both fit only if drawn the other way up: no slip of the pen, but a pin order
of the export that is not the one assumed here.
"""

from collections.abc import Sequence

from rulecheck.facts.facts import Bounds, Subject, Value
from rulecheck.facts.inputs import Inputs
from rulecheck.values import Interval, Unknown

FEWEST = 2
"""A single position drawn upside down is a mistake of its own."""


def turned_values(inputs: Inputs, positions: Sequence[Subject]) -> dict[str, Value]:
    """The stage's fields on positions that would fit the other way up."""
    one_way = [subject for subject in positions if _holds_one_polarity(subject)]
    answers = [subject.values["turned"] for subject in one_way]
    turned = [s for s in one_way if s.values["turned"] is True]
    models = {
        inputs.part_by_name[name].text
        for subject in turned
        for name in subject.parts
        if inputs.part_by_name[name].gated
    }
    return {
        "turned-positions": _how_many(answers),
        "one-way-positions": float(len(one_way)),
        "all-turned": _all_turned(answers),
        "turned-models": tuple(sorted(models)),
    }


def _holds_one_polarity(position: Subject) -> bool:
    values = position.values
    one = values["holds-off-forward"] != values["holds-off-reverse"]
    return one and values["gated"] is True


def _how_many(answers: Sequence[Value]) -> Value:
    """The number of yes among the answers, within bounds where some are not known."""
    least = float(sum(answer is True for answer in answers))
    unknown = tuple(dict.fromkeys(a for a in answers if isinstance(a, Unknown)))
    if not unknown:
        return least
    most = least + sum(isinstance(answer, Unknown) for answer in answers)
    return Bounds(Interval(least, most), unknown)


def _all_turned(answers: Sequence[Value]) -> bool:
    """Certain only where every single one is; else each position is judged by itself."""
    return len(answers) >= FEWEST and all(answer is True for answer in answers)
