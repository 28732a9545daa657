"""What is collected while the files of one deck are sorted."""

from pathlib import Path

from rulecheck.netlist.access import Access
from rulecheck.netlist.definition import Definition
from rulecheck.netlist.lines import LogicalLine
from rulecheck.netlist.syntax import Card, Item, read_card
from rulecheck.values import Problem, Span, error, note
from rulecheck.values.record import Mutable, field


class Sorter(Mutable):
    """What is collected while the files of one deck are read."""

    top: Definition
    stack: list[Definition]
    access: Access
    folders: tuple[Path, ...]
    """From which files may be included."""
    title: str = ""
    global_nets: set[str] = field(default_factory=set)
    problems: list[Problem] = field(default_factory=list)
    files: list[str] = field(default_factory=list)
    open_files: list[tuple[Path, str]] = field(default_factory=list)
    included: set[tuple[Span, Path, str]] = field(default_factory=set)
    characters: int = 0
    """Of all files so far, each as often as it was read."""
    kinds_noted: set[str] = field(default_factory=set)

    @property
    def current(self) -> Definition:
        return self.stack[-1]

    def fail(self, span: Span, what: str, remedy: str) -> None:
        self.problems.append(error(span, what, remedy))

    def remark(self, span: Span, what: str, remedy: str = "") -> None:
        self.problems.append(note(span, what, remedy))

    def parsed(self, line: LogicalLine) -> tuple[Card, list[Item]]:
        """The card, and its items behind the keyword; without items where it cannot be parsed."""
        card = read_card(line)
        if isinstance(card, Problem):
            self.problems.append(card)
            return Card(line, ()), []
        self.problems.extend(card.notes)
        return card, list(card.items[1:])
