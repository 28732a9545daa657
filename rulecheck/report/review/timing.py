"""Timing: when the netlist's own sources command each gate of a leg, and what is stated of it."""

import math
from collections.abc import Iterable

from rulecheck.demand import Demands, Leg
from rulecheck.report.figures import figure
from rulecheck.report.review.review import Row, Table, Timing, Trace
from rulecheck.stage import GateCommand, Stage, Switching

_WIDTH = 600.0
_MOST_EDGES = 200


def timing_diagrams(stage: Stage, demands: Demands) -> tuple[Timing, ...]:
    """One diagram for each leg whose gates have commands that repeat or describe one window."""
    found = (_timing(leg, stage) for leg in demands.legs)
    return tuple(timing for timing in found if timing is not None)


def stated_timing(stage: Stage, demands: Demands) -> Table:
    """What sheet and netlist state of each leg's switching."""
    return Table(
        "Switching as stated, by leg",
        ("Leg", "Frequency", "Dead time", "Edge"),
        tuple(_stated(leg, stage) for leg in demands.legs),
    )


def _stated(leg: Leg, stage: Stage) -> Row:
    found = stage.leg_switching.get(leg.midpoint, stage.switching)
    figures = _figures(found)
    return Row((leg.name, *(figure(v, u) if v is not None else "not stated" for v, u in figures)))


def _figures(switching: Switching) -> tuple[tuple[float | None, str], ...]:
    return ((switching.frequency, "Hz"), (switching.dead_time, "s"), (switching.edge, "s"))


def _timing(leg: Leg, stage: Stage) -> Timing | None:
    members = (*leg.high, *leg.low, *leg.others)
    devices = [part for position in stage.positions if position.name in members
               for part in position.parts]  # fmt: skip
    commands = [
        (name, stage.gate_commands[name]) for name in devices if name in stage.gate_commands
    ]
    moving = [(name, command) for name, command in commands if not command.steady]
    if not moving:
        return None
    window = max(command.period for _, command in moving)
    traces = tuple(_trace(name, command, window) for name, command in commands)
    return Timing(leg.name, figure(window, "s"), traces, _WIDTH)


def _trace(name: str, command: GateCommand, window: float) -> Trace:
    edges = _edges(command, window)
    path = f"M0 {0 if command.is_on(0.0) else 18}"
    for at, on in edges[:_MOST_EDGES]:
        path += f"H{at / window * _WIDTH:.2f}V{0 if on else 18}"
    on_times = ", ".join(
        f"{figure(span.low, 's')} to {figure(span.high, 's')}" for span in command.on[:4]
        if math.isfinite(span.high)
    )  # fmt: skip
    told = on_times or ("always on" if command.on else "never on")
    return Trace(name, f"{path}H{_WIDTH:g}", f"{told}; by {command.source}")


def _edges(command: GateCommand, window: float) -> list[tuple[float, bool]]:
    """Instants within the window at which the command changes, and what it is after them."""
    if command.steady:
        return []
    count = int(window / command.period + 1e-9) if command.repeats else 1
    instants: Iterable[float] = (
        k * command.period + edge
        for k in range(min(count, _MOST_EDGES) + 1)
        for span in command.on
        for edge in (span.low, span.high)
    )
    inside = sorted({round(t, 15) for t in instants if 0.0 < t < window})
    nudge = window * 1e-9
    return [(at, command.is_on(at + nudge)) for at in inside]
