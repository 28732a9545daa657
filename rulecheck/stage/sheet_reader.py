"""Convert the entries of a stage sheet, every mistake with its place.

`230 V rms` becomes its peak, 325.27 V; a range may mix both.
"""

import math
import re
from collections.abc import Sequence
from typing import TypeVar

from rulecheck.reading import YamlReading
from rulecheck.reading.quantities import as_interval, as_number
from rulecheck.stage.sheet_file import PortEntry, SheetFile
from rulecheck.stage.stage import PortKind
from rulecheck.values import Dimension, Interval, Problem, error
from rulecheck.values.record import Mutable, field

Path = tuple[str | int, ...]
Kept = TypeVar("Kept", float, Interval)
_ALTERNATING = re.compile(r"\s*(.*?)\s+(peak|rms)\s*\Z", re.IGNORECASE)
MOST_MODULATION = 2.0 / math.sqrt(3.0)
"""Of a three-phase bridge, before it clips."""


class Reader(Mutable):
    """Collects the problems of one file while its entries are converted."""

    marks: YamlReading[SheetFile]
    problems: list[Problem] = field(default_factory=list)

    def fail(self, path: Path, what: str, remedy: str) -> None:
        self.problems.append(error(self.marks.span(path), what, remedy))

    def number(self, raw: object, dimension: Dimension, path: Path) -> float | None:
        if raw is None:
            return None
        value = as_number(raw, dimension, self.marks.span(path))
        return self._kept(value)

    def interval(self, raw: object, dimension: Dimension, path: Path) -> Interval | None:
        if raw is None:
            return None
        value = as_interval(raw, dimension, self.marks.span(path))
        return self._kept(value)

    def _kept(self, value: Kept | Problem) -> Kept | None:
        if isinstance(value, Problem):
            self.problems.append(value)
            return None
        return value


def read_alternating(
    raw: object, dimension: Dimension, path: Path, reader: Reader
) -> tuple[Interval | None, bool]:
    """A quantity or range in which `peak` or `rms` may stand; rms becomes its peak."""
    if raw is None:
        return None, False
    items: Sequence[object] = raw if isinstance(raw, list) else [raw]
    matches = [_ALTERNATING.match(item) if isinstance(item, str) else None for item in items]
    if not any(matches):
        return reader.interval(raw, dimension, path), False
    values: list[float] = []
    for item, match in zip(items, matches, strict=True):
        number = reader.number(match[1] if match else item, dimension, path)
        if number is None:
            return None, True
        rms = match is not None and match[2].lower() == "rms"
        values.append(number * math.sqrt(2.0) if rms else number)
    return Interval(min(values), max(values)), True


def modulated(
    entry: PortEntry, kind: PortKind, path: Path, reader: Reader
) -> tuple[str, Interval | None, Interval | None]:
    """How a sine is made at an AC port, and what the port does with it."""
    found = []
    for key, raw, most in (
        ("modulation-index", entry.modulation_index, MOST_MODULATION),
        ("power-factor", entry.power_factor, 1.0),
    ):
        span = reader.interval(raw, Dimension.NUMBER, (*path, key))
        if span is not None and kind is PortKind.DC:
            reader.fail((*path, key), f"`{key}` belongs to an AC port", "state its frequency")
        if span is not None and not 0.0 <= span.low <= span.high <= most:
            reader.fail((*path, key), f"{key} is not within 0 and {most:.4g}", "write 0.8")
            span = None
        found.append(span)
    return entry.modulation or "", found[0], found[1]
