"""Parameter arithmetic becomes a short program in postfix order: no depth limit, no recursion."""

import re
from functools import cache
from typing import Any

from lark import Lark, Token, Transformer, UnexpectedInput

from rulecheck.netlist.grammars import compile_grammar
from rulecheck.netlist.lines import LogicalLine
from rulecheck.netlist.numbers import read_number
from rulecheck.netlist.syntax import DEEPEST, too_deep
from rulecheck.values import Span
from rulecheck.values.record import Record

LONGEST = 20_000
NUMBER, NAME, CALL, OPERATOR, CHOOSE = "number", "name", "call", "operator", "choose"
_CIRCUIT_QUANTITY = re.compile(r"\b[vi]\s*\(", re.IGNORECASE)

# A number or a name alone needs no parser; most expressions are such.
_BRACES = re.compile(r"\A\{\s*([^{}\s]+)\s*\}\Z")
_WORD = re.compile(r"[A-Za-z_]\w*")


class Step(Record):
    """One instruction: push a number or name, or work on the topmost values."""

    kind: str
    word: str
    position: int
    number: float = 0.0
    count: int = 0


Program = tuple[Step, ...]


class NoFormula(Record):
    """Why a text cannot be computed; `behavioural` where it asks for voltages or currents."""

    what: str
    position: int
    behavioural: bool = False


class Formula(Record):
    """An expression as written, and where it stands on its card."""

    text: str
    line: LogicalLine
    offset: int

    def span(self, position: int = 0) -> Span:
        return self.line.span(self.offset + position)


class _Reducer(Transformer[Token, Any]):
    def start(self, children: list[Any]) -> list[Step]:
        return _flat(children)

    def choose(self, children: list[Any]) -> list[Step]:
        return [*_flat(children), Step(CHOOSE, "?:", 0, count=3)]

    def either(self, children: list[Any]) -> list[Step]:
        return _binary(children)

    both = comparison = sum = product = power = either

    def sign(self, children: list[Any]) -> list[Step]:
        token, operand = children
        return [*operand, Step(OPERATOR, f"unary {token}", token.start_pos, count=1)]

    def number(self, children: list[Token]) -> list[Step]:
        number = read_number(children[0])
        if number is None:
            return [Step(NAME, str(children[0]), children[0].start_pos or 0)]
        return [Step(NUMBER, str(children[0]), children[0].start_pos or 0, number.value)]

    def name(self, children: list[Token]) -> list[Step]:
        return [Step(NAME, str(children[0]), children[0].start_pos or 0)]

    def call(self, children: list[Any]) -> list[Step]:
        token, arguments = children[0], children[1:]
        step = Step(CALL, str(token), token.start_pos, count=len(arguments))
        return [*_flat(arguments), step]


def _flat(children: list[Any]) -> list[Step]:
    return [step for child in children for step in child]


def _binary(children: list[Any]) -> list[Step]:
    left, token, right = children
    left.extend(right)
    left.append(Step(OPERATOR, str(token), token.start_pos, count=2))
    steps: list[Step] = left
    return steps


@cache
def _parser() -> Lark:
    return compile_grammar("expression.lark", _Reducer())


@cache
def compile_formula(text: str) -> Program | NoFormula:
    """The program of an expression, in braces or bare."""
    if len(text) > LONGEST:
        return NoFormula(f"an expression of more than {LONGEST} characters", 0)
    if too_deep(text):
        return NoFormula(f"an expression nested more than {DEEPEST} deep", 0)
    plain = _BRACES.sub(r"\1", text)
    number = read_number(plain)
    if number is not None and not number.remark:
        return (Step(NUMBER, plain, 0, number.value),)
    if _WORD.fullmatch(plain):
        return (Step(NAME, plain, text.index(plain)),)
    if _CIRCUIT_QUANTITY.search(text):
        return NoFormula("depends on voltages or currents of the circuit", 0, behavioural=True)
    try:
        return tuple(_parser().parse(text))  # type: ignore[arg-type]
    except UnexpectedInput as reason:
        position = reason.pos_in_stream
        if not isinstance(position, int) or not 0 <= position < len(text):
            return NoFormula("the expression ends too early", max(len(text) - 1, 0))
        return NoFormula(f"'{text[position]}' does not belong in an expression", position)
