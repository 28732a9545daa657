"""The stage sheet as it stands in YAML: the shape that the file is validated against.

ports: {battery: {between: [BAT, PGND], voltage: [42 V, 58 V], supplies: [-80 A, 80 A]}}
switching: {frequency: 20 kHz, dead-time: 400 ns}
set: {L1: {current: [-90 A, 90 A]}}
"""

from typing import Annotated, Literal

import msgspec
from msgspec import Meta

from rulecheck.reading.quantities import (
    Current,
    Frequency,
    FrequencyRange,
    Inductance,
    Plain,
    PlainRange,
    PowerRange,
    Time,
    Voltage,
    VoltageRange,
)

AlternatingText = str | int | float
"""A quantity, with `peak` or `rms` behind it where it is AC."""
AlternatingRange = Annotated[
    AlternatingText | list[AlternatingText],
    Meta(description="a quantity, such as 58 V or 230 V rms, or a list of two: [LOW, HIGH]"),
]
NetName = str | int
"""A net may be called 0 or 12."""


class PortEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """A port: two nets (`between`) or a symmetrical set (`phases`), and what is known of it.

    `source` says what stands behind it, `fuse: elsewhere` that its fuse or breaker is on another
    drawing, `withstands` what it is to survive from outside, `ripple` the most it
    may have, peak to peak. Of a sine: `modulation-index` is the amplitude over half the bus (over
    the bus between two legs), `power-factor` cos phi.
    """

    between: list[NetName] | None = None
    phases: list[NetName] | None = None
    neutral: NetName | None = None
    voltage: AlternatingRange | None = None
    line_voltage: AlternatingRange | None = None
    supplies: AlternatingRange | None = None
    draws: AlternatingRange | None = None
    power: PowerRange | None = None
    frequency: FrequencyRange | None = None
    source: Literal["battery", "mains", "panel", "generator", "supply", "load"] | None = None
    fuse: Literal["here", "elsewhere"] | None = None
    withstands: list[Literal["reverse-polarity", "surge"]] = []
    modulation: Literal["unipolar", "bipolar"] | None = None
    modulation_index: PlainRange | None = None
    power_factor: PlainRange | None = None
    ripple: Voltage | None = None


class LegSwitchingEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """Of one leg; `phase` is when it turns on, in degrees of the switching period."""

    frequency: Frequency | None = None
    dead_time: Time | None = None
    edge: Time | None = None
    shortest_pulse: Time | None = None
    stray_inductance: Inductance | None = None
    phase: Plain | None = None


class SwitchingEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """For all legs; `legs` states it for one, by the net of its midpoint.

    `shortest-pulse` is the shortest time that a switch is commanded on or off,
    `stray-inductance` that of the loop through a leg and its nearest capacitor.
    """

    frequency: Frequency | None = None
    dead_time: Time | None = None
    edge: Time | None = None
    shortest_pulse: Time | None = None
    stray_inductance: Inductance | None = None
    legs: dict[str, LegSwitchingEntry] = {}


class OverrideEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """What the sheet states of one element, over everything derived.

    `rms-current` stands for what a simulation or a measurement gave as the largest.
    Of a winding: `leakage` seen from it, and what keeps the mean voltage of its core at zero.
    """

    current: AlternatingRange | None = None
    voltage: AlternatingRange | None = None
    role: str | None = None
    leakage: Inductance | None = None
    rms_current: Current | None = None
    balance: Literal["current-control", "gap", "measured"] | None = None


class BarrierEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """Two domains and the working voltage between them, as its peak."""

    between: list[str]
    voltage: Voltage | None = None
    test_voltage: Voltage | None = None


class SheetFile(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """A whole `*.stage.yaml`.

    `domains` names nets that belong together galvanically; any two domains are to be separate.
    """

    ports: dict[str, PortEntry] = {}
    switching: SwitchingEntry = SwitchingEntry()
    legs: dict[str, LegSwitchingEntry] = {}
    efficiency: Plain = 1.0
    parts: list[str] = []
    set: dict[str, OverrideEntry] = {}
    gate_supplies: dict[str, VoltageRange] = {}
    domains: dict[str, list[NetName]] = {}
    barriers: list[BarrierEntry] = []
