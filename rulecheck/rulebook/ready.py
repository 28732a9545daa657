"""Make a rule ready: bind its conditions, values and message to the vocabulary."""

from collections.abc import Mapping

from rulecheck.facts import Form
from rulecheck.rulebook.binding import bind
from rulecheck.rulebook.rulebook import ReadyRule, Rule
from rulecheck.rulebook.scope import Bound, Parameter
from rulecheck.rulebook.tree import Flaw, Node
from rulecheck.values.record import Record


class Missing(Record):
    """A flaw and the text of the rule that it is in: `requires`, `message`, `values.needs`."""

    key: str
    flaw: Flaw


def make_ready(rule: Rule, parameters: Mapping[str, Parameter]) -> ReadyRule | tuple[Missing, ...]:
    """The rule with everything bound, or all flaws of names, forms and units in it."""
    maker = _Maker(rule, {**parameters, **rule.parameters}, [])
    applies = maker.condition("applies", rule.applies)
    requires = maker.condition("requires", rule.requires)
    graver = maker.condition("graver", rule.graver_when)
    message = tuple(
        (piece.words, None)
        if piece.expression is None
        else (piece.words, maker.bound("message", piece.expression, piece.at))
        for piece in rule.message
    )
    values = {name: maker.bound(f"values.{name}", node) for name, node in rule.values.items()}
    if maker.missing or requires is None:
        return tuple(maker.missing)
    known = {name: bound for name, bound in values.items() if bound is not None}
    return ReadyRule(rule, applies, requires, graver, message, known)


class _Maker(Record):
    rule: Rule
    parameters: Mapping[str, Parameter]
    missing: list[Missing]

    def bound(self, key: str, node: Node | None, at: int = 0) -> Bound | None:
        if node is None:
            return None
        result = bind(node, self.rule.subject, self.parameters)
        if isinstance(result, Bound):
            return result
        for flaw in result:
            self.missing.append(Missing(key, Flaw(at + flaw.at, flaw.what, flaw.remedy)))
        return None

    def condition(self, key: str, node: Node | None) -> Bound | None:
        result = self.bound(key, node)
        if result is None or node is None or result.form is Form.YES_NO:
            return result
        what = f"this is no condition but {result.form.value}"
        self.missing.append(Missing(key, Flaw(node.at, what, "write a comparison or a yes-no")))
        return None
