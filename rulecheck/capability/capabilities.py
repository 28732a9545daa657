"""The product of this step: what each position can do, whatever is asked of it."""

from collections.abc import Mapping

from rulecheck.values import QuadrantSet, Unknown
from rulecheck.values.record import Record


class Direction(Record):
    """What a position can do in one direction."""

    carries: bool
    """With all gates on, current can flow this way."""
    freewheels: bool
    """With all gates off it can too."""
    holds_off: bool
    """With all gates off it withstands voltage of this polarity."""
    blocks: float | Unknown
    """The voltage it withstands; 0 where it conducts freely; Unknown names a missing rating."""
    blocks_at_least: float
    """A lower bound from the ratings that are known."""
    current: float | Unknown
    """The current it may carry; 0 where it cannot."""
    current_at_least: float
    missing: tuple[Unknown, ...]
    """Every rating whose absence leaves a number above unknown."""
    weakest: tuple[str, ...]
    """The parts of the chain that decides the blocking rating, in order."""
    carried_by: tuple[str, ...]
    """The parts of one path that carries the direction, in order."""


class Capability(Record):
    position: str
    forward: Direction
    reverse: Direction
    quadrants: QuadrantSet


class Capabilities(Record):
    positions: Mapping[str, Capability]
