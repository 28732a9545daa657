"""Cards, syntax, numbers, includes and subcircuits: text becomes one flat circuit."""

from rulecheck.netlist.circuit import GROUND, Circuit, Element, Model, Subcircuit, Waveform

__all__ = ["GROUND", "Circuit", "Element", "Model", "Subcircuit", "Waveform"]
