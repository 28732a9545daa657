"""Cards, syntax, numbers, includes and subcircuits: text becomes one flat circuit."""

from rulecheck.netlist.access import ORDINARY, Access
from rulecheck.netlist.build import read_circuit, read_circuit_text
from rulecheck.netlist.canonical import circuit_text
from rulecheck.netlist.circuit import GROUND, Circuit, Element, Model, Subcircuit, Waveform

__all__ = [
    "GROUND",
    "ORDINARY",
    "Access",
    "Circuit",
    "Element",
    "Model",
    "Subcircuit",
    "Waveform",
    "circuit_text",
    "read_circuit",
    "read_circuit_text",
]
