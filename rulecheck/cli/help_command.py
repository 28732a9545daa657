"""`rulecheck help WORD`: the page on a command, a rule, a fact, a parameter or a key of a file."""

import difflib

from rulecheck.cli.analysing import finish
from rulecheck.cli.arguments import command_parser
from rulecheck.cli.complaints import complain, refuse
from rulecheck.cli.entry import COMMANDS
from rulecheck.cli.manual import Entry, manual
from rulecheck.cli.output import Document
from rulecheck.cli.packs import load_rulebook
from rulecheck.cli.project import find_project
from rulecheck.cli.renderers import look_at, rendered
from rulecheck.cli.request import Request
from rulecheck.report.manual_page import ManualPage, render
from rulecheck.rulebook import Rulebook
from rulecheck.values import errors_of


def run(request: Request) -> int:
    """Print every page on the word, or the list of all words where none is asked for."""
    word = "-".join(request.names).lower().replace("_", "-")
    if word in COMMANDS:
        text = command_parser().of_command(word).format_help()
        return _finish([Document(text, output.file) for output in request.outputs])
    project = find_project(request.project, request.limits)
    if errors_of(project.problems):
        return complain(project.problems, request.limits)
    rulebook = load_rulebook((*project.packs, *request.rules), limits=request.limits)
    if not isinstance(rulebook, Rulebook):
        return complain(rulebook, request.limits)
    entries = manual(rulebook)
    pages = _pages(word, entries) if word else (_contents(entries),)
    if not pages:
        return refuse(f"no page is called '{word}'", _guess(word, entries))
    return _finish(
        [
            Document(rendered(pages, render, look_at(request, output.file)), output.file, True)
            for output in request.outputs
        ]
    )


def _finish(documents: list[Document]) -> int:
    return finish(documents, (), ())


def _pages(word: str, entries: tuple[Entry, ...]) -> tuple[ManualPage, ...]:
    return tuple(page for _, found_by, page in entries if word in map(str.lower, found_by))


def _contents(entries: tuple[Entry, ...]) -> ManualPage:
    groups: dict[str, dict[str, None]] = {"commands": dict.fromkeys(COMMANDS)}
    for group, found_by, _ in entries:
        groups.setdefault(group, {})[found_by[0]] = None
    rows = tuple((group, ", ".join(words)) for group, words in groups.items())
    return ManualPage("rulecheck help WORD", "each of these words has a page", rows)


def _guess(word: str, entries: tuple[Entry, ...]) -> str:
    known = {name.lower(): name for _, found_by, _ in entries for name in found_by}
    close = difflib.get_close_matches(word, [*known, *COMMANDS], 3)
    guesses = " or ".join(f"'{known.get(name, name)}'" for name in close)
    return f"did you mean {guesses}?" if close else "`rulecheck help` lists all words"
