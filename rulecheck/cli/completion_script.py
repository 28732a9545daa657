"""The completion script of a shell, generated from the command line's own parser."""

import argparse

import shtab

from rulecheck.cli.arguments import command_parser
from rulecheck.cli.entry import COMMANDS
from rulecheck.cli.manual import manual
from rulecheck.cli.packs import load_rulebook
from rulecheck.rulebook import IN_FORCE, PROFILES, Rulebook

_FOLDERS = ("DIR",)
_FILES = ("FILE", "NETLIST", "NETLIST [NAME]")


def completion_script(shell: str) -> str:
    """The script for `bash`, `zsh` or `fish`: commands, options, words, files and folders."""
    parser = command_parser()
    words = _words()
    for name in COMMANDS:
        for action in parser.of_command(name)._actions:
            _complete(action, words.get((name, action.dest)))
    return str(shtab.complete(parser, shell=shell)).rstrip() + "\n"


def _complete(action: argparse.Action, words: tuple[str, ...] | None) -> None:
    if words is not None:
        action.choices = words
    elif action.metavar in _FOLDERS:
        action.complete = shtab.DIRECTORY  # type: ignore[attr-defined]
    elif action.metavar in _FILES:
        action.complete = shtab.FILE  # type: ignore[attr-defined]


def _words() -> dict[tuple[str, str], tuple[str, ...]]:
    """By command and argument: the words that it may be, as the shipped packs have them."""
    rulebook = load_rulebook(())
    if not isinstance(rulebook, Rulebook):
        return {}
    rules = tuple(rule.id for rule in rulebook.rules)
    pages = dict.fromkeys(found_by[0] for _, found_by, _ in manual(rulebook))
    packs = (*IN_FORCE, *PROFILES)
    return {
        ("rules", "names"): rules,
        ("help", "names"): (*COMMANDS, *pages),
        **{(name, "rules"): packs for name in COMMANDS},
    }
