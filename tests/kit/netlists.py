"""Netlists for tests: read a text, take one card apart, look at messages.

>>> one("R1 a b 4.7k").value
4700.0
"""

import textwrap

from rulecheck.netlist import Circuit, Element, read_circuit_text
from rulecheck.reading import SourceText
from rulecheck.values import Gravity

FILE = "hut.cir"


def circuit(text: str, title: str = "mountain hut") -> Circuit:
    """The circuit of the cards; a title line is put above them."""
    return read_circuit_text(SourceText(FILE, f"{title}\n{textwrap.dedent(text)}"))


def one(card: str, *others: str) -> Element:
    """The first element of a netlist that begins with this card."""
    return circuit("\n".join((card, *others))).elements[0]


def element(of: Circuit, name: str) -> Element:
    return next(found for found in of.elements if found.name == name)


def names(of: Circuit) -> list[str]:
    return [found.name for found in of.elements]


def errors(of: Circuit) -> list[str]:
    """Error messages as `line:column: what`."""
    return _messages(of, Gravity.ERROR)


def notes(of: Circuit) -> list[str]:
    return _messages(of, Gravity.NOTE)


def _messages(of: Circuit, gravity: Gravity) -> list[str]:
    return [
        f"{problem.span.line}:{problem.span.column}: {problem.what}"
        for problem in of.problems
        if problem.gravity is gravity
    ]
