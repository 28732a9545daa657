"""How many nets each element letter takes, and what they are called; the table writes the error."""

from rulecheck.values import Problem, Span, error
from rulecheck.values.record import Record


class Row(Record):
    """One letter: fewest and most nets, value or model or neither, and the names for people."""

    label: str
    least: int
    most: int
    value: str
    nets: str


ROWS = {
    "R": Row("a resistor", 2, 2, "number", "its two ends"),
    "C": Row("a capacitor", 2, 2, "number", "its two ends"),
    "L": Row("an inductor", 2, 2, "number", "its two ends"),
    "V": Row("a voltage source", 2, 2, "source", "plus and minus"),
    "I": Row("a current source", 2, 2, "source", "plus and minus"),
    "D": Row("a diode", 2, 2, "model", "anode and cathode"),
    "Q": Row("a bipolar transistor", 3, 8, "model", "collector, base and emitter"),
    "M": Row("a MOSFET", 3, 8, "model", "drain, gate, source and bulk"),
    "J": Row("a junction FET", 3, 3, "model", "drain, gate and source"),
    "Z": Row("an IGBT or MESFET", 3, 3, "model", "collector, gate and emitter"),
    "S": Row("a voltage-controlled switch", 4, 4, "model", "two ends and two controlling nets"),
    "W": Row("a current-controlled switch", 2, 2, "model", "its two ends"),
    "E": Row("a voltage-controlled voltage source", 2, 2, "gain", "plus and minus"),
    "G": Row("a voltage-controlled current source", 2, 2, "gain", "plus and minus"),
    "F": Row("a current-controlled current source", 2, 2, "gain", "plus and minus"),
    "H": Row("a current-controlled voltage source", 2, 2, "gain", "plus and minus"),
    "B": Row("a behavioural source", 2, 2, "expression", "plus and minus"),
    "T": Row("a transmission line", 4, 4, "parameters", "two at each end"),
    "O": Row("a lossy line", 4, 4, "model", "two at each end"),
    "U": Row("a distributed RC line", 3, 3, "model", "two ends and the reference"),
    "K": Row("a coupling", 0, 0, "coupling", "none: it names inductors"),
    "A": Row("a code model", 1, 999, "model", "as its model says"),
    "X": Row("an instance of a subcircuit", 1, 9999, "model", "as its subcircuit says"),
}


def terminal_error(letter: str, found: int, span: Span) -> Problem:
    """`a diode has 2 nets: anode and cathode; found 1`."""
    row = ROWS[letter]
    count = f"{row.least}" if row.least == row.most else f"{row.least} to {row.most}"
    nets = "net" if row.most == 1 else "nets"
    what = f"{row.label} has {count} {nets}: {row.nets}; found {found}"
    return error(span, what, _REMEDIES[row.value])


_REMEDIES = {
    "number": "write NAME NET NET VALUE",
    "source": "write NAME NET NET VALUE",
    "model": "write NAME, the nets, then the model",
    "gain": "write NAME NET NET, what controls it, then the gain",
    "expression": "write NAME NET NET V={...} or I={...}",
    "parameters": "write NAME, the nets, then the parameters",
    "coupling": "write NAME L1 L2 COEFFICIENT",
}
