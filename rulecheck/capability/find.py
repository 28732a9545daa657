"""Answer for every position, in both directions, what it blocks and what it carries.

Q1, a 100 V 120 A MOSFET from BUS to SW:
    forward   blocks 100 V, carries 120 A with its gate
    reverse   blocks nothing, carries 120 A without its gate      quadrants I + IV
"""

from collections.abc import Sequence

from rulecheck.capability.blocking import find_blocking
from rulecheck.capability.capabilities import Capabilities, Capability, Direction
from rulecheck.capability.carrying import find_carrying
from rulecheck.parts import Edge
from rulecheck.stage.position import Position
from rulecheck.values import QuadrantSet, natural_key


def find_capabilities(positions: Sequence[Position]) -> Capabilities:
    """The capability of each position, from its devices' edges alone.

    The quadrants are the product of the polarities that it holds off and the directions that
    it carries, as textbooks classify switches (Erickson and Maksimovic, Fundamentals of Power
    Electronics, switch realization; from memory).
    """
    ordered = sorted(positions, key=lambda position: natural_key(position.name))
    return Capabilities({position.name: _capability(position) for position in ordered})


def _capability(position: Position) -> Capability:
    forward = _direction(position.edges, position.start, position.end)
    reverse = _direction(position.edges, position.end, position.start)
    held = [sign for sign, way in ((True, forward), (False, reverse)) if way.holds_off]
    carried = [sign for sign, way in ((True, forward), (False, reverse)) if way.carries]
    return Capability(position.name, forward, reverse, QuadrantSet.product(held, carried))


def _direction(edges: Sequence[Edge], tail: str, head: str) -> Direction:
    blocking = find_blocking(edges, tail, head)
    carrying = find_carrying(edges, tail, head)
    return Direction(
        carries=carrying.carries,
        freewheels=carrying.freewheels,
        holds_off=blocking.holds_off,
        blocks=blocking.volts,
        blocks_at_least=blocking.at_least,
        current=carrying.amperes,
        current_at_least=carrying.at_least,
        missing=tuple(dict.fromkeys(blocking.missing + carrying.missing)),
        weakest=blocking.weakest,
        carried_by=carrying.carried_by,
    )
