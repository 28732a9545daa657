"""The directed edges of each kind of power device: one table.

M1, an n-MOSFET of 100 V and 120 A from D to S:
    D -> S   gated   blocks 100 V   120 A
    S -> D   free    blocks 0 V     120 A
"""

from collections.abc import Iterable

from rulecheck.parts.part import Conduction, Edge, Kind, Part
from rulecheck.values import Interval, Unknown
from rulecheck.values.record import Record

POLARITY = "polarity"
"""Fact of a bipolar transistor: `pnp`; an NPN has none."""
BODY_DIODE = "body-diode"
"""Fact of a MOSFET: `none` where its bulk is not on its source."""


class EdgeRow(Record):
    """One direction: roles, conduction, and where the rating for its off state is stated."""

    tail: str
    head: str
    conduction: Conduction
    blocking: str = ""
    """Path of the blocking rating; empty where the direction conducts freely."""
    unstated: float | None = None
    """Volts where none is stated; None: then the rating is missing."""


_FORWARD = "ratings.blocking"
_REVERSE = "ratings.reverse-blocking"
_FREE, _GATED, _NEVER = Conduction.FREE, Conduction.GATED, Conduction.NEVER


def _diode(anode: str, cathode: str) -> tuple[EdgeRow, ...]:
    return (EdgeRow(anode, cathode, _FREE), EdgeRow(cathode, anode, _NEVER, _FORWARD))


def _freewheeling(tail: str, head: str) -> tuple[EdgeRow, ...]:
    return (EdgeRow(tail, head, _GATED, _FORWARD), EdgeRow(head, tail, _FREE))


def _one_way(tail: str, head: str, unstated: float | None) -> tuple[EdgeRow, ...]:
    return (
        EdgeRow(tail, head, _GATED, _FORWARD),
        EdgeRow(head, tail, _NEVER, _REVERSE, unstated),
    )


def _two_way(tail: str, head: str, reverse: str) -> tuple[EdgeRow, ...]:
    return (EdgeRow(tail, head, _GATED, _FORWARD), EdgeRow(head, tail, _GATED, reverse))


ROWS: dict[tuple[Kind, str], tuple[EdgeRow, ...]] = {
    (Kind.DIODE, ""): _diode("anode", "cathode"),
    (Kind.ZENER, ""): _diode("anode", "cathode"),
    (Kind.MOSFET, ""): _freewheeling("drain", "source"),
    (Kind.MOSFET, "none"): _two_way("drain", "source", _REVERSE),
    (Kind.GAN_HEMT, ""): _freewheeling("drain", "source"),
    (Kind.P_MOSFET, ""): _freewheeling("source", "drain"),
    (Kind.P_MOSFET, "none"): _two_way("source", "drain", _REVERSE),
    (Kind.BJT, ""): _one_way("collector", "emitter", 0.0),
    (Kind.BJT, "pnp"): _one_way("emitter", "collector", 0.0),
    (Kind.IGBT, ""): _one_way("collector", "emitter", 0.0),
    (Kind.IGBT_WITH_DIODE, ""): _freewheeling("collector", "emitter"),
    (Kind.REVERSE_BLOCKING_IGBT, ""): _one_way("collector", "emitter", None),
    (Kind.THYRISTOR, ""): _one_way("anode", "cathode", None),
    (Kind.TRIAC, ""): _two_way("anode", "cathode", _FORWARD),
    (Kind.IDEAL_SWITCH, ""): _two_way("plus", "minus", _FORWARD),
}
"""By kind and variant: the device's edges, forward direction first."""


def is_power_device(kind: Kind) -> bool:
    return (kind, "") in ROWS


def find_edges(part: Part) -> tuple[Edge, ...]:
    """Both directions of the part's power path; none for a part that is no power device."""
    variant = part.facts.get(POLARITY, "") or part.facts.get(BODY_DIODE, "")
    rows = ROWS.get((part.kind, variant)) or ROWS.get((part.kind, ""), ())
    return tuple(_edges(part, rows))


def _edges(part: Part, rows: Iterable[EdgeRow]) -> Iterable[Edge]:
    for row in rows:
        tail, head = part.net(row.tail), part.net(row.head)
        if tail is None or head is None:
            continue
        blocks = _rating(part, row.blocking, row.unstated) if row.blocking else 0.0
        current = 0.0 if row.conduction is _NEVER else _rating(part, "ratings.current")
        yield Edge(tail, head, row.conduction, blocks, current, part.name)


def _rating(part: Part, path: str, unstated: float | None = None) -> float | Unknown:
    """The lower end of what is stated, without sign: a rating says "at least"."""
    stated = part.datum(path)
    if isinstance(stated, Unknown):
        return stated if unstated is None else unstated
    if isinstance(stated.value, Interval):
        return min(abs(stated.value.low), abs(stated.value.high))
    return abs(stated.value)
