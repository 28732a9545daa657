"""Model cards, parsed when an element asks for them."""

from collections.abc import Iterator, Sequence

from rulecheck.netlist.assignments import formula_at
from rulecheck.netlist.circuit import Model
from rulecheck.netlist.draft import Amount
from rulecheck.netlist.formula import Formula
from rulecheck.netlist.lines import LogicalLine
from rulecheck.netlist.numbers import beyond_numbers, read_number
from rulecheck.netlist.scope import Fault, Scope, compute, has_parameter
from rulecheck.netlist.syntax import BRACED, GROUP, MARK, PAIR, QUOTED, WORD, Card, Item, read_card
from rulecheck.values import Problem, error, note
from rulecheck.values.record import Record

_TOLERANCES = ("lot", "dev")
_INHERITS = "ako:"


_MOST_HEIRS = 40
"""Models that inherit from each other in a row."""


class RawModel(Record):
    """A card taken apart; `parent` is the model that it inherits from."""

    name: str
    type: str
    parent: str
    parameters: tuple[tuple[str, Amount | str], ...]
    line: LogicalLine


def find_model(name: str, scope: Scope, problems: list[Problem]) -> Model | None:
    """The model of that name, in any case, in the innermost scope that has it."""
    return _find(name, scope, problems, ())


def model_is_known(name: str, scope: Scope | None) -> bool:
    lower = name.lower()
    while scope is not None:
        if lower in scope.definition.models:
            return True
        scope = scope.parent
    return False


def _find(
    name: str, scope: Scope | None, problems: list[Problem], heirs: tuple[LogicalLine, ...]
) -> Model | None:
    lower = name.lower()
    while scope is not None:
        line = scope.definition.models.get(lower)
        if line is not None and line not in heirs and len(heirs) < _MOST_HEIRS:
            if lower not in scope.models:
                scope.models[lower] = _build(line, scope, problems, heirs)
            return scope.models[lower]
        scope = scope.parent
    return None


def _build(
    line: LogicalLine, scope: Scope, problems: list[Problem], heirs: tuple[LogicalLine, ...]
) -> Model | None:
    raw = read_model(line, scope, problems)
    if raw is None:
        return None
    parameters: dict[str, float | str] = {}
    type_name = raw.type
    if raw.parent:
        parent = _find(raw.parent, scope, problems, (*heirs, line))
        if parent is None:
            what = f"model '{raw.name}' inherits from '{raw.parent}', which is not there"
            problems.append(error(line.span(), what, "define it, or correct the name"))
        else:
            parameters |= parent.parameters
            type_name = type_name or parent.type
    for name, amount in raw.parameters:
        parameters[name] = _settled(amount, scope, problems)
    problems.extend(_beyond(raw))
    return Model(raw.name, type_name, parameters, line.span())


def _beyond(raw: RawModel) -> Iterator[Problem]:
    for name, amount in raw.parameters:
        if isinstance(amount, str) and beyond_numbers(amount):
            what = f"'{name}={amount}' is beyond what a number can hold"
            yield error(raw.line.span(), what, "write the number that is meant")


def _settled(amount: Amount | str, scope: Scope, problems: list[Problem]) -> float | str:
    if isinstance(amount, Formula):
        outcome = compute(amount, scope)
        if isinstance(outcome, Fault):
            if outcome.problem is not None:
                problems.append(outcome.problem)
            return amount.text
        return outcome
    return "" if amount is None else amount


def read_model(line: LogicalLine, scope: Scope, problems: list[Problem]) -> RawModel | None:
    """`.model NAME TYPE(...)`, without parentheses, in braces, or inheriting (`AKO:BASE TYPE`)."""
    card = read_card(line)
    if isinstance(card, Problem):
        problems.append(card)
        return None
    problems.extend(card.notes)
    head = [item for item in card.items[1:] if item.kind != MARK]
    words = _leading_words(head)
    if len(words) < 2:
        what = "a model has a name and a type"
        problems.append(error(line.span(), what, "write .model NAME TYPE(...)"))
        return None
    parent, taken = _parent(words)
    type_name = words[taken].text.upper() if taken < len(words) else ""
    body = head[min(taken + 1, len(words)) :]
    items, owner = _body(card, body, problems)
    return RawModel(words[0].text, type_name, parent, _parameters(items, owner, scope), line)


def _leading_words(head: Sequence[Item]) -> list[Item]:
    words: list[Item] = []
    for item in head:
        if item.kind != WORD:
            break
        words.append(item)
    return words


def _parent(words: list[Item]) -> tuple[str, int]:
    """The inherited model, and where the type stands behind it."""
    text = words[1].text
    if not text.lower().startswith(_INHERITS):
        return "", 1
    if len(text) > len(_INHERITS):
        return text[len(_INHERITS) :], 2
    return (words[2].text, 3) if len(words) > 2 else ("", 2)


def _body(
    card: Card, body: Sequence[Item], problems: list[Problem]
) -> tuple[list[Item], LogicalLine]:
    """The items inside the parentheses or braces, or behind the type where there are none."""
    if not body or body[0].kind not in (GROUP, BRACED):
        return list(body), card.line
    first = body[0]
    if len(body) > 1:
        what = "what follows the closing parenthesis of a model is ignored"
        problems.append(note(card.span(body[1]), what, "move it inside, or delete it"))
    if first.kind == GROUP:
        return list(first.inner), card.line
    span = card.line.span(first.start + 1)
    line = LogicalLine(first.text, card.line.file, ((0, span.line, span.column),))
    inner = read_card(line)
    if isinstance(inner, Problem):
        problems.append(inner)
        return [], line
    return list(inner.items), line


def _parameters(
    items: list[Item], line: LogicalLine, scope: Scope
) -> tuple[tuple[str, Amount | str], ...]:
    """Numbers by name; a word alone, such as `pchan`, is a flag and counts as 1."""
    found: dict[str, Amount | str] = {}
    position = 0
    while position < len(items):
        item = items[position]
        following = items[position + 1] if position + 1 < len(items) else None
        position += 1
        if item.kind == PAIR and not item.key.lower().startswith(_TOLERANCES):
            found[item.key.lower().replace("-", "_")] = _amount(item, line, scope)
        elif item.kind == WORD and not read_number(item.text):
            tolerance = item.text.lower().startswith(_TOLERANCES)
            number = None
            if following is not None and following.kind == WORD:
                number = read_number(following.text)
                position += number is not None or tolerance
            if not tolerance:
                found[item.text.lower()] = number.value if number else 1.0
    return tuple(found.items())


def _amount(item: Item, line: LogicalLine, scope: Scope) -> Amount | str:
    number = read_number(item.text) if item.value_kind == WORD else None
    if number is not None:
        return number.value
    quoted = item.value_kind == QUOTED and line.text[item.value_start] == "'"
    if item.value_kind in (BRACED, GROUP) or quoted or has_parameter(item.text.lower(), scope):
        return formula_at(line, item.value_start, item.end)
    return item.text
