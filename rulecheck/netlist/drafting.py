"""Read the cards of one definition, once, however many instances it has."""

from collections.abc import Iterable, Iterator

from rulecheck.netlist.draft import Draft, Reading
from rulecheck.netlist.elements import read_element
from rulecheck.netlist.lines import LogicalLine
from rulecheck.netlist.models import model_is_known
from rulecheck.netlist.numbers import beyond_numbers
from rulecheck.netlist.scope import Scope, has_parameter
from rulecheck.netlist.syntax import WORD, Card, read_card
from rulecheck.values import Problem, Span, error
from rulecheck.values.record import Record

_VALUED = "RCLKVIEFGH"
"""Letters of elements whose text, where it is no number, is not the name of a model."""


class Drafts(Record):
    """What could be read of one definition, the names of what could not, and why."""

    drafts: tuple[Draft, ...]
    unread: tuple[str, ...]
    problems: tuple[Problem, ...]


def read_drafts(scope: Scope) -> Drafts:
    """All element cards of a scope's definition; the names of unreadable ones are kept."""
    nets = _certain_nets(scope.definition.cards)
    drafts: list[Draft] = []
    unread: list[str] = []
    problems: list[Problem] = []
    first: dict[str, Span] = {}
    for line in scope.definition.cards:
        outcome = _read(line, scope, nets, problems)
        if isinstance(outcome, Problem):
            problems.append(outcome)
            unread.append(_name(line))
            continue
        earlier = first.setdefault(outcome.name.lower(), outcome.span)
        if earlier is not outcome.span:
            what = f"element '{outcome.name}' stands here a second time; the first is at {earlier}"
            remedy = "rename one of them: only the first is in the analysis"
            problems.append(error(outcome.span, what, remedy))
            unread.append(outcome.name)
            continue
        problems.extend(_beyond_numbers(outcome, line))
        drafts.append(outcome)
    return Drafts(tuple(drafts), tuple(unread), tuple(problems))


def _beyond_numbers(draft: Draft, line: LogicalLine) -> Iterator[Problem]:
    """Values and parameters of which no finite number has the value that is written."""
    valued = draft.value is None and draft.letter in _VALUED
    written = draft.text.split() if valued else []
    written += [value for _, value in draft.parameters if isinstance(value, str)]
    for text in written:
        if beyond_numbers(text):
            span = line.span(max(line.text.rfind(text), 0))
            what = f"'{text}' is beyond what a number can hold"
            yield error(span, what, "write the number that is meant")


def _certain_nets(cards: Iterable[LogicalLine]) -> frozenset[str]:
    """Words first or second behind a name, and not last: nets, whatever the letter."""
    nets: set[str] = {"0"}
    for line in cards:
        words = [] if line.text[0] in "kK" else line.text.split(None, 3)[1:]
        nets.update(word.strip("(),").lower() for word in words[: min(2, len(words) - 1)])
    return frozenset(nets)


def _name(line: LogicalLine) -> str:
    return line.text.split(None, 1)[0]


def _read(
    line: LogicalLine, scope: Scope, nets: frozenset[str], problems: list[Problem]
) -> Draft | Problem:
    card = read_card(line)
    if isinstance(card, Problem):
        return card
    problems.extend(card.notes)
    if not card.items or card.items[0].kind != WORD:
        what = "a card begins with the name of its element"
        return error(line.span(), what, "write NAME NET NET VALUE, or '*' before a comment")
    reading = _reading(card, scope, nets)
    outcome = read_element(reading)
    problems.extend(reading.notes)
    return outcome


def _reading(card: Card, scope: Scope, nets: frozenset[str]) -> Reading:
    return Reading(
        card,
        card.items[0].text,
        is_model=lambda word: model_is_known(word, scope),
        is_subcircuit=lambda word: scope.definition_of(word.lower()) is not None,
        is_parameter=lambda word: has_parameter(word.lower(), scope),
        is_net=lambda word: word.lower() in nets,
    )
