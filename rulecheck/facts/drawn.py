"""What no part of a drawing shows was left out of the drawing, not forgotten in it.

Every driver's input on a net of its own: the controller is on another sheet.
One of them on a net of its own: that one is not connected.
"""

from rulecheck.facts.facts import Subject
from rulecheck.values import Unknown
from rulecheck.values.record import replace


def open_where_none(
    subjects: tuple[Subject, ...], field: str, unknown: Unknown
) -> tuple[Subject, ...]:
    """The subjects with the field unknown, where it is true of none of them."""
    if any(subject.values[field] is True for subject in subjects):
        return subjects
    return tuple(
        replace(s, values={**s.values, field: unknown}) if s.values[field] is False else s
        for s in subjects
    )
