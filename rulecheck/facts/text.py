"""The facts as one canonical text, the same that golden tests and `explain --step facts` show."""

from collections.abc import Iterator

from rulecheck.facts.facts import Bounds, Facts, Subject, Value
from rulecheck.facts.vocabulary import VOCABULARY
from rulecheck.values import Interval, Unknown


def facts_text(facts: Facts) -> str:
    """Every subject with its fields in the vocabulary's order, one a line."""
    return "\n".join(line for subject in facts for line in _subject_lines(subject)) + "\n"


def _subject_lines(subject: Subject) -> Iterator[str]:
    term = VOCABULARY[subject.kind]
    yield f"{subject.kind} {subject.name}"
    for field in term.fields:
        value = value_text(subject.values[field.name], field.dimension.value)
        yield f"  {field.name}: {value}".rstrip()
    for link in term.links:
        linked = subject.links.get(link.name, ())
        if linked:
            words = value_text(linked, "")
            yield f"  {link.name} -> {words}"


def value_text(value: Value, unit: str) -> str:
    """A value in one canonical form: `58 V`, `36 V ... 58 V`, `yes`, `Q1, Q2`, `unknown (...)`."""
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, str):
        return value
    if isinstance(value, tuple):
        return ", ".join(value)
    if isinstance(value, Unknown):
        return f"unknown ({value.settle})"
    if isinstance(value, Bounds):
        wanted = " and ".join(item.settle for item in value.missing)
        return f"{value_text(value.range, unit)} ({wanted})"
    if isinstance(value, Interval):
        return f"{_number(value.low, unit)} ... {_number(value.high, unit)}"
    return _number(value, unit)


def _number(value: float, unit: str) -> str:
    return f"{value + 0.0:.6g} {unit}".rstrip()
