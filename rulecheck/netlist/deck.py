"""Sort the cards of a deck and of the files that it includes into definitions."""

import os
import re
from pathlib import Path

from rulecheck.netlist.access import ORDINARY, Access
from rulecheck.netlist.definition import Deck, Definition
from rulecheck.netlist.dot_cards import HANDLERS, Handler
from rulecheck.netlist.foreign import name_foreign
from rulecheck.netlist.lines import Lines, LogicalLine, split_lines
from rulecheck.netlist.paths import Outside, clean_path, resolve_path
from rulecheck.netlist.sorter import Sorter
from rulecheck.reading import SourceText, read_text
from rulecheck.values import Problem, Span, raise_limit

_KEYWORD = re.compile(r"\.?[A-Za-z_0-9]*")
_SECTION = re.compile(r"\.lib\s+([^\s.\"'/\\]+)\s*\Z", re.IGNORECASE)
_SECTION_END = re.compile(r"\.endl\b", re.IGNORECASE)

# Cards that steer a simulation and say nothing of the circuit.
_ANALYSIS = frozenset({
    ".ac", ".backanno", ".dc", ".disto", ".end", ".endl", ".four", ".graph", ".ic", ".meas",
    ".measure", ".net", ".nodeset", ".noise", ".op", ".opt", ".option", ".options", ".plot",
    ".print", ".probe", ".pz", ".save", ".sens", ".step", ".temp", ".tf", ".tran", ".view",
    ".wave", ".width",
})  # fmt: skip
_CONDITIONS = frozenset({".if", ".elseif", ".else", ".endif"})


def read_deck(source: SourceText, access: Access = ORDINARY) -> Deck:
    """Read a top-level netlist and all that it includes."""
    top = Definition("", (), Span(source.file, 1))
    netlist = Path(source.file)
    sorter = Sorter(top, [top], access, access.folders_for(netlist))
    lines = split_lines(source, top=True, limits=access.limits)
    sorter.title = lines.title
    sorter.problems.extend(source.notes)
    sorter.characters = len(source.text)
    sorter.open_files.append((_identity(netlist), ""))
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
        return Path(os.path.realpath(path))
    except (OSError, ValueError):
        return path


def _sort(file: str, lines: Lines, sorter: Sorter, section: str = "") -> None:
    if file not in sorter.files:
        sorter.files.append(file)
    sorter.problems.extend(lines.problems)
    depth = len(sorter.stack)
    for line in _wanted(lines, section, sorter):
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


def _wanted(lines: Lines, section: str, sorter: Sorter) -> list[LogicalLine]:
    """Without the sections of a library that nobody asked for."""
    if not section and not any(_SECTION_END.match(card.text) for card in lines.cards):
        return list(lines.cards)
    kept: list[LogicalLine] = []
    seen: list[str] = []
    inside = ""
    for card in lines.cards:
        opened = None if inside else _SECTION.match(card.text)
        if opened:
            inside = opened[1].lower()
            seen.append(inside)
        elif _SECTION_END.match(card.text):
            inside = ""
        elif inside in ("", section.lower()):
            kept.append(card)
    _tell_of_sections(lines, section.lower(), seen, sorter)
    return kept


def _tell_of_sections(lines: Lines, section: str, seen: list[str], sorter: Sorter) -> None:
    if not lines.cards:
        return
    span = lines.cards[0].span()
    names = ", ".join(seen) or "none"
    if section and section not in seen:
        sorter.fail(span, f"the library has no section '{section}'", f"it has {names}")
    elif not section:
        sorter.remark(span, f"sections {names} are not asked for, and are skipped")


def _dot_card(line: LogicalLine, sorter: Sorter) -> None:
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
        sorter.remark(line.span(), what)


def _include(line: LogicalLine, keyword: str, sorter: Sorter) -> None:
    rest = line.text[len(keyword) :].strip()
    if not rest:
        sorter.fail(line.span(), f"{keyword} without a file", f"write {keyword} FILE")
        return
    path, section = _file_and_section(rest, keyword, line, sorter)
    if isinstance(path, Outside):
        what = f"included file '{path.path}' is not in the netlist's folder, and is not read"
        sorter.fail(line.span(), what, "allow its folder with --include-dir FOLDER")
    elif path is None:
        what = f"included file '{clean_path(rest)}' is not there: what it defines is missing"
        remedy = "put it beside this file, or correct the path"
        sorter.fail(line.span(), what, remedy)
    else:
        _read_included(path, section, line, sorter)


def _file_and_section(
    rest: str, keyword: str, line: LogicalLine, sorter: Sorter
) -> tuple[Path | Outside | None, str]:
    """`.lib FILE SECTION` names a part of a library; a path may hold blanks without quotes."""
    includer = Path(line.file)
    path = resolve_path(clean_path(rest), includer, sorter.folders)
    if isinstance(path, Path) and not (rest[0] in "\"'" and rest[-1] != rest[0]):
        return path, ""
    head, _, section = rest.rpartition(" ")
    if keyword == ".lib" and head:
        named = resolve_path(clean_path(head), includer, sorter.folders)
        if named is not None:
            return named, section.strip()
    return path, ""


def _read_included(path: Path, section: str, line: LogicalLine, sorter: Sorter) -> None:
    mark = (_identity(path), section.lower())
    if mark in sorter.open_files:
        chain = " -> ".join(str(file.name) for file, _ in [*sorter.open_files, mark])
        sorter.fail(line.span(), f"the file includes itself ({chain})", "delete one of the cards")
        return
    if (sorter.current.span, *mark) in sorter.included:
        what = f"'{path}' is included a second time; it is read once"
        sorter.remark(line.span(), what, "delete one of the cards")
        return
    source = _source(path, line, sorter)
    if source is None:
        return
    sorter.included.add((sorter.current.span, *mark))
    sorter.characters += len(source.text)
    sorter.problems.extend(source.notes)
    sorter.open_files.append(mark)
    _sort(source.file, split_lines(source, top=False, limits=sorter.access.limits), sorter, section)
    sorter.open_files.pop()


def _source(path: Path, line: LogicalLine, sorter: Sorter) -> SourceText | None:
    """The file's text, or None, and why not, where it is none or one too many."""
    beyond = _beyond(sorter)
    if beyond is not None:
        what, limit = beyond
        sorter.fail(line.span(), f"included file '{path}' is not read: {what}", raise_limit(limit))
        return None
    source = read_text(path, sorter.access.limits)
    if isinstance(source, Problem):
        sorter.fail(line.span(), f"included file '{path}': {source.what}", source.remedy)
        return None
    foreign = name_foreign(source)
    if foreign is not None:
        what = f"included file '{path}': {foreign.what}"
        sorter.fail(line.span(), what, "include a file of netlist cards")
        return None
    return source


def _beyond(sorter: Sorter) -> tuple[str, str] | None:
    """Which limit the next included file would break, in words and by name."""
    limits = sorter.access.limits
    if len(sorter.open_files) > limits["include-depth"]:
        return f"{limits['include-depth']} files include each other already", "include-depth"
    if len(sorter.included) >= limits["includes"]:
        return f"{limits['includes']} files are included already", "includes"
    if sorter.characters > limits["file-bytes"]:
        return f"the files have {limits['file-bytes']} bytes already", "file-bytes"
    return None


_HANDLERS: dict[str, Handler] = {
    **HANDLERS,
    ".include": _include,
    ".incl": _include,
    ".inc": _include,
    ".lib": _include,
}
