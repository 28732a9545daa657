"""Read the kind of an element that no part data describes.

The model card decides; without one the board's designator, then a text that names a kind, then
the element letter of the published manual. What none of them settles is not understood.
"""

from collections.abc import Callable, Mapping

from rulecheck.netlist import Element
from rulecheck.parts.board import prefix_of, read_by_prefix, read_by_words
from rulecheck.parts.models import read_by_model
from rulecheck.parts.part import Kind
from rulecheck.parts.part_reading import PartReading, not_understood, read_as
from rulecheck.values import Unknown


def classify(element: Element) -> PartReading:
    """Kind, roles and assumptions from the card and its model alone."""
    if element.model is not None:
        return read_by_model(element, element.model)
    by_prefix = read_by_prefix(element)
    if by_prefix is not None:
        return by_prefix
    reader = LETTERS.get(element.letter, not_understood)
    return reader(element)


def _of_kind(kind: Kind) -> Callable[[Element], PartReading]:
    def read(element: Element) -> PartReading:
        return read_as(element, kind)

    return read


def _diode(element: Element) -> PartReading:
    by_words = read_by_words(element)
    if by_words is not None:
        return by_words
    lack = f"no data on '{element.text}'" if element.text else "no model"
    assumed = f"read with pins in the order anode cathode ({lack})"
    return read_as(element, Kind.DIODE, assumed)


def _transistor(element: Element) -> PartReading:
    return read_by_words(element) or not_understood(element)


def _insulated_gate(element: Element) -> PartReading:
    if len(element.nets) != 3:
        return not_understood(element)
    assumed = "read as an IGBT without diode: Z cards are, and no model says otherwise"
    return read_as(element, Kind.IGBT, assumed)


def _switch(element: Element) -> PartReading:
    if not element.text and len(element.nets) == 2:
        return read_as(element, Kind.IDEAL_SWITCH, "read as a switch with no gate of its own")
    return read_as(element, Kind.IDEAL_SWITCH, "read as an ideal switch; its model is missing")


def _controlled(kind: Kind) -> Callable[[Element], PartReading]:
    """A source that follows something else; without a controlling quantity it is none."""

    def read(element: Element) -> PartReading:
        plain = not element.controls and element.waveform is None and not element.parameters
        if plain and isinstance(element.value, Unknown):
            return not_understood(element)
        return PartReading(kind, ("plus", "minus"))

    return read


def _behavioural(element: Element) -> PartReading:
    """`B1 a b V=...` is a voltage, `I=...` a current."""
    written = element.waveform.text if element.waveform else element.text
    head = written.strip().partition("=")[0].strip().lower()
    kinds = {"v": Kind.VOLTAGE_SOURCE, "i": Kind.CURRENT_SOURCE}
    said = next((name for name in ("v", "i") if name in element.parameters), head)
    if said not in kinds:
        return not_understood(element)
    return read_as(element, kinds[said])


def _line(element: Element) -> PartReading:
    """A transmission line; a transformer of a board has no impedance and no delay."""
    if {"z0", "td", "f"} & set(element.parameters):
        return read_as(element, Kind.OTHER)
    return not_understood(element)


def _instance(element: Element) -> PartReading:
    """An X card that names no subcircuit is a board's connector."""
    if not element.text and prefix_of(element) == "X":
        return read_as(element, Kind.CONNECTOR)
    return not_understood(element)


LETTERS: Mapping[str, Callable[[Element], PartReading]] = {
    "R": _of_kind(Kind.RESISTOR),
    "C": _of_kind(Kind.CAPACITOR),
    "L": _of_kind(Kind.INDUCTOR),
    "V": _of_kind(Kind.VOLTAGE_SOURCE),
    "I": _of_kind(Kind.CURRENT_SOURCE),
    "E": _controlled(Kind.VOLTAGE_SOURCE),
    "H": _controlled(Kind.VOLTAGE_SOURCE),
    "G": _controlled(Kind.CURRENT_SOURCE),
    "F": _controlled(Kind.CURRENT_SOURCE),
    "B": _behavioural,
    "D": _diode,
    "Q": _transistor,
    "M": _transistor,
    "Z": _insulated_gate,
    "S": _switch,
    "T": _line,
    "O": _line,
    "A": _of_kind(Kind.OTHER),
    "X": _instance,
}
"""Element letters of the published SPICE manual; others are not understood."""
