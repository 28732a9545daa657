"""The quadrant table for a spreadsheet: one row a position, an empty cell for the unknown."""

import csv
from typing import TextIO

from rulecheck.report.figures import json_number, json_range
from rulecheck.report.look import PLAIN, Look
from rulecheck.report.quadrant_result import PositionResult, QuadrantResult
from rulecheck.values import Interval, QuadrantSet, Unknown

HEADER = (
    "netlist",
    "position",
    "parts",
    "from",
    "to",
    "needs",
    "has",
    "missing",
    "covered",
    "off voltage low (V)",
    "off voltage high (V)",
    "on current low (A)",
    "on current high (A)",
    "blocks forward (V)",
    "blocks reverse (V)",
    "carries forward (A)",
    "carries reverse (A)",
)
_COVERED = {True: "yes", False: "no", None: "unknown"}


def render(result: QuadrantResult, stream: TextIO, look: Look = PLAIN) -> None:
    """Write the header and one row a position (RFC 4180, but with plain line ends)."""
    del look
    writer = csv.writer(stream, lineterminator="\n")
    writer.writerow(HEADER)
    for row in result.positions:
        writer.writerow(_cells(result.netlist, row))


def _cells(netlist: str, row: PositionResult) -> tuple[object, ...]:
    forward, reverse = row.capability.forward, row.capability.reverse
    return (
        _text(netlist),
        _text(row.position.name),
        _text(" ".join(row.position.parts)),
        _text(row.position.start),
        _text(row.position.end),
        _label(row.needs),
        row.capability.quadrants.label,
        row.missing.label if row.missing.members else "",
        _COVERED[row.covered],
        *_ends(row.demand.off_voltage),
        *_ends(row.demand.on_current),
        *map(json_number, (forward.blocks, reverse.blocks, forward.current, reverse.current)),
    )


def _text(name: str) -> str:
    """A net may be called `+24V` or `=1+1`; a leading quote keeps a spreadsheet from computing."""
    return f"'{name}" if name[:1] in ("=", "+", "-", "@") else name


def _label(quadrants: QuadrantSet | Unknown) -> str:
    return "unknown" if isinstance(quadrants, Unknown) else quadrants.label


def _ends(value: Interval | Unknown) -> tuple[float | None, float | None]:
    ends = json_range(value) or [None, None]
    return ends[0], ends[1]
