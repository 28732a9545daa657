"""One logical line becomes items: words, quoted and braced text, groups, key=value pairs."""

import re
from collections.abc import Callable, Iterator
from functools import cache
from typing import Any, NamedTuple

from lark import Lark, Token, Transformer, UnexpectedInput

from rulecheck.netlist.grammars import compile_grammar
from rulecheck.netlist.lines import LogicalLine
from rulecheck.values import Problem, Span, error, note
from rulecheck.values.record import Record, replace

WORD, QUOTED, BRACED, GROUP, PAIR, MARK = "word", "quoted", "braced", "group", "pair", "mark"


DEEPEST = 40
_DELIMITER = re.compile(r"[,=(){}\"']")
_WORDS = re.compile(r"\S+")


class Item(NamedTuple):
    """A stretch of the card from `start` up to `end`.

    `text` is a word, a quoted text without its quotes, what stands inside braces or
    parentheses, or a pair's value; `kind` of a pair's value is `value_kind`.
    """

    kind: str
    start: int
    end: int
    text: str = ""
    key: str = ""
    inner: "tuple[Item, ...]" = ()
    value_kind: str = ""
    value_start: int = 0


class Card(Record):
    line: LogicalLine
    items: tuple[Item, ...]
    notes: tuple[Problem, ...] = ()

    def span(self, item: Item) -> Span:
        return self.line.span(item.start)


class _Reducer(Transformer[Token, Any]):
    """Turns rules into raw tuples; texts are cut from the line afterwards."""

    def start(self, children: list[Any]) -> list[Any]:
        return children

    def group(self, children: list[Any]) -> tuple[str, int, int, list[Any]]:
        return GROUP, children[0].start_pos, children[-1].end_pos, children[1:-1]

    def braced(self, children: list[Any]) -> tuple[str, int, int, list[Any]]:
        return BRACED, children[0].start_pos, children[-1].end_pos, []

    def pair(self, children: list[Any]) -> tuple[str, Token, Any]:
        return PAIR, children[0], children[2]


@cache
def _parser() -> Lark:
    return compile_grammar("card.lark", _Reducer())


def read_card(line: LogicalLine) -> Card | Problem:
    """Parse one logical line; unclosed parentheses are closed at its end, with a note."""
    if line.flaw is not None:
        return line.flaw
    if too_deep(line.text):
        what = f"parentheses nested more than {DEEPEST} deep"
        return error(line.span(), what, "no card needs that; check how the file was made")
    if not _DELIMITER.search(line.text):
        return Card(line, tuple(_plain_words(line.text)))
    text, notes = _balanced(line)
    try:
        raw = _parser().parse(text)
    except UnexpectedInput as reason:
        return _syntax_error(line, text, reason)
    items = [_item(text, child) for child in raw]  # type: ignore[attr-defined]
    if any(item.kind == PAIR for item in items):
        items = _extend_pairs(text, items)
    return Card(replace(line, text=text), tuple(items), notes)


def too_deep(text: str) -> bool:
    """Whether parentheses and braces nest deeper than anything that can be taken apart."""
    if text.count("(") + text.count("{") <= DEEPEST:
        return False
    depth = deepest = 0
    for sign in text:
        depth += (sign in "({") - (sign in ")}" and depth > 0)
        deepest = max(deepest, depth)
    return deepest > DEEPEST


def _plain_words(text: str) -> Iterator[Item]:
    """What the grammar gives for words alone, without its cost; most cards are such."""
    for match in _WORDS.finditer(text):
        yield Item(WORD, match.start(), match.end(), match[0])


def _balanced(line: LogicalLine) -> tuple[str, tuple[Problem, ...]]:
    text = line.text
    if text.count("(") == text.count(")") and text.count("{") == text.count("}"):
        return text, ()
    open_signs: list[str] = []
    for sign in text:
        if sign == "{" or (sign == "(" and "{" not in open_signs):
            open_signs.append(sign)
        elif open_signs and _CLOSING[open_signs[-1]] == sign:
            open_signs.pop()
    if not open_signs:
        return text, ()
    closing = "".join(_CLOSING[sign] for sign in reversed(open_signs))
    what = f"'{open_signs[0]}' is not closed on this card; closed at its end"
    return text + closing, (note(line.span(text.index(open_signs[0])), what, f"add '{closing}'"),)


_CLOSING = {"(": ")", "{": "}"}


def _syntax_error(line: LogicalLine, text: str, reason: UnexpectedInput) -> Problem:
    position = reason.pos_in_stream
    if not isinstance(position, int) or position < 0 or position >= len(line.text):
        position = max(len(line.text) - 1, 0)
    sign = text[position : position + 1]
    for test, what, remedy in _MISTAKES:
        if test(sign, text[:position].rstrip()):
            return error(line.span(position), what, remedy)
    return error(line.span(position), f"'{sign}' does not belong here", "correct the card")


_MISTAKES: tuple[tuple[Callable[[str, str], bool], str, str], ...] = (
    (
        lambda sign, before: sign in "\"'",
        "a quote is opened and not closed",
        "add the closing quote, or delete this one",
    ),
    (
        lambda sign, before: before.endswith("=") or sign == "=",
        "no value follows '='",
        "write the value behind it, or delete the name",
    ),
    (
        lambda sign, before: sign in "{}",
        "braces do not match",
        "close each '{' with its own '}'",
    ),
)


def _item(text: str, raw: Any) -> Item:
    if isinstance(raw, Token):
        return _leaf(raw)
    if raw[0] == PAIR:
        return _pair(text, raw[1], raw[2])
    kind, start, end, children = raw
    inner = tuple(_item(text, child) for child in children)
    if any(item.kind == PAIR for item in inner):
        inner = tuple(_extend_pairs(text, list(inner)))
    return Item(kind, start, end, text[start + 1 : end - 1], "", inner)


def _leaf(token: Token) -> Item:
    start, end = token.start_pos or 0, token.end_pos or 0
    if token.type == "WORD":
        return Item(WORD, start, end, str(token))
    if token.type == "QUOTED":
        return Item(QUOTED, start, end, str(token)[1:-1])
    return Item(MARK, start, end, str(token))


def _pair(text: str, key: Token, raw: Any) -> Item:
    value = _item(text, raw)
    start = key.start_pos or 0
    return Item(PAIR, start, value.end, value.text, str(key), value.inner, value.kind, value.start)


def _extend_pairs(text: str, items: list[Item]) -> list[Item]:
    """A pair's value goes on as long as no blank follows: `tc=1m,2m`, `V=V(a)*2`."""
    result: list[Item] = []
    extended: set[int] = set()
    for item in items:
        last = result[-1] if result else None
        if last is not None and last.kind == PAIR and item.start == last.end:
            if item.kind == PAIR or (item.kind == MARK and item.text == ")"):
                result.append(item)
                continue
            result[-1] = last._replace(end=item.end, value_kind=WORD)
            extended.add(len(result) - 1)
        else:
            result.append(item)
    for place in extended:
        result[place] = result[place]._replace(
            text=text[result[place].value_start : result[place].end]
        )
    return [_without_final_comma(item) for item in result]


def _without_final_comma(item: Item) -> Item:
    if item.kind != PAIR or not item.text.endswith(","):
        return item
    return item._replace(text=item.text.rstrip(","), end=item.end - 1)
