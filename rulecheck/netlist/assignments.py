"""What `.param`, `.func` and the head of a `.subckt` assign: names with their expressions."""

from collections.abc import Iterator, Sequence

from rulecheck.netlist.definition import UserFunction
from rulecheck.netlist.formula import Formula
from rulecheck.netlist.lines import LogicalLine
from rulecheck.netlist.syntax import BRACED, GROUP, MARK, PAIR, QUOTED, WORD, Card, Item
from rulecheck.values import Problem, error

Assigned = tuple[str, Formula]


def formula_at(line: LogicalLine, start: int, end: int) -> Formula:
    """The expression between two places of a line, without its quotes or outer braces."""
    text = line.text[start:end]
    stripped = text.strip().rstrip(",").rstrip()
    start += len(text) - len(text.lstrip())
    if len(stripped) > 1 and stripped[0] in "\"'" and stripped[-1] == stripped[0]:
        return Formula(stripped[1:-1], line, start + 1)
    return Formula(stripped, line, start)


def key_name(key: str) -> str:
    """A parameter's name: lower case, without a keyword that touches it (`PARAMS:Vin`)."""
    return key.rpartition(":")[2].lower()


def read_parameters(card: Card, items: Sequence[Item]) -> tuple[list[Assigned], list[Problem]]:
    """`a=1 b={2*a} c = a + 1`, or a name and a value without a sign between."""
    pairs = [item for item in items if item.kind == PAIR]
    first = items.index(pairs[0]) if pairs else len(items)
    assigned = list(_without_sign(card, items[:first]))
    assigned.extend(read_pair_assignments(card.line, pairs))
    problems: list[Problem] = []
    if not assigned:
        what = "no parameter is assigned here"
        problems.append(error(card.line.span(), what, "write .param NAME=VALUE"))
    return assigned, problems


def read_pair_assignments(line: LogicalLine, pairs: Sequence[Item]) -> list[Assigned]:
    """Each pair with all that stands up to the next one: `c = a + 1` needs no braces."""
    ends = [*(pair.start for pair in pairs[1:]), len(line.text)]
    return [
        (key_name(pair.key), formula_at(line, pair.value_start, end))
        for pair, end in zip(pairs, ends, strict=False)
    ]


def _without_sign(card: Card, items: Sequence[Item]) -> Iterator[Assigned]:
    words = [item for item in items if item.kind != MARK and not item.text.endswith(":")]
    for name, value in zip(words[0::2], words[1::2], strict=False):
        if name.kind == WORD:
            yield key_name(name.text), formula_at(card.line, value.start, value.end)


def read_function(card: Card, items: Sequence[Item]) -> tuple[str, UserFunction] | None:
    """`f(x,y) {body}` or `f(x,y) = body`; None where it is no such thing."""
    if len(items) < 3 or items[0].kind != WORD or items[1].kind != GROUP:
        return None
    arguments = tuple(item.text.lower() for item in items[1].inner if item.kind == WORD)
    rest = [item for item in items[2:] if item.text != "="]
    if not rest:
        return None
    enclosed = rest[0].kind in (BRACED, QUOTED)
    end = rest[0].end if enclosed else len(card.line.text)
    body = formula_at(card.line, rest[0].start, end)
    return items[0].text.lower(), UserFunction(arguments, body)
