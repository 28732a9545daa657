"""What decides a stiff current besides its mean: the states around it, and the ripple they make."""

import math
from collections.abc import Sequence

from rulecheck.demand.readings import Reading, sustainable
from rulecheck.demand.ripple import levels_seen, open_voltages, swing
from rulecheck.demand.routes import Carrier, Route
from rulecheck.demand.sign_cases import Case
from rulecheck.demand.stiff import EVERYTHING, Box
from rulecheck.stage import Stage
from rulecheck.values import Interval
from rulecheck.values.record import Record

_MUCH_SLOWER = 3.0
"""A leg that switches this many times slower stands still within a period of the others."""
_NO_CURRENT = 1e-5
"""Ampere."""


class Surroundings(Record):
    """What decides one carrier's range besides its mean."""

    stage: Stage
    reading: Reading
    route: Route
    box: Box
    cases: Sequence[Case]
    alternates: bool
    """It carries no DC: a winding or a capacitor is in series with it."""

    def keeps(self, name: str, span: Interval, positive: bool) -> bool:
        """True where a current of that sign, within the span, can be kept."""
        wide = self.box.with_ranges({name: span})
        return bool(self.route.steps) and sustainable(
            self.reading, self.route, wide, self.cases, name, positive
        )

    def alternates_with(self, name: str, positive: bool) -> bool:
        """True where a current of that sign sees more than one voltage, so that they can balance.

        This holds whatever an unknown voltage is, since it is constant: one level alone has no
        other to balance it.
        """
        half = EVERYTHING.part_of_sign(positive, _NO_CURRENT)
        signed = self.box.with_ranges({name: half or EVERYTHING})
        return any(
            len(levels_seen(self.reading, self.route, case.narrow(signed))) > 1
            for case in self.cases
        )


class Ripple(Record):
    """Half the peak-to-peak ripple of one current, in amperes; infinite where nobody can tell."""

    half: float
    note: str = ""
    settle: tuple[str, ...] = ()

    @property
    def known(self) -> bool:
        return math.isfinite(self.half)


def ripple_of(carrier: Carrier, around: Surroundings) -> Ripple:
    """Half the peak-to-peak ripple, or why none is included, or why nobody can tell it.

    Where no gate switches, only the line's own frequency is in the current: then the mean stays.
    """
    if not around.route.steps:
        return Ripple(0.0)
    missing, settle = _missing_for_ripple(carrier, around)
    if missing and any(around.reading.clusters[s.cluster].gated for s in around.route.steps):
        return Ripple(math.inf, f", its ripple unknown: {missing} is not stated", settle)
    if missing:
        return Ripple(0.0, f", ripple not included: {missing} is not stated")
    frequencies = _frequencies(around)
    fastest = max(frequencies)
    boxes = [case.narrow(around.box) for case in around.cases]
    slow = frozenset(k for k, f in enumerate(frequencies) if f < fastest / _MUCH_SLOWER)
    volts = swing(around.reading, around.route, boxes, slow)
    lowest = min(f for k, f in enumerate(frequencies) if k not in slow)
    return Ripple(volts / ((carrier.inductance or math.inf) * lowest) / 2)


def _missing_for_ripple(carrier: Carrier, around: Surroundings) -> tuple[str, tuple[str, ...]]:
    """The datum that the ripple waits for in words, and what would settle it; else nothing."""
    if not carrier.inductance:
        return "the inductance", (f"the inductance of {carrier.part}",)
    if not any(_frequencies(around)):
        return "the switching frequency", ("switching: {frequency: ...}",)
    boxes = [case.narrow(around.box) for case in around.cases]
    voltages = open_voltages(around.reading, around.route, boxes)
    return " and ".join(voltages), voltages


def _frequencies(around: Surroundings) -> list[float]:
    """The switching frequency of each step of the route, hertz; 0 where nobody states it.

    A group of diodes alone, without a winding, follows the line and not the switching.
    """
    found = []
    for step in around.route.steps:
        cluster = around.reading.clusters[step.cluster]
        if not cluster.gated and not any(link.core for link in cluster.links):
            found.append(0.0)
            continue
        nets = {
            net
            for link in cluster.positions
            if link.position
            for net in (link.position.start, link.position.end)
        }
        own = [
            switching.frequency
            for net, switching in around.stage.leg_switching.items()
            if net in nets and switching.frequency
        ]
        found.append(min(own, default=around.stage.switching.frequency or 0.0))
    return found
