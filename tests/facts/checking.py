"""A validator of facts: each field is there, in its form, and every link leads on."""

from rulecheck.facts import VOCABULARY, Bounds, Facts, Form, Subject
from rulecheck.values import Interval, Unknown

FORMS = {
    Form.NUMBER: (float, Bounds),
    Form.RANGE: (Interval, Bounds),
    Form.TEXT: (str,),
    Form.TEXTS: (tuple,),
    Form.YES_NO: (bool,),
}


def flaws_of(facts: Facts) -> list[str]:
    """Everything that is not as the vocabulary says."""
    return [flaw for subject in facts for flaw in _of_subject(facts, subject)]


def _of_subject(facts: Facts, subject: Subject) -> list[str]:
    term = VOCABULARY[subject.kind]
    here = f"{subject.kind} {subject.name}"
    found = []
    if set(subject.values) != {field.name for field in term.fields}:
        found.append(
            f"{here}: fields {sorted(set(subject.values) ^ {f.name for f in term.fields})}"
        )
    for field in term.fields:
        value = subject.values.get(field.name)
        if not isinstance(value, (*FORMS[field.form], Unknown)):
            found.append(f"{here}: {field.name} is {value!r}")
        if isinstance(value, Bounds) and not value.missing:
            found.append(f"{here}: {field.name} lacks nothing, yet has bounds")
    for link in term.links:
        names = subject.links.get(link.name, ())
        if not isinstance(names, Unknown):
            lost = [name for name in names if (link.to, name) not in facts.by_name]
            found += [f"{here}: {link.name} -> {link.to} {name}" for name in lost]
    if set(subject.links) - {link.name for link in term.links}:
        found.append(f"{here}: links {sorted(subject.links)}")
    return found
