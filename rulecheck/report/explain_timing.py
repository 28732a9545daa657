"""A small timing diagram of a leg in the terminal: one period, two rows, to scale.

timing     20 us, from V1 and V2
  M1       ████████████████████████▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁
  M2       ▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁▁████████████████████████████████▁▁
  both off 390 ns before M2 turns on, 380 ns before M1 turns on
"""

from collections.abc import Iterable, Sequence

from rulecheck.demand import Leg
from rulecheck.report.explanation import Entry
from rulecheck.report.figures import figure
from rulecheck.report.look import Look
from rulecheck.stage import CommonWindow, Stage, common_window
from rulecheck.stage.common_window import Segment
from rulecheck.values import Unknown

_CELLS = 60


def timing_entries(leg: Leg, stage: Stage, look: Look) -> tuple[Entry, ...]:
    """Of the first commanded device above and below; nothing where one of them has no command."""
    pair = [_commanded(side, stage) for side in (leg.high, leg.low)]
    if not all(pair):
        return ()
    commands = {name: stage.gate_commands[name] for name in pair}
    window = common_window(commands)
    sources = " and ".join(dict.fromkeys(command.source for command in commands.values()))
    if isinstance(window, Unknown):
        return (Entry("timing", f"unknown: {window.what}; settle with {window.settle}"),)
    return (
        Entry("timing", f"{figure(window.length, 's')}, from {sources}"),
        *(Entry(name, _row(name, window, look), 1) for name in pair),
        *_gaps(pair, window),
    )


def _commanded(positions: Iterable[str], stage: Stage) -> str:
    """The first device of the positions that a source commands; empty where none is."""
    parts = {position.name: position.parts for position in stage.positions}
    devices = (device for name in positions for device in parts.get(name, ()))
    return next((device for device in devices if device in stage.gate_commands), "")


def _row(name: str, window: CommonWindow, look: Look) -> str:
    on, off = ("#", "_") if look.ascii else ("█", "▁")
    middles = ((cell + 0.5) * window.length / _CELLS for cell in range(_CELLS))
    return "".join(on if _is_on(name, window, moment) else off for moment in middles)


def _is_on(name: str, window: CommonWindow, moment: float) -> bool:
    return any(span.low <= moment < span.high for span in window.on[name])


def _gaps(pair: Sequence[str], window: CommonWindow) -> tuple[Entry, ...]:
    """The least time with both off before each turns on, and the time with both on."""
    segments = window.segments()
    off = [
        f"{figure(gap, 's')} before {name} turns on"
        for name in reversed(pair)
        for gap in (_least_gap(segments, name, window.cyclic),)
        if gap is not None
    ]
    both = sum(segment.length for segment in segments if set(pair) <= segment.on)
    entries = [Entry("both off", ", ".join(off), 1)] if off else []
    if both > 0.0:
        entries.append(Entry("both on", f"{figure(both, 's')} in that time", 1))
    return tuple(entries)


def _least_gap(segments: Sequence[Segment], name: str, cyclic: bool) -> float | None:
    """The shortest pause of both between the other one's on-time and this one's."""
    found = []
    count = len(segments)
    for index, segment in enumerate(segments):
        begins = segment.on and name in segment.on
        before = segments[index - 1]
        if not begins or before.on or (index == 0 and not cyclic):
            continue
        pause, at = 0.0, index - 1
        while not segments[at].on and -count <= at and (cyclic or at >= 0):
            pause, at = pause + segments[at].length, at - 1
        if segments[at].on and name not in segments[at].on:
            found.append(pause)
    return min(found, default=None)
