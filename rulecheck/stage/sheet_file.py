"""The stage sheet as it stands in YAML: the shape that the file is validated against.

ports: {battery: {between: [BAT, PGND], voltage: [42 V, 58 V], supplies: [-80 A, 80 A]}}
switching: {frequency: 20 kHz, dead-time: 400 ns}
set: {L1: {current: [-90 A, 90 A]}}
"""

import msgspec

from rulecheck.reading.quantities import (
    Frequency,
    FrequencyRange,
    Plain,
    PowerRange,
    Time,
)

AlternatingText = str | int | float
"""A quantity, with `peak` or `rms` behind it where it is AC."""
AlternatingRange = AlternatingText | list[AlternatingText]
NetName = str | int
"""A net may be called 0 or 12."""


class PortEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """A port: two nets (`between`) or a symmetrical set (`phases`), and what is known of it."""

    between: list[NetName] | None = None
    phases: list[NetName] | None = None
    neutral: NetName | None = None
    voltage: AlternatingRange | None = None
    line_voltage: AlternatingRange | None = None
    supplies: AlternatingRange | None = None
    draws: AlternatingRange | None = None
    power: PowerRange | None = None
    frequency: FrequencyRange | None = None


class LegSwitchingEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    frequency: Frequency | None = None
    dead_time: Time | None = None
    edge: Time | None = None


class SwitchingEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """For all legs; `legs` states it for one, by the net of its midpoint."""

    frequency: Frequency | None = None
    dead_time: Time | None = None
    edge: Time | None = None
    legs: dict[str, LegSwitchingEntry] = {}


class OverrideEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """What the sheet states of one element, over everything derived."""

    current: AlternatingRange | None = None
    voltage: AlternatingRange | None = None
    role: str | None = None


class SheetFile(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """A whole `*.stage.yaml`."""

    ports: dict[str, PortEntry] = {}
    switching: SwitchingEntry = SwitchingEntry()
    legs: dict[str, LegSwitchingEntry] = {}
    efficiency: Plain = 1.0
    parts: list[str] = []
    set: dict[str, OverrideEntry] = {}
