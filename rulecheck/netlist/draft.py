"""An element card taken apart, before parameters are computed and instances expanded."""

from collections.abc import Callable

from rulecheck.netlist.formula import Formula
from rulecheck.netlist.syntax import Card, Item
from rulecheck.values import Problem, Span, note
from rulecheck.values.record import Mutable, Record, field

Amount = float | Formula | None
"""A number, an expression still to be computed, or nothing that can be."""


class DraftWave(Record):
    """A waveform; `relative` are the positions of times counted from the one before."""

    kind: str
    amounts: tuple[Amount, ...]
    text: str
    relative: frozenset[int] = frozenset()
    repeats_from: Amount = None
    delay: Amount = None
    """Of a piecewise one: added to all of its times."""


class Draft(Record):
    """The fields of `Element` as the card has them, names and nets not yet in their instance."""

    name: str
    letter: str
    span: Span
    nets: tuple[str, ...]
    text: str = ""
    value: Amount = None
    parameters: tuple[tuple[str, Amount | str], ...] = ()
    model: str = ""
    waveform: DraftWave | None = None
    controls: tuple[str, ...] = ()
    controlled_by_nets: bool = False
    subcircuit: str = ""
    overrides: tuple[tuple[str, Formula], ...] = ()
    value_may_fail: bool = False
    """A behavioural expression: that it has no constant value is no mistake."""


class Reading(Mutable):
    """One card while it is read, and what its surroundings know."""

    card: Card
    name: str
    is_model: Callable[[str], bool]
    is_subcircuit: Callable[[str], bool]
    is_parameter: Callable[[str], bool]
    is_net: Callable[[str], bool]
    """Whether a word is certainly a net elsewhere at this level."""
    notes: list[Problem] = field(default_factory=list)

    @property
    def text(self) -> str:
        return self.card.line.text

    @property
    def span(self) -> Span:
        return self.card.line.span()

    def remark(self, item: Item, what: str, remedy: str = "") -> None:
        self.notes.append(note(self.card.span(item), what, remedy))


Outcome = Draft | Problem | None
"""None where the card does not fit its letter, though it may well be something else."""
