"""Waveform quantities of a study by name, as single numbers or ends of their ranges.

>>> waves = Waves(Study("M1 IN g SW SW FET ...", sheet(...)))
>>> waves.capacitor("C1", "rms")
"""

from dataclasses import dataclass
from typing import Any

from rulecheck.demand.waveforms.records import Derived, Waveforms
from rulecheck.values import Interval
from tests.kit.published import Study


@dataclass(frozen=True)
class Waves:
    study: Study

    @property
    def found(self) -> Waveforms:
        return self.study.analysis.demands.waveforms

    def capacitor(self, name: str, quantity: str) -> float:
        return highest(getattr(self.found.capacitors[name], quantity))

    def inductor(self, name: str, quantity: str) -> float:
        return highest(getattr(self.found.inductors[name], quantity))

    def position(self, name: str, quantity: str) -> float:
        return highest(getattr(self.found.positions[name], quantity))

    def bank(self, *names: str) -> float:
        """The rms current of capacitors side by side."""
        return sum(self.capacitor(name, "rms") for name in names)


def highest(derived: Derived) -> float:
    """The larger end of a range that is known."""
    assert isinstance(derived.range, Interval), derived.range
    return derived.range.high


def span(derived: Derived) -> tuple[float, float]:
    assert isinstance(derived.range, Interval), derived.range
    return derived.range.low, derived.range.high


def open_points(derived: Derived) -> list[Any]:
    """What would settle a quantity that is not known, or narrow one that is."""
    if isinstance(derived.range, Interval):
        return [missing.settle for missing in derived.missing]
    return [derived.range.settle]
