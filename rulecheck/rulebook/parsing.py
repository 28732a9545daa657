"""The door to the parser: a condition's text becomes a tree, or one flaw with its place."""

from collections.abc import Callable
from functools import cache
from typing import Any

from lark import Lark, Token, Tree
from lark.exceptions import UnexpectedCharacters, UnexpectedEOF, UnexpectedInput, UnexpectedToken

from rulecheck.reading import packaged
from rulecheck.rulebook.tree import (
    Arithmetic,
    Call,
    Compared,
    Flaw,
    Gathered,
    Joined,
    LookedUp,
    Matched,
    Member,
    Negated,
    Node,
    Opposite,
    Path,
    Quantified,
    QuantityOf,
    SourceOf,
    Text,
    Truth,
)

LONGEST = 4000
DEEPEST = 40
"""Characters and levels beyond which a condition is refused: nobody could read it either."""

_WORDS = {
    "TEXT": 'a text such as "mosfet"',
    "QUANTITY": "a number such as 0.8 or 60 V",
    "WORD": "a name",
    "COMPARE": "a comparison",
    "RPAR": "')'",
    "LPAR": "'('",
    "RSQB": "']'",
    "LSQB": "'['",
    "COMMA": "','",
    "PLUS": "'+'",
    "MINUS": "'-'",
    "TIMES": "'*'",
    "OVER": "'/'",
    "DOT": "'.'",
    "FUNCTION": "a function",
    "GATHER": "a sum",
    "$END": "the end",
}
_FEW = 6


@cache
def _parser() -> Lark:
    grammar = (packaged("grammar") / "condition.lark").read_text(encoding="utf-8")
    return Lark(grammar, parser="lalr", propagate_positions=True, maybe_placeholders=True)


@cache
def parse_condition(text: str) -> Node | Flaw:
    """The tree of a condition or expression; a text that is none is a flaw, never an exception."""
    if len(text) > LONGEST:
        return Flaw(0, f"a condition of more than {LONGEST} characters", "split the rule in two")
    if _nesting(text) > DEEPEST:
        return Flaw(0, f"brackets nested more than {DEEPEST} deep", "split the rule in two")
    try:
        tree = _parser().parse(text)
    except UnexpectedInput as reason:
        return _flaw(text, reason)
    if _depth(tree) > DEEPEST:
        return Flaw(0, f"a condition nested more than {DEEPEST} deep", "split the rule in two")
    node: Node = _node(tree)
    return node


def _nesting(text: str) -> int:
    """Brackets and prefixes open at once; an upper bound on what the parser recurses into."""
    depth = deepest = 0
    for character in text:
        depth += (character in "([") - (character in ")]")
        deepest = max(deepest, depth)
    return deepest


def _depth(tree: "Tree[Token]") -> int:
    """Levels of the tree, counted without recursion."""
    deepest = 0
    waiting: list[tuple[Tree[Token], int]] = [(tree, 1)]
    while waiting:
        inner, depth = waiting.pop()
        deepest = max(deepest, depth)
        waiting += [(child, depth + 1) for child in inner.children if isinstance(child, Tree)]
    return deepest


def _flaw(text: str, reason: UnexpectedInput) -> Flaw:
    if isinstance(reason, UnexpectedCharacters):
        at = reason.pos_in_stream or 0
        return Flaw(at, f"'{text[at]}' has no place here", _expected(reason.allowed or ()))
    if isinstance(reason, UnexpectedEOF):
        return Flaw(len(text), "the condition ends too early", _expected(reason.expected))
    if isinstance(reason, UnexpectedToken):
        if reason.token.type == "$END":
            return Flaw(len(text), "the condition ends too early", _expected(reason.accepts))
        at = reason.token.start_pos or 0
        what = f"'{reason.token}' has no place here"
        return Flaw(at, what, _expected(reason.accepts or reason.expected))
    return Flaw(0, "not a condition", "see the conditions of the shipped packs")


def _expected(names: Any) -> str:
    words = sorted({_WORDS.get(name, f"'{name.lower()}'") for name in names})
    return f"expected {', '.join(words[:_FEW])}{', ...' if len(words) > _FEW else ''}"


def _node(item: Any) -> Any:
    """One parser tree as a record, its children first."""
    if item is None:
        return None
    if isinstance(item, Token):
        return item
    children = [_node(child) for child in item.children]
    return _MAKERS[_rule(item)](item.meta.start_pos, children)


def _rule(tree: "Tree[Any]") -> str:
    return str(tree.data)


def _unquoted(token: Token) -> str:
    return str(token)[1:-1]


def _member(at: int, children: list[Any]) -> Member:
    item, held = children
    if isinstance(held, Path):
        return Member(at, item, None, held)
    return Member(at, item, held, None)


Maker = Callable[[int, list[Any]], Any]
_MAKERS: dict[str, Maker] = {
    "path": lambda at, c: Path(at, tuple(str(word) for word in c)),
    "quantity": lambda at, c: QuantityOf(at, str(c[0])),
    "text": lambda at, c: Text(at, _unquoted(c[0])),
    "yes": lambda at, c: Truth(at, True),
    "no": lambda at, c: Truth(at, False),
    "arithmetic": lambda at, c: Arithmetic(c[1].start_pos, str(c[1]), c[0], c[2]),
    "opposite": lambda at, c: Opposite(at, c[1]),
    "compared": lambda at, c: Compared(c[1].start_pos, str(c[1]), c[0], c[2]),
    "member": _member,
    "listed": lambda at, c: tuple(_unquoted(token) for token in c),
    "held": lambda at, c: c[0],
    "matched": lambda at, c: Matched(at, c[0], _unquoted(c[1])),
    "negated": lambda at, c: Negated(at, c[0]),
    "both": lambda at, c: Joined(at, "and", c[0], c[1]),
    "either": lambda at, c: Joined(at, "or", c[0], c[1]),
    "implies": lambda at, c: Joined(at, "implies", c[0], c[1]),
    "every": lambda at, c: Quantified(at, "every", str(c[0]), c[1], c[2]),
    "some": lambda at, c: Quantified(at, "some", str(c[0]), c[1], c[2]),
    "looked_up": lambda at, c: LookedUp(at, c[0], c[1]),
    "source": lambda at, c: SourceOf(at, c[0], c[1]),
    "call": lambda at, c: Call(at, str(c[0]), tuple(c[1:])),
    "count_all": lambda at, c: Gathered(at, "count", None, "", c[0], None),
    "count_some": lambda at, c: Gathered(at, "count", None, str(c[0]), c[1], c[2]),
    "gathered": lambda at, c: Gathered(at, str(c[0]), c[1], str(c[2]), c[3], c[4]),
}
