"""Checks a power stage's netlist: what each switch position must do, and whether it can."""

__version__ = "0.1.0"
