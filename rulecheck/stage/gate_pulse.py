"""What a pulse source of the netlist commands a gate to do."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class GatePulse:
    """One on-time a period, seconds; `start` is where half of the rise is done."""

    start: float
    width: float
    period: float
    source: str
