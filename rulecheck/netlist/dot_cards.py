"""The dot cards that define something: subcircuits, parameters, functions, models, global nets."""

from collections.abc import Callable

from rulecheck.netlist.assignments import read_function, read_pair_assignments, read_parameters
from rulecheck.netlist.definition import Definition
from rulecheck.netlist.lines import LogicalLine
from rulecheck.netlist.sorter import Sorter
from rulecheck.netlist.syntax import GROUP, MARK, PAIR, WORD, Item
from rulecheck.values import raise_limit

_OPTIONAL = "optional:"


def _open_subcircuit(line: LogicalLine, keyword: str, sorter: Sorter) -> None:
    card, items = sorter.parsed(line)
    words = [item for item in items if item.kind != MARK]
    if not words or words[0].kind != WORD:
        if card.items:
            what = "a subcircuit definition without a name"
            sorter.fail(line.span(), what, "write .subckt NAME PORT PORT ...")
        sorter.stack.append(Definition("", (), line.span()))
        return
    name = words[0].text
    deepest = sorter.access.limits["subcircuit-depth"]
    if len(sorter.stack) > deepest:
        what = f"subcircuit '{name}' is defined within {deepest} others, and is not read"
        sorter.fail(line.span(), what, raise_limit("subcircuit-depth"))
        return
    ports, optional, pairs = _ports(words[1:])
    definition = Definition(name, tuple(ports), line.span(), optional)
    definition.parameters.update(read_pair_assignments(line, pairs))
    first = sorter.current.inner.setdefault(name.lower(), definition)
    if first is not definition:
        what = f"subcircuit '{name}' is defined a second time; the first, at {first.span}, is used"
        sorter.remark(line.span(), what, "delete or rename one of them")
    sorter.stack.append(definition)


def _ports(words: list[Item]) -> tuple[list[str], dict[str, str], list[Item]]:
    """Ports, optional ports with the net that stands for each, and parameters."""
    ports: list[str] = []
    optional: dict[str, str] = {}
    pairs: list[Item] = []
    in_optional = done = False
    for word in words:
        key = word.key.lower()
        if word.kind != PAIR:
            in_optional = word.text.lower() == _OPTIONAL
            done = done or word.text.endswith(":")
            if not done:
                ports.append(word.text)
            continue
        if ":" in key:
            in_optional = key.startswith(_OPTIONAL)
        if in_optional:
            optional[word.key.rpartition(":")[2]] = word.text
        else:
            done = True
            pairs.append(word)
    return ports, optional, pairs


def _close_subcircuit(line: LogicalLine, keyword: str, sorter: Sorter) -> None:
    words = line.text.split()
    name = words[1] if len(words) > 1 else ""
    names = [definition.name.lower() for definition in sorter.stack[1:]]
    if not names:
        sorter.fail(line.span(), ".ends without a .subckt before it", "delete it")
        return
    if name and name.lower() not in names:
        what = f".ends {name} closes subcircuit '{sorter.current.name}'"
        sorter.remark(line.span(), what, "use the same name")
    elif name:
        while sorter.current.name.lower() != name.lower():
            left = sorter.stack.pop()
            what = f"subcircuit '{left.name}' is not closed before '{name}' ends"
            sorter.fail(left.span, what, "add its .ends card")
    sorter.stack.pop()


def _parameters(line: LogicalLine, keyword: str, sorter: Sorter) -> None:
    card, items = sorter.parsed(line)
    if not items:
        return
    if len(items) > 2 and items[1].kind == GROUP and items[1].start == items[0].end:
        _function(line, keyword, sorter)
        items = [item for item in items[3:] if item.kind == PAIR]
        if not items:
            return
    assigned, problems = read_parameters(card, items)
    sorter.problems.extend(problems)
    for name, formula in assigned:
        if name in sorter.current.parameters and sorter.current is sorter.top:
            first = sorter.current.parameters[name].span()
            if sorter.current.parameters[name].text != formula.text:
                what = f"parameter '{name}' is defined again; the first, at {first}, is not used"
                sorter.remark(formula.span(), what, "delete one of them")
        sorter.current.parameters[name] = formula


def _function(line: LogicalLine, keyword: str, sorter: Sorter) -> None:
    card, items = sorter.parsed(line)
    function = read_function(card, items)
    if function is None:
        if items:
            sorter.fail(line.span(), "no function is defined here", "write .func f(x) {2*x}")
        return
    sorter.current.functions[function[0]] = function[1]


def _model(line: LogicalLine, keyword: str, sorter: Sorter) -> None:
    words = line.text.split(None, 2)
    if len(words) < 2:
        sorter.fail(line.span(), "a model without a name", "write .model NAME TYPE(...)")
        return
    name = words[1].partition("(")[0].lower()
    first = sorter.current.models.setdefault(name, line)
    if first.text.lower().split() != line.text.lower().split():
        what = f"model '{words[1]}' is defined a second time; the first, at {first.span()}, is used"
        sorter.remark(line.span(), what, "delete or rename one of them")


def _globals(line: LogicalLine, keyword: str, sorter: Sorter) -> None:
    sorter.global_nets.update(word.lower() for word in line.text.split()[1:])


def _title(line: LogicalLine, keyword: str, sorter: Sorter) -> None:
    sorter.title = sorter.title or line.text[len(keyword) :].strip()


Handler = Callable[[LogicalLine, str, Sorter], None]

HANDLERS: dict[str, Handler] = {
    ".subckt": _open_subcircuit,
    ".macro": _open_subcircuit,
    ".ends": _close_subcircuit,
    ".eom": _close_subcircuit,
    ".param": _parameters,
    ".params": _parameters,
    ".func": _function,
    ".function": _function,
    ".model": _model,
    ".global": _globals,
    ".title": _title,
}
