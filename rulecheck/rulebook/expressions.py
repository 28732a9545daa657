"""Bind numbers and words: quantities, arithmetic with units, functions, gathering over links."""

from collections.abc import Callable, Mapping

from rulecheck.facts import Form
from rulecheck.rulebook import estimate
from rulecheck.rulebook.estimate import ARITHMETIC, Estimate, Spread, exactly, hull
from rulecheck.rulebook.kleene import YES, Answer
from rulecheck.rulebook.names import linked, subjects_along
from rulecheck.rulebook.scope import Bound, Scene, Scope, unit_of
from rulecheck.rulebook.tree import Arithmetic, Call, Gathered, Node, Opposite, QuantityOf, Text
from rulecheck.rulebook.units import PLAIN, Unit, unit_text
from rulecheck.values import NotAQuantity, Unknown, read_quantity

Binder = Callable[[Node, Scope], Bound | None]
FORM_WORDS = {
    Form.NUMBER: "a number",
    Form.RANGE: "a range",
    Form.TEXT: "a text",
    Form.TEXTS: "a list of texts",
    Form.YES_NO: "a yes-or-no",
}


def wrong_form(node: Node, bound: Bound, wanted: str, scope: Scope) -> None:
    remedy = f"write {wanted}"
    if bound.form is Form.RANGE:
        remedy = "take one end: `lowest(...)`, `highest(...)` or `magnitude(...)`"
    scope.fail(node.at, f"{FORM_WORDS[bound.form]} where {wanted} is wanted", remedy)


def as_number(node: Node, bound: Bound | None, scope: Scope) -> Bound | None:
    """The same where it is a number; a flaw where it is not."""
    if bound is not None and bound.form is not Form.NUMBER:
        wrong_form(node, bound, "a number", scope)
        return None
    return bound


def bind_quantity(node: QuantityOf, scope: Scope) -> Bound | None:
    quantity = read_quantity(node.written)
    if isinstance(quantity, NotAQuantity):
        scope.fail(node.at, quantity.why, "write a number such as 0.8 or 60 V")
        return None
    value = exactly(quantity.value)
    return Bound(Form.NUMBER, lambda scene: value, unit_of(quantity.dimension))


def bind_text(node: Text, scope: Scope) -> Bound:
    del scope
    text = node.text
    return Bound(Form.TEXT, lambda scene: text)


def bind_arithmetic(node: Arithmetic, scope: Scope, bind: Binder) -> Bound | None:
    left = as_number(node.left, bind(node.left, scope), scope)
    right = as_number(node.right, bind(node.right, scope), scope)
    if left is None or right is None:
        return None
    unit = _unit_of(node, left.unit, right.unit, scope)
    if unit is None:
        return None
    operation, first, second = ARITHMETIC[node.sign], left.run, right.run
    return Bound(Form.NUMBER, lambda scene: operation(first(scene), second(scene)), unit)


_SUMS = {"+": "added to", "-": "subtracted from"}


def _unit_of(node: Arithmetic, left: Unit, right: Unit, scope: Scope) -> Unit | None:
    if node.sign == "*":
        return left.times(right)
    if node.sign == "/":
        return left.over(right)
    if left == right:
        return left
    what = f"{unit_text(right)} {_SUMS[node.sign]} {unit_text(left)}"
    scope.fail(node.at, what, "give both sides the same unit")
    return None


def bind_opposite(node: Opposite, scope: Scope, bind: Binder) -> Bound | None:
    operand = as_number(node.operand, bind(node.operand, scope), scope)
    if operand is None:
        return None
    run = operand.run
    return Bound(Form.NUMBER, lambda scene: estimate.opposite(run(scene)), operand.unit)


def bind_call(node: Call, scope: Scope, bind: Binder) -> Bound | None:
    arguments = [bind(argument, scope) for argument in node.arguments]
    if any(argument is None for argument in arguments):
        return None
    bound = [argument for argument in arguments if argument is not None]
    wanted, count, maker = _FUNCTIONS[node.function]
    if len(bound) != count:
        what = f"{node.function}() takes {count}, not {len(bound)}"
        scope.fail(node.at, what, f"write {node.function}({', '.join('ab'[:count])})")
        return None
    for argument, item in zip(node.arguments, bound, strict=True):
        if item.form is not wanted:
            what = f"{FORM_WORDS[item.form]} in {node.function}()"
            scope.fail(argument.at, what, f"give it {FORM_WORDS[wanted]}")
            return None
    if len({item.unit for item in bound}) > 1:
        units = " and ".join(unit_text(item.unit) for item in bound)
        scope.fail(node.at, f"{units} in {node.function}()", "give both the same unit")
        return None
    return maker(bound)


def _of_range(pick: Callable[[Spread], Estimate]) -> Callable[[list[Bound]], Bound]:
    def make(bound: list[Bound]) -> Bound:
        run = bound[0].run
        return Bound(Form.NUMBER, lambda scene: pick(run(scene)), bound[0].unit)

    return make


def _of_number(pick: Callable[[Estimate], Estimate]) -> Callable[[list[Bound]], Bound]:
    def make(bound: list[Bound]) -> Bound:
        run = bound[0].run
        return Bound(Form.NUMBER, lambda scene: pick(run(scene)), bound[0].unit)

    return make


def _of_two(pick: Callable[[Estimate, Estimate], Estimate]) -> Callable[[list[Bound]], Bound]:
    def make(bound: list[Bound]) -> Bound:
        first, second = bound[0].run, bound[1].run
        return Bound(Form.NUMBER, lambda scene: pick(first(scene), second(scene)), bound[0].unit)

    return make


def _root(bound: list[Bound]) -> Bound:
    run = bound[0].run
    return Bound(Form.NUMBER, lambda scene: estimate.root(run(scene)), bound[0].unit.root())


def _largest_of(spread: Spread) -> Estimate:
    return estimate.larger(estimate.magnitude(spread.low), estimate.magnitude(spread.high))


_FUNCTIONS: Mapping[str, tuple[Form, int, Callable[[list[Bound]], Bound]]] = {
    "lowest": (Form.RANGE, 1, _of_range(lambda spread: spread.low)),
    "highest": (Form.RANGE, 1, _of_range(lambda spread: spread.high)),
    "magnitude": (Form.RANGE, 1, _of_range(_largest_of)),
    "abs": (Form.NUMBER, 1, _of_number(estimate.magnitude)),
    "root": (Form.NUMBER, 1, _root),
    "smaller": (Form.NUMBER, 2, _of_two(estimate.smaller)),
    "larger": (Form.NUMBER, 2, _of_two(estimate.larger)),
}


def bind_gathered(node: Gathered, scope: Scope, bind: Binder) -> Bound | None:
    """`count`, `sum`, `min`, `max`: subjects that may or may not count widen the result."""
    along = subjects_along(scope, node.among)
    if along is None:
        return None
    owner, link, kind = along
    inner = scope.inside(node.name, kind) if node.name else scope
    value = None if node.value is None else as_number(node.value, bind(node.value, inner), inner)
    where = None if node.where is None else bind(node.where, inner)
    if where is not None and node.where is not None and where.form is not Form.YES_NO:
        wrong_form(node.where, where, "a condition", scope)
        return None
    if (value is None) != (node.value is None) or (where is None) != (node.where is None):
        return None
    counts = where.run if where else _always
    gather, name = _GATHERINGS[node.word], node.name
    amount = value.run if value else _one

    def run(scene: Scene) -> Estimate:
        subjects = linked(scene, owner, link, kind)
        if isinstance(subjects, Unknown):
            return Estimate(*_WIDEST[node.word], (subjects,))
        scenes = [scene.with_subject(name, subject) for subject in subjects]
        return gather([(counts(inside), amount(inside)) for inside in scenes])

    return Bound(Form.NUMBER, run, value.unit if value else PLAIN)


def _always(scene: Scene) -> Answer:
    del scene
    return YES


def _one(scene: Scene) -> Estimate:
    del scene
    return exactly(1.0)


Entry = tuple[Answer, Estimate]
_INFINITE = float("inf")
_WIDEST = {
    "count": (0.0, _INFINITE),
    "sum": (-_INFINITE, _INFINITE),
    "min": (-_INFINITE, _INFINITE),
    "max": (-_INFINITE, _INFINITE),
}


def _total(entries: list[Entry]) -> Estimate:
    total = exactly(0.0)
    for counts, amount in entries:
        if counts.truth is not False:
            total = estimate.plus(total, _perhaps(counts, amount, exactly(0.0)))
    return total


def _extreme(
    pick: Callable[[Estimate, Estimate], Estimate], nothing: float
) -> Callable[[list[Entry]], Estimate]:
    """Of no subject at all the extreme lies beyond every number."""

    def gather(entries: list[Entry]) -> Estimate:
        best = exactly(nothing)
        for counts, amount in entries:
            if counts.truth is not False:
                best = pick(best, _perhaps(counts, amount, best))
        return best

    return gather


def _perhaps(counts: Answer, amount: Estimate, otherwise: Estimate) -> Estimate:
    if counts.truth is True:
        return amount
    whole = hull(amount, otherwise)
    missing = tuple(dict.fromkeys(whole.missing + counts.missing))
    return Estimate(whole.low, whole.high, () if whole.exact else missing)


_GATHERINGS: Mapping[str, Callable[[list[Entry]], Estimate]] = {
    "count": _total,
    "sum": _total,
    "min": _extreme(estimate.smaller, _INFINITE),
    "max": _extreme(estimate.larger, -_INFINITE),
}
