"""Kinds by the type of an element's model card.

D1 a k FAST      .model FAST D(bv=600)        diode
M1 d g s s FET   .model FET VDMOS(pchan)      p-MOSFET
Q1 c b e T       .model T PNP                 bipolar transistor, current from E to C
"""

import re
from collections.abc import Mapping

from rulecheck.netlist import Element, Model
from rulecheck.parts.edges import BODY_DIODE, POLARITY
from rulecheck.parts.part import Kind
from rulecheck.parts.part_reading import PartReading, not_understood, read_as
from rulecheck.parts.roles import Roles

MODEL_KINDS: Mapping[str, Mapping[str, Kind]] = {
    "D": {"D": Kind.DIODE},
    "Q": {
        **dict.fromkeys(("NPN", "PNP", "LPNP"), Kind.BJT),
        **dict.fromkeys(("NIGBT", "IGBT"), Kind.IGBT),
    },
    "M": {"NMOS": Kind.MOSFET, "PMOS": Kind.P_MOSFET, "VDMOS": Kind.MOSFET},
    "Z": {
        **dict.fromkeys(("NIGBT", "IGBT"), Kind.IGBT),
        **dict.fromkeys(("NMF", "PMF"), Kind.OTHER),
    },
    "S": dict.fromkeys(("SW", "VSWITCH"), Kind.IDEAL_SWITCH),
    "W": dict.fromkeys(("CSW", "ISWITCH"), Kind.IDEAL_SWITCH),
    "J": dict.fromkeys(("NJF", "PJF", "NMF", "PMF"), Kind.OTHER),
    "R": dict.fromkeys(("RES", "R"), Kind.RESISTOR),
    "C": dict.fromkeys(("CAP", "C"), Kind.CAPACITOR),
    "L": dict.fromkeys(("IND", "L", "CORE"), Kind.INDUCTOR),
    "O": {"LTRA": Kind.OTHER},
    "U": {"URC": Kind.OTHER},
    "Y": {"TXL": Kind.OTHER},
    "P": {"CPL": Kind.OTHER},
}
"""By element letter, then by model type."""

CLAMP_VOLTAGE = 60.0
"""Volts; a diode with a lower breakdown and a name that hints at it is read as a zener diode."""
_SAYS_CLAMP = re.compile(r"ZENER|TVS")
_HINTS_CLAMP = re.compile(r"(?:^|[^A-Z])D?ZD?\d|^Z|_Z|-Z")


def read_by_model(element: Element, model: Model) -> PartReading:
    """The kind from letter and model type; not understood where the two do not go together."""
    kind = MODEL_KINDS.get(element.letter, {}).get(model.type)
    if kind is None:
        return not_understood(element)
    if is_p_channel(model):
        kind = Kind.P_MOSFET
    if kind is Kind.DIODE and _is_clamp(element, model):
        return read_as(element, Kind.ZENER, f"read as a zener diode ({model.name})")
    if model.type in ("PNP", "LPNP"):
        return read_as(element, kind, facts={POLARITY: "pnp"})
    if model.type in ("NMOS", "PMOS"):
        return _with_bulk(element, kind)
    return read_as(element, kind)


def is_p_channel(model: Model) -> bool:
    """A vertical MOSFET's model says so by a bare word among its parameters."""
    return model.type == "PMOS" or (model.type == "VDMOS" and "pchan" in model.parameters)


def _is_clamp(element: Element, model: Model) -> bool:
    """By name, or by a hint in it and a breakdown too low for the rating of a rectifier."""
    breakdown = model.parameters.get("bv")
    names = (model.name.upper(), element.name.rpartition(".")[2].upper())
    if any(_SAYS_CLAMP.search(name) for name in names):
        return True
    low = isinstance(breakdown, float | int) and 0.0 < breakdown < CLAMP_VOLTAGE
    return low and any(_HINTS_CLAMP.search(name) for name in names)


def _with_bulk(element: Element, kind: Kind) -> PartReading:
    """The body diode lies between bulk and drain; it bridges the channel only from the source."""
    nets = element.nets
    if len(nets) < 4 or nets[3] == nets[2]:
        return read_as(element, kind)
    assumed = f"with bulk on {nets[3]}, not the source: read with no diode along the channel"
    return read_as(element, kind, assumed, {BODY_DIODE: "none"})


def read_as_stated(element: Element, kind: Kind, roles: Roles) -> PartReading:
    """A part that part data describes, with what only its card or model can tell of it."""
    if kind is Kind.BJT:
        return _with_polarity(element, roles)
    nets = dict(zip(roles, element.nets, strict=False))
    assumed = ""
    if "body" in nets and "source" in nets and nets["body"] != nets["source"]:
        assumed = f"with bulk on {nets['body']}: read with the body diode of part data's {kind}"
    return PartReading(kind, roles, assumed=assumed)


def _with_polarity(element: Element, roles: Roles) -> PartReading:
    said = element.model.type if element.model is not None else element.text.upper()
    if "PNP" in said:
        return PartReading(Kind.BJT, roles, {POLARITY: "pnp"})
    assumed = "" if "NPN" in said else "read as an NPN transistor"
    return PartReading(Kind.BJT, roles, assumed=assumed)
