"""Read a netlist: files, lines, cards, definitions, then one flat circuit."""

import re
from collections.abc import Iterable
from pathlib import Path

from rulecheck.netlist.access import ORDINARY, Access
from rulecheck.netlist.board import UNTOLD
from rulecheck.netlist.circuit import GROUND, Circuit, Element
from rulecheck.netlist.deck import read_deck
from rulecheck.netlist.definition import Deck
from rulecheck.netlist.flatten import Flattening, flatten
from rulecheck.netlist.foreign import name_foreign
from rulecheck.reading import SourceText, read_text
from rulecheck.values import Problem, Span, error, errors_of, natural_key

_GROUND_NAME = re.compile(
    r"[A-Z]{0,4}[-_]?(?:GND|GROUND|EARTH)(?:[-_]?[A-Z0-9]{0,6})?|0V|VSS", re.I
)


def read_circuit(path: Path, access: Access = ORDINARY) -> Circuit:
    """Read a netlist and all files that it includes; mistakes are in `problems`, never raised."""
    source = read_text(path, access.limits)
    if isinstance(source, Problem):
        return _nothing(str(path), source)
    return read_circuit_text(source, access)


def read_circuit_text(source: SourceText, access: Access = ORDINARY) -> Circuit:
    """Read a netlist from text; includes are looked for beside `source.file`."""
    foreign = name_foreign(source)
    if foreign is not None:
        return _nothing(source.file, foreign)
    deck = read_deck(source, access)
    flat = flatten(deck, access.limits)
    problems = [*deck.problems, *flat.problems]
    if not errors_of(tuple(problems)) and all(one.letter == UNTOLD for one in flat.elements):
        problems.append(_no_element(deck, bool(flat.elements)))
    return Circuit(
        deck.file,
        deck.title,
        tuple(flat.elements),
        dict(sorted(flat.subcircuits.items())),
        _grounds(flat.elements),
        _unread(flat),
        _in_order(problems, deck.files),
        deck.files,
    )


def _nothing(file: str, problem: Problem) -> Circuit:
    return Circuit(file, "", (), {}, (), (), (problem,))


def _no_element(deck: Deck, any_card: bool) -> Problem:
    what = "the netlist has a title and no element"
    if any_card:
        what = "no card is an element that a netlist has; this may be another kind of file"
    elif deck.top.inner or deck.top.models:
        what = "the file defines subcircuits or models and has no element of its own"
    return error(Span(deck.file, 1), what, "export the circuit, not only its frame or library")


def _grounds(elements: Iterable[Element]) -> tuple[str, ...]:
    """Top-level nets, other than 0, that are called like a ground."""
    nets = {net for element in elements if not element.instance for net in element.nets}
    found = (
        net
        for net in nets
        if net != GROUND and _GROUND_NAME.fullmatch(net.rpartition("/")[2].rstrip("!"))
    )
    return tuple(sorted(found, key=lambda net: (natural_key(net), net)))


def _unread(flat: Flattening) -> tuple[str, ...]:
    return tuple(sorted(dict.fromkeys(flat.unread), key=lambda name: (natural_key(name), name)))


def _in_order(problems: Iterable[Problem], files: tuple[str, ...]) -> tuple[Problem, ...]:
    """Each problem once, in the order of the files, then of the lines."""
    rank = {file: position for position, file in enumerate(files)}
    once = dict.fromkeys(problems)
    return tuple(sorted(once, key=lambda p: (rank.get(p.span.file, len(rank)), p.span, p.what)))
