"""What the gates' commands lead to: the records."""

from rulecheck.stage import CommonWindow
from rulecheck.values import Interval, Unknown
from rulecheck.values.record import Record


class ClosedLoop(Record):
    """The positions in it, and the voltage that it shorts."""

    positions: tuple[str, ...]
    across: str
    voltage: Interval


class CommandedState(Record):
    """A set of devices commanded on at the same time, once or more within the window."""

    devices: tuple[str, ...]
    at: float
    """Seconds from the window's start to its first time."""
    length: float
    """Seconds in all within the window."""
    loop: ClosedLoop | Unknown | None
    """The short that it makes."""
    interrupted: tuple[str, ...]
    """Inductors, windings and ports whose current has no way, whichever its direction."""
    interrupted_one_way: tuple[str, ...]
    """Those whose current has a way in one of its two directions only."""


class Takeover(Record):
    """One device turns on after another, whose staying on would have made a short with it."""

    off: str
    on: str
    at: float
    """When the second turns on, seconds from the window's start."""
    dead_time: float
    """Seconds from the first one's turning off; below zero where they overlap."""


class CommandedGroup(Record):
    """What the commands of one group of positions lead to."""

    positions: tuple[str, ...]
    devices: tuple[str, ...]
    """With a gate that turns them off as well as on."""
    latching: bool
    """Some of its devices turn off by themselves only."""
    can_short: bool
    """All gates on would short a voltage."""
    can_interrupt: tuple[str, ...]
    """Whose current all gates off would interrupt, in one direction at least."""
    window: CommonWindow | Unknown
    states: tuple[CommandedState, ...] = ()
    takeovers: tuple[Takeover, ...] = ()
