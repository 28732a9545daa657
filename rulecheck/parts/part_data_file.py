"""A parts file as it stands in YAML: the shape that the file is validated against.

parts: {"SW-N100-*": {kind: mosfet, ratings: {blocking: 100 V, current: 120 A}}}
"""

from typing import Annotated, Literal

import msgspec
from msgspec import Meta

from rulecheck.parts.part import Kind
from rulecheck.reading.quantities import (
    Capacitance,
    Charge,
    Current,
    Energy,
    Inductance,
    Plain,
    Power,
    Resistance,
    Temperature,
    Time,
    TimeRange,
    Voltage,
    VoltageRange,
)

STATED_KINDS = {
    **{kind.value: kind for kind in Kind if kind is not Kind.UNKNOWN},
    "source": Kind.VOLTAGE_SOURCE,
}
"""Kinds as a parts file writes them."""

KindText = Annotated[
    str,
    Meta(
        description="what the part is",
        extra_json_schema={"enum": sorted(STATED_KINDS)},
    ),
]


class RatingsEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """Limits that the maker states; which of them apply depends on the kind."""

    blocking: Voltage | None = None
    reverse_blocking: Voltage | None = None
    current: Current | None = None
    peak_current: Current | None = None
    rms_current: Current | None = None
    ripple_current: Current | None = None
    voltage: Voltage | None = None
    dc_voltage: Voltage | None = None
    clamp: Voltage | None = None
    isolation: Voltage | None = None
    gate: VoltageRange | None = None
    power: Power | None = None
    energy: Energy | None = None
    junction_temperature: Temperature | None = None
    dielectric: Literal["ceramic", "film", "electrolytic", "tantalum"] | None = None
    core: Literal["polarised"] | None = None
    """Of an inductor with a magnet in its core: biased from its first net to its second."""


class GateEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """The gate of a device: charge, threshold, capacitances and switching times."""

    charge: Charge | None = None
    threshold: VoltageRange | None = None
    miller_capacitance: Capacitance | None = None
    input_capacitance: Capacitance | None = None
    resistance: Resistance | None = None
    turn_on: TimeRange | None = None
    turn_off: TimeRange | None = None


class DiodeEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """Reverse recovery of a diode or of the diode in a device."""

    recovery_charge: Charge | None = None
    recovery_time: Time | None = None


class DriverEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """What a gate driver (or a controller or isolator) does by itself."""

    dead_time: TimeRange | None = None
    interlock: bool | None = None
    inverts: list[str] | None = None
    delay: TimeRange | None = None
    output_current: Current | None = None
    lockout: VoltageRange | None = None
    supply: VoltageRange | None = None
    isolation: Voltage | None = None
    sink_resistance: Resistance | None = None
    source_resistance: Resistance | None = None
    quiescent_current: Current | None = None


class DeviceEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """An inner device of a module; `pins` gives the module's pin on each of its roles."""

    kind: KindText
    pins: dict[str, str | int]
    ratings: RatingsEntry | None = None
    gate: GateEntry | None = None
    diode: DiodeEntry | None = None


class WindingEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """A winding of a winding set: the pin with the dot, the other pin, and the turns."""

    pins: list[str | int]
    turns: Plain


class PartEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """A part; `pins` is the roles in netlist order, or the port or pin number of each role."""

    kind: KindText
    pins: list[str | int] | dict[str, str | int] | None = None
    ratings: RatingsEntry | None = None
    gate: GateEntry | None = None
    diode: DiodeEntry | None = None
    driver: DriverEntry | None = None
    devices: dict[str, DeviceEntry] | None = None
    windings: dict[str, WindingEntry] | None = None
    inductance: Inductance | None = None


class PartDataFile(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """A whole `*.parts.yaml`; the keys are globs over model, subcircuit or value texts."""

    parts: dict[str, PartEntry] = {}
