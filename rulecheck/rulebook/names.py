"""Bind what a condition names: fields, parameters, tables of parameters, sources."""

import difflib
import math
from collections.abc import Mapping
from typing import Any

from rulecheck.facts import Bounds, FieldTerm, Form, Value
from rulecheck.rulebook.estimate import Estimate, Spread, anything, exactly, hull
from rulecheck.rulebook.kleene import Answer, answer
from rulecheck.rulebook.scope import Bound, Parameter, Scene, Scope, unit_of
from rulecheck.rulebook.tree import LookedUp, Path, SourceOf
from rulecheck.values import Interval, Unknown

OTHER = "other"
"""The row of a table that stands for every word without one of its own."""


def bind_path(node: Path, scope: Scope) -> Bound | None:
    """A field of a subject in scope, else a parameter that is a plain number."""
    found = scope.field(node.words)
    if found is not None:
        return _field(*found)
    parameter = scope.parameters.get(node.dotted)
    if parameter is not None:
        return _plain_parameter(node, parameter, scope)
    if scope.link(node.words) is not None:
        scope.fail(
            node.at,
            f"'{node.dotted}' leads to subjects and has no value",
            f"write `some x among {node.dotted} has (...)` or `count({node.dotted})`",
        )
        return None
    scope.fail(node.at, f"'{node.dotted}' is no field and no parameter", nearest(node, scope))
    return None


def nearest(node: Path, scope: Scope) -> str:
    close = difflib.get_close_matches(node.dotted, scope.known_names(), 1)
    if close:
        return f"did you mean '{close[0]}'?"
    return "`rulecheck rules --facts` lists every field"


def _field(owner: str, term: FieldTerm) -> Bound:
    if term.name == "name":
        return Bound(Form.TEXT, lambda scene: scene.subjects[owner].name)
    name, convert = term.name, _CONVERTERS[term.form]
    return Bound(
        term.form,
        lambda scene: convert(scene.subjects[owner].values[name]),
        unit_of(term.dimension),
    )


def _as_estimate(value: Value) -> Estimate:
    if isinstance(value, float):
        return Estimate(value, value)
    if isinstance(value, Unknown):
        return anything((value,))
    if isinstance(value, Bounds):
        return Estimate(value.range.low, value.range.high, value.missing)
    raise TypeError(f"not a number: {value!r}")


def _as_spread(value: Value) -> Spread:
    """A range with an end that is not known: that end lies anywhere beyond the other."""
    if isinstance(value, Unknown):
        return Spread(anything((value,)), anything((value,)))
    span = value.range if isinstance(value, Bounds) else value
    if not isinstance(span, Interval):
        raise TypeError(f"not a range: {value!r}")
    whole = Estimate(span.low, span.high, value.missing if isinstance(value, Bounds) else ())
    low = exactly(span.low) if math.isfinite(span.low) else whole
    high = exactly(span.high) if math.isfinite(span.high) else whole
    return Spread(low, high)


def _as_answer(value: Value) -> Answer:
    return Answer(None, (value,)) if isinstance(value, Unknown) else answer(value is True)


def _as_words(value: Value) -> Value:
    return value


_CONVERTERS: Mapping[Form, Any] = {
    Form.NUMBER: _as_estimate,
    Form.RANGE: _as_spread,
    Form.YES_NO: _as_answer,
    Form.TEXT: _as_words,
    Form.TEXTS: _as_words,
}


def _plain_parameter(node: Path, parameter: Parameter, scope: Scope) -> Bound | None:
    if isinstance(parameter.value, Mapping):
        scope.fail(
            node.at,
            f"parameter '{node.dotted}' may be a table",
            f"say for which words: `{node.dotted} of kinds`",
        )
        return None
    value = exactly(parameter.value)
    return Bound(Form.NUMBER, lambda scene: value, unit_of(parameter.dimension))


def bind_looked_up(node: LookedUp, scope: Scope) -> Bound | None:
    """The smallest entry of the table over the words; a plain number stands for all words."""
    parameter = scope.parameters.get(node.parameter.dotted)
    if parameter is None:
        what = f"'{node.parameter.dotted}' is no parameter"
        scope.fail(node.at, what, nearest(node.parameter, scope))
        return None
    words = bind_path(node.words, scope)
    if words is None:
        return None
    if words.form not in (Form.TEXT, Form.TEXTS):
        what = f"'{node.words.dotted}' holds no words"
        scope.fail(node.words.at, what, "name a field of the form text or texts")
        return None
    value = parameter.value
    table = value if isinstance(value, Mapping) else {OTHER: value}
    run = words.run
    return Bound(
        Form.NUMBER, lambda scene: _smallest(table, run(scene)), unit_of(parameter.dimension)
    )


def _smallest(table: Mapping[str, float], words: str | tuple[str, ...] | Unknown) -> Estimate:
    if isinstance(words, Unknown):
        return _any_of(table, words)
    several = (words,) if isinstance(words, str) else words
    return exactly(min((table.get(w, table[OTHER]) for w in several), default=table[OTHER]))


def _any_of(table: Mapping[str, float], missing: Unknown) -> Estimate:
    lowest, highest = exactly(min(table.values())), exactly(max(table.values()))
    whole = hull(lowest, highest)
    return Estimate(whole.low, whole.high, () if whole.exact else (missing,))


def bind_source(node: SourceOf, scope: Scope) -> Bound | None:
    parameter = scope.parameters.get(node.parameter.dotted)
    if parameter is None:
        what = f"'{node.parameter.dotted}' is no parameter"
        scope.fail(node.at, what, nearest(node.parameter, scope))
        return None
    source = parameter.source
    return Bound(Form.TEXT, lambda scene: source)


def subjects_along(scope: Scope, path: Path) -> tuple[str, str, str] | None:
    """Owner, link and kind of a link; a flaw where the path is none."""
    found = scope.link(path.words)
    if found is None:
        what = f"'{path.dotted}' is no link of {scope.kinds['']}"
        scope.fail(path.at, what, nearest(path, scope))
        return None
    owner, term = found
    return owner, term.name, term.to


def linked(scene: Scene, owner: str, link: str, kind: str) -> tuple[Any, ...] | Unknown:
    """The subjects that a link leads to; Unknown where nobody knows them."""
    names = scene.subjects[owner].links.get(link, ())
    if isinstance(names, Unknown):
        return names
    by_name = scene.facts.by_name
    found = (by_name.get((kind, name)) for name in names)
    return tuple(subject for subject in found if subject is not None)
