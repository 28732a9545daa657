"""Bind what a condition names: fields, parameters, tables of parameters, sources."""

import difflib
import math
from collections.abc import Callable, Mapping
from typing import Any

from rulecheck.facts import Bounds, FieldTerm, Form, Value
from rulecheck.rulebook.estimate import Estimate, Spread, anything, exactly
from rulecheck.rulebook.kleene import Answer, answer
from rulecheck.rulebook.scope import OTHER, Bound, Parameter, Scene, Scope, unit_of
from rulecheck.rulebook.tree import LookedUp, Path, SourceOf
from rulecheck.values import Interval, Unknown


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
    if not parameter.plain:
        scope.fail(
            node.at,
            f"parameter '{node.dotted}' has rows by word",
            f"say for which words: `{node.dotted} of kinds`",
        )
        return None
    value = exactly(parameter.rows[OTHER].value)
    return Bound(Form.NUMBER, lambda scene: value, unit_of(parameter.dimension))


def bind_looked_up(node: LookedUp, scope: Scope) -> Bound | None:
    """The smallest row of the parameter over the words."""
    parameter = _parameter(node.at, node.parameter, scope)
    words = _words(node.words, scope)
    if parameter is None or words is None:
        return None

    def run(scene: Scene) -> Estimate:
        found = words(scene)
        if isinstance(found, Unknown):
            return _any_of(parameter, found)
        return exactly(parameter.row_for(found).value)

    return Bound(Form.NUMBER, run, unit_of(parameter.dimension))


def _parameter(at: int, path: Path, scope: Scope) -> Parameter | None:
    parameter = scope.parameters.get(path.dotted)
    if parameter is None:
        scope.fail(at, f"'{path.dotted}' is no parameter", nearest(path, scope))
    return parameter


def _words(path: Path, scope: Scope) -> Callable[[Scene], tuple[str, ...] | Unknown] | None:
    bound = bind_path(path, scope)
    if bound is None:
        return None
    if bound.form not in (Form.TEXT, Form.TEXTS):
        what = f"'{path.dotted}' holds no words"
        scope.fail(path.at, what, "name a field of the form text or texts")
        return None
    run, single = bound.run, bound.form is Form.TEXT

    def words(scene: Scene) -> tuple[str, ...] | Unknown:
        found: str | tuple[str, ...] | Unknown = run(scene)
        if isinstance(found, str):
            return (found,) if single else ()
        return found

    return words


def _any_of(parameter: Parameter, missing: Unknown) -> Estimate:
    values = [row.value for row in parameter.rows.values()]
    low, high = min(values), max(values)
    return Estimate(low, high, () if low == high else (missing,))


def bind_source(node: SourceOf, scope: Scope) -> Bound | None:
    """The source of the row that decides; of a parameter with rows by word, say of which."""
    parameter = _parameter(node.at, node.parameter, scope)
    if parameter is None:
        return None
    if node.words is None:
        if not parameter.plain:
            what = f"parameter '{node.parameter.dotted}' has rows by word"
            remedy = f"say for which words: `source of {node.parameter.dotted} of kinds`"
            scope.fail(node.at, what, remedy)
            return None
        source = parameter.rows[OTHER].source
        return Bound(Form.TEXT, lambda scene: source)
    words = _words(node.words, scope)
    if words is None:
        return None

    def run(scene: Scene) -> str:
        found = words(scene)
        if isinstance(found, Unknown):
            return "; ".join(dict.fromkeys(row.source for row in parameter.rows.values()))
        return parameter.row_for(found).source

    return Bound(Form.TEXT, run)


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
