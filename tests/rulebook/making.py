"""Subjects, facts and conditions for tests, in one line each."""

from collections.abc import Mapping

from rulecheck.facts import VOCABULARY, Facts, Form, Subject, Value
from rulecheck.reading import SourceText
from rulecheck.rulebook.binding import bind
from rulecheck.rulebook.kleene import Answer
from rulecheck.rulebook.parsing import parse_condition
from rulecheck.rulebook.scope import OTHER, OWN, Bound, Parameter, Row, Scene
from rulecheck.rulebook.tree import Flaw
from rulecheck.values import Dimension, Interval, Span, Unknown

HERE = Span("hut.cir", 1)
PLAIN: Mapping[Form, Value] = {
    Form.NUMBER: 0.0,
    Form.RANGE: Interval(0.0, 0.0),
    Form.TEXT: "",
    Form.TEXTS: (),
    Form.YES_NO: False,
}


def missing(what: str) -> Unknown:
    return Unknown(what, f"write {what}")


def subject(kind: str, name: str, links: Mapping[str, tuple[str, ...] | Unknown] | None = None,
            /, **values: Value) -> Subject:  # fmt: skip
    """A subject with every field of its kind; those not given are zero, empty or no."""
    term = VOCABULARY[kind]
    given = {key.replace("_", "-"): value for key, value in values.items()}
    assert set(given) <= {field.name for field in term.fields}
    whole = {field.name: PLAIN[field.form] for field in term.fields} | given
    return Subject(kind, name, whole, dict(links or {}), (name,), (), HERE)


def facts(*subjects: Subject) -> Facts:
    by_kind: dict[str, tuple[Subject, ...]] = {}
    for item in subjects:
        by_kind[item.kind] = (*by_kind.get(item.kind, ()), item)
    return Facts("hut.cir", by_kind, {(s.kind, s.name): s for s in subjects})


def bound(text: str, kind: str = "position", parameters: Mapping[str, Parameter] | None = None
          ) -> Bound | tuple[Flaw, ...]:  # fmt: skip
    node = parse_condition(text)
    if isinstance(node, Flaw):
        return (node,)
    return bind(node, kind, parameters or {})


def ask(text: str, own: Subject, *others: Subject,
        parameters: Mapping[str, Parameter] | None = None) -> Answer:  # fmt: skip
    """The answer of a condition on a subject among others."""
    ready = bound(text, own.kind, parameters)
    assert isinstance(ready, Bound), ready
    answer = ready.run(Scene(facts(own, *others), {OWN: own}))
    assert isinstance(answer, Answer)
    return answer


def flaws(text: str, kind: str = "position",
          parameters: Mapping[str, Parameter] | None = None) -> tuple[str, ...]:  # fmt: skip
    result = bound(text, kind, parameters)
    assert not isinstance(result, Bound)
    return tuple(f"{flaw.at}: {flaw.what}" for flaw in result)


def parameter(value: float | Mapping[str, float], source: str = "common practice") -> Parameter:
    table = value if isinstance(value, Mapping) else {OTHER: value}
    rows = {word: Row(number, source) for word, number in table.items()}
    return Parameter("derate", rows, Dimension.NUMBER, "", HERE)


def pack(text: str, file: str = "team.rules.yaml") -> SourceText:
    return SourceText(file, text)
