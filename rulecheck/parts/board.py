"""Elements of board exports, which have no model: what their names and texts tell.

TP4 SW                     a test point
F1 BAT BUS 125A fast       a fuse of 125 A
Q7 G D S NMOS-GDS          an n-MOSFET, its pins in the order that its text states
U3 ... HUT-CTRL-1          not understood: part data must say
"""

import re
from collections.abc import Callable, Mapping

from rulecheck.netlist import Element
from rulecheck.parts.edges import POLARITY
from rulecheck.parts.part import Kind
from rulecheck.parts.part_reading import PartReading, not_understood, read_as
from rulecheck.parts.roles import PINOUTS, role_of
from rulecheck.values import Dimension, Quantity, Unknown, read_quantity
from rulecheck.values.record import replace

_VALUE = re.compile(r"\d[\d.,]*[A-Za-zµΩ]+")
Maker = Callable[[Element], PartReading]


def prefix_of(element: Element) -> str:
    """The letters before the number of the element's own name: `TP` of `X1.TP4`."""
    local = element.name.rpartition(".")[2].partition("§")[0]
    match = re.match(r"[A-Za-z]+", local)
    return match[0].upper() if match else ""


def read_by_prefix(element: Element) -> PartReading | None:
    """What a board's designator says of an element without a model; None where it says nothing."""
    if element.model is not None or element.controls or element.waveform is not None:
        return None
    if element.letter in "RCLVI" and not isinstance(element.value, Unknown):
        return None
    maker = PREFIXES.get(prefix_of(element))
    return maker(_with_whole_text(element)) if maker else None


def _with_whole_text(element: Element) -> Element:
    """`F1 BAT BUS 125A fast`: a value behind two nets begins the text; it is no third net."""
    if len(element.nets) < 3 or not _VALUE.fullmatch(element.nets[2]):
        return element
    text = " ".join((*element.nets[2:], element.text)).strip()
    return replace(element, nets=element.nets[:2], text=text)


def read_by_words(element: Element) -> PartReading | None:
    """Kind and pin order from a text such as `NMOS-GDS`; None where it names no kind."""
    words = re.findall(r"[A-Z]+", element.text.upper())
    named = next((word for word in words if word in KIND_WORDS), None)
    if named is None:
        return None
    kind, facts = KIND_WORDS[named]
    roles = next((r for r in (_order(word, kind) for word in words) if r is not None), None)
    if roles is not None and len(roles) != len(element.nets):
        return not_understood(element)
    order = f"the order {' '.join(roles)}" if roles else "device order"
    assumed = f"read as {kind.called} with its pins in {order}, from the text '{element.text}'"
    return read_as(element, kind, assumed, facts, roles)


def _order(word: str, kind: Kind) -> tuple[str, ...] | None:
    roles = tuple(role_of(letter, kind) for letter in word)
    return roles if sorted(roles) == sorted(PINOUTS[kind].needed) else None


KIND_WORDS: Mapping[str, tuple[Kind, Mapping[str, str]]] = {
    **dict.fromkeys(("NMOS", "NFET", "NMOSFET"), (Kind.MOSFET, {})),
    **dict.fromkeys(("PMOS", "PFET", "PMOSFET"), (Kind.P_MOSFET, {})),
    "NPN": (Kind.BJT, {}),
    "PNP": (Kind.BJT, {POLARITY: "pnp"}),
    "SCR": (Kind.THYRISTOR, {}),
    "THYRISTOR": (Kind.THYRISTOR, {}),
    "TRIAC": (Kind.TRIAC, {}),
    "ZENER": (Kind.ZENER, {}),
    "TVS": (Kind.ZENER, {}),
    "DIODE": (Kind.DIODE, {}),
    "SCHOTTKY": (Kind.DIODE, {}),
    "LED": (Kind.DIODE, {}),
}


def _mechanical(element: Element) -> PartReading:
    return PartReading(Kind.OTHER, _numbers(element), assumed="read as carrying no power current")


def _connector(element: Element) -> PartReading:
    return PartReading(Kind.CONNECTOR, _numbers(element))


def _clamp(element: Element) -> PartReading:
    return PartReading(
        Kind.OTHER,
        _numbers(element),
        assumed="read as a surge clamp that idles in normal operation",
    )


def _varistor(element: Element) -> PartReading:
    if len(element.nets) != 2:
        return _clamp(element)
    return read_as(element, Kind.VARISTOR, "read as a surge clamp that idles in normal operation")


def _breaker(element: Element) -> PartReading:
    return read_as(element, Kind.CIRCUIT_BREAKER, "read as a closed circuit breaker")


def _ntc(element: Element) -> PartReading:
    return read_as(element, Kind.NTC, "read as a temperature-dependent resistor")


def _diode(element: Element) -> PartReading:
    return read_as(element, Kind.DIODE, "read as a diode with its pins in the order anode cathode")


def _zener(element: Element) -> PartReading:
    return read_as(
        element, Kind.ZENER, "read as a zener diode with its pins in the order anode cathode"
    )


def _thermistor(element: Element) -> PartReading:
    return read_as(element, Kind.RESISTOR, "read as a temperature-dependent resistor")


def _bead(element: Element) -> PartReading:
    """A ferrite bead is a wire to everything slower than an edge."""
    if len(element.nets) != 2:
        return not_understood(element)
    assumed = "read as a ferrite bead: no resistance to power current"
    return PartReading(Kind.RESISTOR, ("plus", "minus"), assumed=assumed, value=0.0)


def _battery(element: Element) -> PartReading:
    return read_as(element, Kind.VOLTAGE_SOURCE, "read as a battery")


def _switch(element: Element) -> PartReading:
    return read_as(element, Kind.IDEAL_SWITCH, "read as a switch with no gate of its own")


def _fuse(element: Element) -> PartReading:
    if len(element.nets) != 2:
        return not_understood(element)
    rating = _current_in(element)
    if rating is None:
        return read_as(element, Kind.FUSE, "read as a fuse")
    assumed = f"read as a fuse of {rating:g} A"
    return PartReading(
        Kind.FUSE, ("plus", "minus"), assumed=assumed, figures={"ratings.current": rating}
    )


def _current_in(element: Element) -> float | None:
    for word in re.findall(r"[\d.,]+\s*[munkµ]?A\b", element.text):
        quantity = read_quantity(word)
        if isinstance(quantity, Quantity) and quantity.dimension is Dimension.CURRENT:
            return quantity.value
    return None


def _numbers(element: Element) -> tuple[str, ...]:
    return tuple(str(number) for number in range(1, len(element.nets) + 1))


PREFIXES: Mapping[str, Maker] = {
    **dict.fromkeys(("TP", "MH", "MP", "MTG", "H", "HS", "FID", "LOGO", "ANT"), _mechanical),
    **dict.fromkeys(("Y", "XTAL"), _mechanical),
    **dict.fromkeys(("J", "P", "JP", "CN", "CON", "CONN", "HDR", "ICSP"), _connector),
    **dict.fromkeys(("F", "FU", "FS", "FUSE"), _fuse),
    **dict.fromkeys(("RV", "VDR", "VAR", "MOV"), _varistor),
    **dict.fromkeys(("TVS", "GDT"), _clamp),
    **dict.fromkeys(("PTC", "RT", "TH"), _thermistor),
    **dict.fromkeys(("CB", "QF"), _breaker),
    "NTC": _ntc,
    **dict.fromkeys(("BT", "BAT"), _battery),
    **dict.fromkeys(("CR", "BR", "RL", "RLY", "IC"), not_understood),
    "FB": _bead,
    "LED": _diode,
    "ZD": _zener,
    "SW": _switch,
}
"""Designators of boards (IEEE 315 and common practice) that clash with element letters."""
