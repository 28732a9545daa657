"""What a deck defines at one level: cards, parameters, functions, models, subcircuits."""

from collections.abc import Mapping

from rulecheck.netlist.formula import Formula
from rulecheck.netlist.lines import LogicalLine
from rulecheck.values import Problem, Span
from rulecheck.values.record import Mutable, Record, field


class UserFunction(Record):
    """A `.func`: lower-case argument names and the body."""

    arguments: tuple[str, ...]
    body: Formula


class Definition(Mutable):
    """The top level or a subcircuit, filled while the deck is read; names in lower case."""

    name: str
    ports: tuple[str, ...]
    span: Span
    optional_ports: Mapping[str, str] = field(default_factory=dict)
    parameters: dict[str, Formula] = field(default_factory=dict)
    functions: dict[str, UserFunction] = field(default_factory=dict)
    models: dict[str, LogicalLine] = field(default_factory=dict)
    inner: "dict[str, Definition]" = field(default_factory=dict)
    cards: list[LogicalLine] = field(default_factory=list)


class Deck(Record):
    """All files of a netlist, read and sorted into definitions."""

    file: str
    title: str
    top: Definition
    global_nets: frozenset[str]
    """Lower case."""
    files: tuple[str, ...]
    """In the order in which they were opened."""
    problems: tuple[Problem, ...]
