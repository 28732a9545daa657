"""Switch positions: two-terminal groups of power devices that act as one switch."""

from rulecheck.parts import Edge
from rulecheck.values import Span
from rulecheck.values.record import Record


class Position(Record):
    """One switch position between the (merged) nets `start` and `end`.

    The off-state voltage is start over end, the on-state current flows from start to end.
    """

    name: str
    parts: tuple[str, ...]
    start: str
    end: str
    edges: tuple[Edge, ...]
    """The devices' edges, their nets after merging wires."""
    gated: bool
    """True where some path through it follows a gate, so that the control decides."""
    free_forward: bool
    """Current from start to end needs no gate."""
    free_reverse: bool
    span: Span
