"""What a driver makes of the commands at its inputs.

input-high, input-low     each output follows its input; with an interlock never both at once,
                          with a dead time every turning on waits for it
input alone               output-high follows, output-low is its opposite, both with dead time
"""

from collections.abc import Callable

from rulecheck.parts import Part
from rulecheck.stage.common_window import common_window
from rulecheck.stage.gate_command import GateCommand, OnTimes, both, joined, opposite
from rulecheck.values import Interval, Unknown
from rulecheck.values.record import Record, replace

InputCommand = Callable[[str], GateCommand | None]
"""The command at a net, not inverted."""
_ACROSS = {"high": "low", "low": "high", "a": "b", "b": "a"}
_HALVES = frozenset({"on", "off", "up", "down", "source", "sink"})
_TRUE = "true"


class DriverHabits(Record):
    """What the driver does by itself; seconds, None where nobody states it."""

    interlock: bool
    dead_time: float | None


def habits_of(part: Part) -> DriverHabits:
    """A range of dead time counts with its least."""
    dead_time = part.datum("driver.dead-time")
    least = None
    if not isinstance(dead_time, Unknown):
        value = dead_time.value
        least = value.low if isinstance(value, Interval) else value
    return DriverHabits(part.facts.get("driver.interlock", "") == _TRUE, least)


def command_of_output(part: Part, role: str, at_input: InputCommand) -> GateCommand | None:
    """The command at a driver's output, where the inputs' are known.

    None where no input goes with the output, or nothing commands that input.
    """
    channel = _channel(role)
    own = _followed(part, role, channel, at_input)
    if own is None:
        return None
    own = replace(own, driver=part.name)
    across = _ACROSS.get(channel, "")
    beside = f"output-{across}"
    if not across or not any(pin.role.startswith(beside) for pin in part.pins):
        return own
    other = _followed(part, beside, across, at_input)
    return own if other is None else _kept_apart(part, own, other)


def _channel(role: str) -> str:
    """`high` of `output-high`, nothing of `output` or of `output-on`."""
    words = [word for word in role.split("-")[1:] if word not in _HALVES]
    return "-".join(words)


def _followed(part: Part, role: str, channel: str, at_input: InputCommand) -> GateCommand | None:
    """The input's command as this output would have it, before the driver keeps outputs apart."""
    matching = part.net(f"input-{channel}") if channel else None
    shared = part.net("input")
    net = matching or shared
    command = at_input(net) if net is not None else None
    if command is None:
        return None
    opposed = matching is None and channel in ("low", "b")
    inverts = role in part.facts.get("driver.inverts", "").split()
    if opposed == inverts:
        return command
    return replace(command, on=opposite(command.on, command.period))


def _kept_apart(part: Part, own: GateCommand, other: GateCommand) -> GateCommand:
    """With what interlock and dead time take away from the on-times."""
    habits = habits_of(part)
    complementary = part.net("input") is not None
    apart = habits.interlock or habits.dead_time is not None or complementary
    if not apart:
        return own
    window = common_window({"own": own, "other": other})
    if isinstance(window, Unknown):
        return own
    mine, theirs = window.on["own"], window.on["other"]
    forbidden = _stretched(theirs, habits.dead_time or 0.0, window.length, window.cyclic)
    blocked = both(mine, forbidden)
    left = joined(tuple(_less(mine, forbidden, window.length)))
    unstated = habits.dead_time is None and (bool(blocked) or complementary)
    late = part.name if unstated else ""
    return replace(own, on=left, period=window.length, repeats=window.cyclic, may_begin_later=late)


def _stretched(times: OnTimes, by: float, length: float, cyclic: bool) -> OnTimes:
    """On-times followed by a time in which the other output has to wait."""
    found = []
    for span in times:
        end = span.high + by
        found.append(Interval(span.low, min(end, length)))
        if end > length and cyclic:
            found.append(Interval(0.0, end - length))
    return joined(tuple(found))


def _less(times: OnTimes, taken: OnTimes, length: float) -> OnTimes:
    return both(times, opposite(taken, length))
