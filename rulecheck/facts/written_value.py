"""What a passive part's value looks like as written: its unit, and letters that mislead.

C1 BUS 0 10uH     unit H, which does not fit a capacitor
R3 BUS 0 1M       M is milli in a netlist (Berkeley SPICE3f3 User's Manual, section 2.1)
C2 BUS 0 1F       F is femto there, not farad
"""

import re

from rulecheck.parts import Kind
from rulecheck.values.record import Record

_VALUE = re.compile(
    r"[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?"
    r"(?P<scale>meg|mil|[tgkmunpfµμ])?(?P<unit>ohms?|Ω|Ω|farads?|henrys?|volts?|amps?|[fhva])?\Z",
    re.IGNORECASE,
)
_UNITS = {
    "o": "ohm",
    "ω": "ohm",
    "f": "F",
    "h": "H",
    "v": "V",
    "a": "A",
}
_FITTING = {Kind.RESISTOR: "ohm", Kind.CAPACITOR: "F", Kind.INDUCTOR: "H"}


class WrittenValue(Record):
    unit: str
    """Empty where none is written."""
    fits: bool
    misleading: bool
    """`1M` of a resistor is a milliohm, `1F` of a capacitor a femtofarad."""


def written_value(kind: Kind, text: str) -> WrittenValue:
    """Take the first word of a value text apart; other texts have nothing to object to."""
    word = text.split()[0] if text.split() else ""
    match = _VALUE.match(word)
    fitting = _FITTING.get(kind)
    if match is None or fitting is None:
        return WrittenValue("", True, False)
    scale, unit = match["scale"] or "", match["unit"] or ""
    name = _UNITS.get(unit[:1].casefold(), "")
    milli = kind is Kind.RESISTOR and scale == "M"
    femto = kind is Kind.CAPACITOR and scale.casefold() == "f" and not unit
    return WrittenValue(name, not name or name == fitting, milli or femto)
