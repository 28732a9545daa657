"""Pins by role: which roles a kind has, in which order, and in which spellings.

M1 BUS G SW SW FET       drain BUS, gate G, source SW, body SW
.subckt SW-N100 D G S    the same roles, from the names of the ports
"""

from collections.abc import Iterable, Mapping, Sequence

from rulecheck.parts.part import Kind
from rulecheck.values.record import Record

Roles = tuple[str, ...]


class Pinout(Record):
    """The roles of a kind in device order; those behind `needed` may be left out."""

    needed: Roles
    optional: Roles = ()


_FIELD = Pinout(("drain", "gate", "source"), ("kelvin", "body"))
_INSULATED = Pinout(("collector", "gate", "emitter"), ("kelvin",))
_GATED = Pinout(("anode", "gate", "cathode"), ("kelvin",))
_DIODE = Pinout(("anode", "cathode"))
_TWO = Pinout(("plus", "minus"))

PINOUTS: Mapping[Kind, Pinout] = {
    Kind.DIODE: _DIODE,
    Kind.ZENER: _DIODE,
    Kind.THYRISTOR: _GATED,
    Kind.TRIAC: _GATED,
    Kind.BJT: Pinout(("collector", "base", "emitter"), ("substrate",)),
    Kind.MOSFET: _FIELD,
    Kind.P_MOSFET: _FIELD,
    Kind.GAN_HEMT: _FIELD,
    Kind.IGBT: _INSULATED,
    Kind.IGBT_WITH_DIODE: _INSULATED,
    Kind.REVERSE_BLOCKING_IGBT: _INSULATED,
    Kind.IDEAL_SWITCH: Pinout(("plus", "minus"), ("control-plus", "control-minus")),
    Kind.RESISTOR: _TWO,
    Kind.CAPACITOR: _TWO,
    Kind.INDUCTOR: _TWO,
    Kind.VOLTAGE_SOURCE: _TWO,
    Kind.CURRENT_SOURCE: _TWO,
    Kind.FUSE: _TWO,
    Kind.CIRCUIT_BREAKER: _TWO,
    Kind.NTC: _TWO,
    Kind.VARISTOR: _TWO,
    Kind.RELAY: Pinout(("common", "normally-open"), ("coil-plus", "coil-minus", "normally-closed")),
    Kind.COMMON_MODE_CHOKE: Pinout(("in-1", "out-1", "in-2", "out-2"), ("in-3", "out-3")),
    Kind.CURRENT_TRANSFORMER: Pinout(
        ("primary-in", "primary-out", "secondary-1", "secondary-2"), ()
    ),
}
"""Kinds with fixed roles; all other kinds' pins are named by part data or by number."""

_FETS = (Kind.MOSFET, Kind.P_MOSFET, Kind.GAN_HEMT)
_DIODE_LIKE = (Kind.DIODE, Kind.ZENER, Kind.THYRISTOR, Kind.TRIAC)

CARD_PINS: Mapping[str, Roles] = {
    "M": ("drain", "gate", "source", "body"),
    "S": ("plus", "minus", "control-plus", "control-minus"),
}
"""Device order of element letters where it differs from that of the kind."""

SPELLINGS: Mapping[str, str] = {
    **dict.fromkeys(("d", "drain", "dd"), "drain"),
    **dict.fromkeys(("g", "gate", "gg", "gt"), "gate"),
    **dict.fromkeys(("s", "source", "src"), "source"),
    **dict.fromkeys(("c", "collector", "coll"), "collector"),
    **dict.fromkeys(("b", "base"), "base"),
    **dict.fromkeys(("e", "emitter", "emit"), "emitter"),
    **dict.fromkeys(("a", "anode", "an", "ano", "mt2", "t2"), "anode"),
    **dict.fromkeys(("k", "cathode", "ka", "cat", "kat", "kathode", "mt1", "t1"), "cathode"),
    **dict.fromkeys(("ks", "ke", "kelvin", "ss", "sk", "ek", "source-sense"), "kelvin"),
    **dict.fromkeys(("tj", "tc", "tcase", "tjunction", "zth", "temp"), "thermal"),
}
"""Lower-case spellings of pins in part data and of ports of subcircuits."""

SIGNAL_ROLES: Roles = (
    *("supply", "ground", "input", "output", "return", "bootstrap", "supply-in", "ground-in"),
    *("supply-out", "ground-out", "in-plus", "in-minus", "out-plus", "out-minus", "enable"),
)
"""Roles of drivers, isolators and controllers that a later step looks for."""


_DRIVER_PINS: Mapping[str, str] = {
    **dict.fromkeys(("vcc", "vdd"), "supply"),
    **dict.fromkeys(("gnd", "com", "vss"), "ground"),
    **dict.fromkeys(("in", "pwm"), "input"),
    **dict.fromkeys(("hin", "inh"), "input-high"),
    **dict.fromkeys(("lin", "inl"), "input-low"),
    "out": "output",
    "ho": "output-high",
    "lo": "output-low",
    **dict.fromkeys(("vb", "hb"), "bootstrap"),
    **dict.fromkeys(("vs", "hs"), "return-high"),
}
"""Usual names of a gate driver's pins (common practice)."""

_BY_KIND: Mapping[tuple[Kind, str], str] = {
    **{(kind, word): "body" for kind in _FETS for word in ("b", "bulk", "sub")},
    **{(kind, "c"): "cathode" for kind in _DIODE_LIKE},
    **{(Kind.DRIVER, word): role for word, role in _DRIVER_PINS.items()},
}


def role_of(spelling: str, kind: Kind) -> str:
    """The role that a pin's spelling stands for; of kinds without fixed roles, its own name."""
    word = spelling.strip().lower().replace("_", "-")
    known = SPELLINGS if kind in PINOUTS else {}
    return _BY_KIND.get((kind, word)) or known.get(word, word)


def required(kind: Kind) -> Roles:
    """Roles without which the kind means nothing: the pins of its power path."""
    pinout = PINOUTS.get(kind)
    if pinout is None:
        return ()
    return tuple(role for role in pinout.needed if role not in ("gate", "base"))


def allowed(kind: Kind) -> Roles | None:
    """All roles of a kind; None where any name may stand."""
    pinout = PINOUTS.get(kind)
    return None if pinout is None else (*pinout.needed, *pinout.optional, "thermal", "substrate")


def default_roles(kind: Kind, letter: str, count: int) -> Roles | None:
    """The roles of `count` pins in device order; None where that many pins have no fixed order."""
    pinout = PINOUTS.get(kind)
    if pinout is None:
        return tuple(str(number) for number in range(1, count + 1))
    card = CARD_PINS.get(letter)
    order = card if card and set(pinout.needed) <= set(card) else None
    order = order or (*pinout.needed, *pinout.optional)
    return order[:count] if len(pinout.needed) <= count <= len(order) else None


def roles_by_ports(kind: Kind, ports: Sequence[str]) -> Roles | None:
    """Roles from the names of a subcircuit's ports; None unless all that the kind needs occur."""
    named = tuple(role_of(port, kind) for port in ports)
    needed = PINOUTS[kind].needed if kind in PINOUTS else ()
    if not set(needed) <= set(named):
        return None
    return named


def pair_up(roles: Iterable[str], nets: Iterable[str]) -> tuple[tuple[str, str], ...]:
    """Roles with nets in pin order; a role that repeats on its own net is kept once."""
    return tuple(dict.fromkeys(zip(roles, nets, strict=False)))
