"""Part data as read: patterns over model, subcircuit or value texts, and what each states.

"SW-N100-*": {kind: mosfet, ratings: {blocking: 100 V}}      fits SW-N100-7, sw-n100-12
"SW-N100-7": {kind: mosfet, ratings: {blocking: 150 V}}      fits better: more literal text
"""

import fnmatch
from collections.abc import Iterable, Mapping

from rulecheck.parts.part import Datum, Kind
from rulecheck.values import Problem, Span
from rulecheck.values.record import Record

_WILD = frozenset("*?[]")


class StatedDevice(Record):
    """One inner device of a module."""

    name: str
    kind: Kind
    pins: Mapping[str, str]
    """Role -> pin of the module, in lower case."""
    data: Mapping[str, Datum]
    facts: Mapping[str, str]
    span: Span


class StatedWinding(Record):
    """One winding of a winding set between two of its pins, in lower case; the dot comes first."""

    name: str
    dot: str
    other: str
    turns: float


class StatedPart(Record):
    """One entry of a parts file."""

    key: str
    kind: Kind
    pins: tuple[str, ...]
    """Roles in netlist order; empty where the entry leaves them to the kind."""
    pins_by_name: Mapping[str, str]
    """Role -> port or number of the pin; empty where `pins` is a list or is left out."""
    data: Mapping[str, Datum]
    facts: Mapping[str, str]
    span: Span
    devices: tuple[StatedDevice, ...] = ()
    windings: tuple[StatedWinding, ...] = ()
    inductance: float | None = None
    """Henry, of the first winding."""

    @property
    def literal_length(self) -> int:
        return sum(character not in _WILD for character in self.key)

    def fits(self, text: str) -> bool:
        return fnmatch.fnmatchcase(text.casefold(), self.key.casefold())


class PartData(Record):
    """All parts files together, in the order in which they were given."""

    parts: tuple[StatedPart, ...] = ()
    problems: tuple[Problem, ...] = ()

    def best_fit(self, texts: Iterable[str]) -> StatedPart | None:
        """The entry with the longest literal text that fits; the first of equals."""
        fitting = [part for text in texts if text for part in self.parts if part.fits(text)]
        return max(fitting, key=lambda part: part.literal_length, default=None)


NO_PART_DATA = PartData()
