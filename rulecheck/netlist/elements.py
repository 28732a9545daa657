"""From an element card to its draft: the reader of its letter, or a board part."""

from collections.abc import Callable

from rulecheck.netlist.board import clashes, is_certain, read_board_part
from rulecheck.netlist.controlled import (
    read_behavioural,
    read_current_controlled,
    read_voltage_controlled,
)
from rulecheck.netlist.draft import Draft, Outcome, Reading
from rulecheck.netlist.passives import read_coupling, read_passive
from rulecheck.netlist.semiconductors import (
    read_current_switch,
    read_diode,
    read_instance,
    read_line,
    read_modelled,
    read_switch,
    read_transistor,
)
from rulecheck.netlist.sources import read_source
from rulecheck.values import Problem

READERS: dict[str, Callable[[str, Reading], Outcome]] = {
    "R": read_passive,
    "C": read_passive,
    "L": read_passive,
    "K": read_coupling,
    "V": read_source,
    "I": read_source,
    "D": read_diode,
    "Q": read_transistor,
    "M": read_transistor,
    "Z": read_transistor,
    "J": read_modelled,
    "O": read_modelled,
    "U": read_modelled,
    "A": read_modelled,
    "T": read_line,
    "S": read_switch,
    "W": read_current_switch,
    "E": read_voltage_controlled,
    "G": read_voltage_controlled,
    "F": read_current_controlled,
    "H": read_current_controlled,
    "B": read_behavioural,
    "X": read_instance,
}


def read_element(reading: Reading) -> Draft | Problem:
    """The draft of a card; a problem where its letter is sure and its fields are not."""
    letter = reading.name[:1].upper()
    reader = READERS.get(letter)
    if reader is None:
        return read_board_part(reading)
    clashing = clashes(reading.name)
    before = len(reading.notes)
    outcome = reader(letter, reading)
    if isinstance(outcome, Draft) and (not clashing or is_certain(outcome, reading)):
        return outcome
    if isinstance(outcome, Problem) and not clashing:
        return outcome
    del reading.notes[before:]
    return read_board_part(reading)
