"""Sort the cards of a deck and of the files that it includes into definitions."""

import re
from collections.abc import Callable
from dataclasses import dataclass, field
from pathlib import Path

from rulecheck.netlist.assignments import formula_at, key_name, read_function, read_parameters
from rulecheck.netlist.definition import Deck, Definition
from rulecheck.netlist.lines import Lines, LogicalLine, split_lines
from rulecheck.netlist.paths import clean_path, resolve_path
from rulecheck.netlist.syntax import MARK, PAIR, WORD, Card, Item, read_card
from rulecheck.reading import SourceText, read_text
from rulecheck.values import Problem, Span, error, note

_KEYWORD = re.compile(r"\.?[A-Za-z_0-9]*")
_SECTION = re.compile(r"\.lib\s+([^\s.\"'/\\]+)\s*\Z", re.IGNORECASE)
_SECTION_END = re.compile(r"\.endl\b", re.IGNORECASE)
_OPTIONAL = "optional:"

# Cards that steer a simulation and say nothing of the circuit.
_ANALYSIS = frozenset({
    ".ac", ".backanno", ".dc", ".disto", ".end", ".endl", ".four", ".graph", ".ic", ".meas",
    ".measure", ".net", ".nodeset", ".noise", ".op", ".opt", ".option", ".options", ".plot",
    ".print", ".probe", ".pz", ".save", ".sens", ".step", ".temp", ".tf", ".tran", ".view",
    ".wave", ".width",
})  # fmt: skip
_CONDITIONS = frozenset({".if", ".elseif", ".else", ".endif"})


@dataclass(slots=True)
class _Sorter:
    """What is collected while the files of one deck are read."""

    top: Definition
    stack: list[Definition]
    title: str = ""
    global_nets: set[str] = field(default_factory=set)
    problems: list[Problem] = field(default_factory=list)
    files: list[str] = field(default_factory=list)
    open_files: list[tuple[Path, str]] = field(default_factory=list)
    included: set[tuple[Span, Path, str]] = field(default_factory=set)
    kinds_noted: set[str] = field(default_factory=set)

    @property
    def current(self) -> Definition:
        return self.stack[-1]

    def fail(self, span: Span, what: str, remedy: str) -> None:
        self.problems.append(error(span, what, remedy))


def read_deck(source: SourceText) -> Deck:
    """Read a top-level netlist and all that it includes."""
    top = Definition("", (), Span(source.file, 1))
    sorter = _Sorter(top, [top])
    lines = split_lines(source, top=True)
    sorter.title = lines.title
    sorter.open_files.append((_identity(Path(source.file)), ""))
    _sort(source.file, lines, sorter)
    return Deck(
        source.file,
        sorter.title,
        top,
        frozenset(sorter.global_nets),
        tuple(sorter.files),
        tuple(sorter.problems),
    )


def _identity(path: Path) -> Path:
    try:
        return path.resolve()
    except (OSError, ValueError):
        return path


def _sort(file: str, lines: Lines, sorter: _Sorter, section: str = "") -> None:
    if file not in sorter.files:
        sorter.files.append(file)
    sorter.problems.extend(lines.problems)
    depth = len(sorter.stack)
    for line in _wanted(lines.cards, section):
        if line.text[0] == ".":
            _dot_card(line, sorter)
        else:
            sorter.current.cards.append(line)
    while len(sorter.stack) > depth:
        left = sorter.stack.pop()
        sorter.fail(
            left.span,
            f"subcircuit '{left.name}' is not closed by the end of the file; closed there",
            "add its .ends card",
        )


def _wanted(cards: tuple[LogicalLine, ...], section: str) -> list[LogicalLine]:
    """Without the sections of a library that nobody asked for."""
    if not any(_SECTION_END.match(card.text) for card in cards):
        return list(cards)
    kept: list[LogicalLine] = []
    inside = ""
    for card in cards:
        opened = _SECTION.match(card.text)
        if opened and not inside:
            inside = opened[1].lower()
        elif _SECTION_END.match(card.text):
            inside = ""
        elif inside in ("", section.lower()):
            kept.append(card)
    return kept


def _dot_card(line: LogicalLine, sorter: _Sorter) -> None:
    match = _KEYWORD.match(line.text)
    keyword = match[0].lower() if match else ""
    handler = _HANDLERS.get(keyword)
    if handler is not None:
        handler(line, keyword, sorter)
    elif keyword in _CONDITIONS:
        what = f"{keyword} is not evaluated: the cards of every branch are read"
        sorter.fail(line.span(), what, "keep the branch that counts and delete the others")
    elif keyword not in _ANALYSIS and keyword not in sorter.kinds_noted:
        sorter.kinds_noted.add(keyword)
        what = f"{keyword} cards are not known here and are skipped"
        sorter.problems.append(note(line.span(), what))


def _parsed(line: LogicalLine, sorter: _Sorter) -> tuple[Card, list[Item]]:
    """The card, and its items behind the keyword; without items where it cannot be parsed."""
    card = read_card(line)
    if isinstance(card, Problem):
        sorter.problems.append(card)
        return Card(line, ()), []
    sorter.problems.extend(card.notes)
    return card, list(card.items[1:])


def _open_subcircuit(line: LogicalLine, keyword: str, sorter: _Sorter) -> None:
    card, items = _parsed(line, sorter)
    words = [item for item in items if item.kind != MARK]
    if not words or words[0].kind != WORD:
        if card.items:
            what = "a subcircuit definition without a name"
            sorter.fail(line.span(), what, "write .subckt NAME PORT PORT ...")
        sorter.stack.append(Definition("", (), line.span()))
        return
    name = words[0].text
    ports, optional, pairs = _ports(words[1:])
    definition = Definition(name, tuple(ports), line.span(), optional)
    limit = len(line.text)
    for item, following in zip(pairs, [*pairs[1:], None], strict=True):
        end = following.start if following else limit
        definition.parameters[key_name(item.key)] = formula_at(line, item.value_start, end)
    first = sorter.current.inner.setdefault(name.lower(), definition)
    if first is not definition:
        what = f"subcircuit '{name}' is defined a second time; the first, at {first.span}, is used"
        sorter.problems.append(note(line.span(), what, "delete or rename one of them"))
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
        elif in_optional or key.startswith(_OPTIONAL):
            in_optional = True
            optional[word.key.rpartition(":")[2]] = word.text
        else:
            done = True
            pairs.append(word)
    return ports, optional, pairs


def _close_subcircuit(line: LogicalLine, keyword: str, sorter: _Sorter) -> None:
    name = line.text.split()[1].lower() if len(line.text.split()) > 1 else ""
    names = [definition.name.lower() for definition in sorter.stack[1:]]
    if not names:
        sorter.fail(line.span(), ".ends without a .subckt before it", "delete it")
        return
    if name and name != names[-1] and name in names:
        while sorter.current.name.lower() != name:
            left = sorter.stack.pop()
            what = f"subcircuit '{left.name}' is not closed before '{name}' ends"
            sorter.fail(left.span, what, "add its .ends card")
    elif name and name != names[-1]:
        what = f".ends {name} closes subcircuit '{sorter.current.name}'"
        sorter.problems.append(note(line.span(), what, "use the same name"))
    sorter.stack.pop()


def _parameters(line: LogicalLine, keyword: str, sorter: _Sorter) -> None:
    card, items = _parsed(line, sorter)
    if not items:
        return
    if len(items) > 2 and items[1].kind == "group" and items[1].start == items[0].end:
        _function(line, keyword, sorter)
        return
    assigned, problems = read_parameters(card, items)
    sorter.problems.extend(problems)
    for name, formula in assigned:
        if name in sorter.current.parameters and sorter.current is sorter.top:
            first = sorter.current.parameters[name].span()
            if sorter.current.parameters[name].text != formula.text:
                what = f"parameter '{name}' is defined again; the first, at {first}, is not used"
                sorter.problems.append(note(formula.span(), what, "delete one of them"))
        sorter.current.parameters[name] = formula


def _function(line: LogicalLine, keyword: str, sorter: _Sorter) -> None:
    card, items = _parsed(line, sorter)
    function = read_function(card, items)
    if function is None:
        if items:
            sorter.fail(line.span(), "no function is defined here", "write .func f(x) {2*x}")
        return
    sorter.current.functions[function[0]] = function[1]


def _model(line: LogicalLine, keyword: str, sorter: _Sorter) -> None:
    words = line.text.split(None, 2)
    if len(words) < 2:
        sorter.fail(line.span(), "a model without a name", "write .model NAME TYPE(...)")
        return
    name = words[1].partition("(")[0].lower()
    first = sorter.current.models.setdefault(name, line)
    if first.text.lower().split() != line.text.lower().split():
        what = f"model '{words[1]}' is defined a second time; the first, at {first.span()}, is used"
        sorter.problems.append(note(line.span(), what, "delete or rename one of them"))


def _globals(line: LogicalLine, keyword: str, sorter: _Sorter) -> None:
    sorter.global_nets.update(word.lower() for word in line.text.split()[1:])


def _title(line: LogicalLine, keyword: str, sorter: _Sorter) -> None:
    sorter.title = line.text[len(keyword) :].strip() or sorter.title


def _include(line: LogicalLine, keyword: str, sorter: _Sorter) -> None:
    rest = line.text[len(keyword) :].strip()
    if not rest:
        sorter.fail(line.span(), f"{keyword} without a file", f"write {keyword} FILE")
        return
    path, section = _file_and_section(rest, keyword, Path(line.file))
    if path is None:
        what = f"included file '{clean_path(rest)}' is not there: what it defines is missing"
        remedy = "put it beside this file, or correct the path"
        sorter.fail(line.span(), what, remedy)
        return
    _read_included(path, section, line, sorter)


def _file_and_section(rest: str, keyword: str, includer: Path) -> tuple[Path | None, str]:
    """`.lib FILE SECTION` names a part of a library; a path may hold blanks without quotes."""
    path = resolve_path(clean_path(rest), includer)
    if path is not None and not (rest[0] in "\"'" and rest[-1] != rest[0]):
        return path, ""
    head, _, section = rest.rpartition(" ")
    if keyword == ".lib" and head:
        path = resolve_path(clean_path(head), includer)
        if path is not None:
            return path, section.strip()
    return resolve_path(clean_path(rest), includer), ""


def _read_included(path: Path, section: str, line: LogicalLine, sorter: _Sorter) -> None:
    mark = (_identity(path), section.lower())
    if mark in sorter.open_files:
        chain = " -> ".join(str(file.name) for file, _ in [*sorter.open_files, mark])
        sorter.fail(line.span(), f"the file includes itself ({chain})", "delete one of the cards")
        return
    if (sorter.current.span, *mark) in sorter.included:
        what = f"'{path}' is included a second time; it is read once"
        sorter.problems.append(note(line.span(), what, "delete one of the cards"))
        return
    source = read_text(path)
    if isinstance(source, Problem):
        sorter.fail(line.span(), source.what, source.remedy)
        return
    sorter.included.add((sorter.current.span, *mark))
    sorter.open_files.append(mark)
    _sort(source.file, split_lines(source, top=False), sorter, section)
    sorter.open_files.pop()


_HANDLERS: dict[str, Callable[[LogicalLine, str, _Sorter], None]] = {
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
    ".include": _include,
    ".incl": _include,
    ".inc": _include,
    ".lib": _include,
}
