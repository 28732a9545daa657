"""Capacitors between two nets as one bank, and how it is discharged."""

from collections.abc import Mapping

from rulecheck.values import Interval, Unknown
from rulecheck.values.record import Record, field


class Discharge(Record):
    """Of the capacitors between two nets, seconds; infinite where nothing discharges them."""

    to_60_volt: float
    to_34_volt: float
    to_37_percent: float
    resistance: float
    """Of resistors between the two nets that pass no other net of a capacitor; ohm."""


class CapacitorBank(Record):
    """Named after its first capacitor."""

    name: str
    start: str
    end: str
    members: tuple[str, ...]
    farad: float | Unknown
    voltage: Interval | Unknown
    discharge: Discharge | Unknown
    in_series: int
    """How many banks share one voltage in series, nothing but resistors between them."""
    string_voltage: float | Unknown
    """The largest voltage across all of them."""


class BankFindings(Record):
    banks: tuple[CapacitorBank, ...] = ()
    bleeders: Mapping[str, float] = field(default_factory=dict)
    """By resistor between capacitors' nets: its voltage while they are fully charged."""
