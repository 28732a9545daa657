"""Bind a condition to the vocabulary: names, forms and units are checked once, when a pack loads.

`blocking + current` is refused at its place; `blocking / current` is an ohm. What passes here
runs on every subject of its kind without an error.
"""

from collections.abc import Callable, Mapping
from typing import Any

from rulecheck.rulebook import expressions, logic, names
from rulecheck.rulebook import tree as nodes
from rulecheck.rulebook.scope import OWN, Bound, Parameter, Scope
from rulecheck.rulebook.tree import Flaw, Node

DEEPEST_QUANTIFIERS = 3
"""Quantifiers within each other: each multiplies the time by the number of subjects."""

_ALONE: Mapping[type, Callable[[Any, Scope], Bound | None]] = {
    nodes.Path: names.bind_path,
    nodes.LookedUp: names.bind_looked_up,
    nodes.SourceOf: names.bind_source,
    nodes.QuantityOf: expressions.bind_quantity,
    nodes.Text: expressions.bind_text,
    nodes.Truth: logic.bind_truth,
}
_WITH_INNER: Mapping[type, Callable[[Any, Scope, expressions.Binder], Bound | None]] = {
    nodes.Arithmetic: expressions.bind_arithmetic,
    nodes.Opposite: expressions.bind_opposite,
    nodes.Call: expressions.bind_call,
    nodes.Gathered: expressions.bind_gathered,
    nodes.Compared: logic.bind_compared,
    nodes.Member: logic.bind_member,
    nodes.Matched: logic.bind_matched,
    nodes.Negated: logic.bind_negated,
    nodes.Joined: logic.bind_joined,
    nodes.Quantified: logic.bind_quantified,
}


def bind(node: Node, subject: str, parameters: Mapping[str, Parameter]) -> Bound | tuple[Flaw, ...]:
    """The expression ready to run on subjects of that kind, or all flaws in it."""
    scope = Scope({OWN: subject}, parameters)
    if _quantifiers(node) > DEEPEST_QUANTIFIERS:
        what = f"more than {DEEPEST_QUANTIFIERS} quantifiers within each other"
        return (Flaw(node.at, what, "split the rule in two"),)
    bound = _bind(node, scope)
    if bound is None or scope.flaws:
        return tuple(scope.flaws)
    return bound


def _bind(node: Node, scope: Scope) -> Bound | None:
    alone = _ALONE.get(type(node))
    if alone is not None:
        return alone(node, scope)
    return _WITH_INNER[type(node)](node, scope, _bind)


def _quantifiers(node: Node) -> int:
    inner = max((_quantifiers(below) for below in nodes.inner_nodes(node)), default=0)
    return inner + isinstance(node, nodes.Quantified | nodes.Gathered)
