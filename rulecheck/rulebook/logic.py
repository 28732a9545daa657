"""Bind truths: comparisons, membership, patterns, and/or/not/implies, every and some."""

import fnmatch
import re
from collections.abc import Callable, Iterator, Mapping
from typing import Any

from rulecheck.facts import Form
from rulecheck.rulebook.estimate import COMPARISONS
from rulecheck.rulebook.expressions import FORM_WORDS, Binder, wrong_form
from rulecheck.rulebook.kleene import (
    Answer,
    answer,
    conjunction,
    disjunction,
    implication,
    negation,
    undecided,
)
from rulecheck.rulebook.names import linked, subjects_along
from rulecheck.rulebook.scope import Bound, Scene, Scope
from rulecheck.rulebook.tree import (
    Compared,
    Joined,
    Matched,
    Member,
    Negated,
    Node,
    Quantified,
    Truth,
)
from rulecheck.rulebook.units import unit_text
from rulecheck.values import Unknown

MOST_STARS = 8


def bind_truth(node: Truth, scope: Scope) -> Bound:
    del scope
    value = answer(node.truth)
    return Bound(Form.YES_NO, lambda scene: value)


def as_condition(node: Node, bound: Bound | None, scope: Scope) -> Bound | None:
    if bound is not None and bound.form is not Form.YES_NO:
        wrong_form(node, bound, "a condition", scope)
        return None
    return bound


def bind_compared(node: Compared, scope: Scope, bind: Binder) -> Bound | None:
    left, right = bind(node.left, scope), bind(node.right, scope)
    if left is None or right is None:
        return None
    for side, bound in ((node.left, left), (node.right, right)):
        if bound.form is Form.RANGE:
            wrong_form(side, bound, "a number", scope)
            return None
    if left.form is not right.form:
        what = f"{FORM_WORDS[left.form]} compared with {FORM_WORDS[right.form]}"
        scope.fail(node.at, what, "compare like with like")
        return None
    if left.unit != right.unit:
        what = f"{unit_text(left.unit)} compared with {unit_text(right.unit)}"
        scope.fail(node.at, what, "give both sides the same unit")
        return None
    compare = _comparison(node, left.form, scope)
    if compare is None:
        return None
    first, second = left.run, right.run
    return Bound(Form.YES_NO, lambda scene: compare(first(scene), second(scene)))


Comparison = Callable[[Any, Any], Answer]


def _comparison(node: Compared, form: Form, scope: Scope) -> Comparison | None:
    """The comparison of two values of that form; words and truths know only = and !=."""
    if form is Form.NUMBER and node.sign in COMPARISONS:
        return COMPARISONS[node.sign]
    same = _SAME.get(form)
    if same is None or node.sign not in ("=", "!="):
        what = f"'{node.sign}' between {FORM_WORDS[form]} and another"
        scope.fail(node.at, what, "numbers alone have an order; use = or !=")
        return None
    if node.sign == "=":
        return same
    return lambda first, second: negation(same(first, second))


def _same_words(first: Any, second: Any) -> Answer:
    missing = [item for item in (first, second) if isinstance(item, Unknown)]
    return undecided(missing) if missing else answer(first == second)


def _same_truths(first: Answer, second: Answer) -> Answer:
    if first.truth is None or second.truth is None:
        return undecided(first.missing + second.missing)
    return answer(first.truth == second.truth)


_SAME: Mapping[Form, Comparison] = {
    Form.NUMBER: COMPARISONS["="],
    Form.TEXT: _same_words,
    Form.TEXTS: _same_words,
    Form.YES_NO: _same_truths,
}


def bind_member(node: Member, scope: Scope, bind: Binder) -> Bound | None:
    item = bind(node.item, scope)
    if item is None:
        return None
    if item.form is not Form.TEXT:
        wrong_form(node.item, item, "a text", scope)
        return None
    held = _holder(node, scope, bind)
    if held is None:
        return None
    run, collection = item.run, held
    return Bound(Form.YES_NO, lambda scene: _contained(run(scene), collection(scene)))


def _holder(node: Member, scope: Scope, bind: Binder) -> Callable[[Scene], Any] | None:
    if node.held is None:
        listed = node.listed or ()
        return lambda scene: listed
    bound = bind(node.held, scope)
    if bound is not None and bound.form is not Form.TEXTS:
        wrong_form(node.held, bound, "a list of texts", scope)
        return None
    return bound.run if bound else None


def _contained(item: str | Unknown, collection: tuple[str, ...] | Unknown) -> Answer:
    missing = [value for value in (item, collection) if isinstance(value, Unknown)]
    return undecided(missing) if missing else answer(item in collection)  # type: ignore[operator]


def bind_matched(node: Matched, scope: Scope, bind: Binder) -> Bound | None:
    """A pattern with `*` and `?`, upper and lower case alike."""
    item = bind(node.item, scope)
    if item is None:
        return None
    if item.form is not Form.TEXT:
        wrong_form(node.item, item, "a text", scope)
        return None
    if node.pattern.count("*") > MOST_STARS:
        what = f"a pattern with more than {MOST_STARS} stars"
        scope.fail(node.at, what, "split the rule in two")
        return None
    pattern = re.compile(fnmatch.translate(node.pattern.casefold()))
    run = item.run
    return Bound(Form.YES_NO, lambda scene: _fits(pattern, run(scene)))


def _fits(pattern: re.Pattern[str], item: str | Unknown) -> Answer:
    if isinstance(item, Unknown):
        return undecided((item,))
    return answer(pattern.match(item.casefold()) is not None)


def bind_negated(node: Negated, scope: Scope, bind: Binder) -> Bound | None:
    operand = as_condition(node.operand, bind(node.operand, scope), scope)
    if operand is None:
        return None
    run = operand.run
    return Bound(Form.YES_NO, lambda scene: negation(run(scene)))


def bind_joined(node: Joined, scope: Scope, bind: Binder) -> Bound | None:
    left = as_condition(node.left, bind(node.left, scope), scope)
    right = as_condition(node.right, bind(node.right, scope), scope)
    if left is None or right is None:
        return None
    first, second = left.run, right.run
    if node.word == "implies":
        return Bound(Form.YES_NO, lambda scene: implication(first(scene), second(scene)))
    join = conjunction if node.word == "and" else disjunction
    # lazily, so that a decided first operand spares the second
    return Bound(Form.YES_NO, lambda scene: join(run(scene) for run in (first, second)))


def bind_quantified(node: Quantified, scope: Scope, bind: Binder) -> Bound | None:
    along = subjects_along(scope, node.among)
    if along is None:
        return None
    owner, link, kind = along
    inner = scope.inside(node.name, kind)
    condition = as_condition(node.condition, bind(node.condition, inner), inner)
    if condition is None:
        return None
    join = conjunction if node.word == "every" else disjunction
    holds, name = condition.run, node.name

    def run(scene: Scene) -> Answer:
        subjects = linked(scene, owner, link, kind)
        if isinstance(subjects, Unknown):
            return undecided((subjects,))
        answers: Iterator[Answer] = (holds(scene.with_subject(name, s)) for s in subjects)
        return join(answers)

    return Bound(Form.YES_NO, run)
