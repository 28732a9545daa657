"""Which free paths recover: those that the other position of a leg turns off by turning on."""

import math
from collections.abc import Mapping, Sequence

from rulecheck.demand.account import settling_of
from rulecheck.demand.analysis import Worked
from rulecheck.demand.demands import HardCommutation, Leg, PositionDemand, Witness
from rulecheck.stage import Position
from rulecheck.values import Interval, Unknown, natural_key
from rulecheck.values.record import Record


def find_hard_commutations(
    legs: Sequence[Leg], worked: Worked, demands: Mapping[str, PositionDemand]
) -> tuple[HardCommutation, ...]:
    """In a two-level leg: free paths that the other, gated position turns off by turning on.

    Where the voltage or the current is not known the pair is kept, with what would settle it.
    """
    by_name = {position.name: position for position in worked.stage.positions}
    settle = {name: line for name, _, line in settling_of(worked)}
    found = []
    for leg in legs:
        if not _hard(leg, demands):
            continue
        for mine, other in ((leg.high, leg.low), (leg.low, leg.high)):
            if by_name[other[0]].gated:
                recovering = _Recovering(by_name[mine[0]], demands[mine[0]], worked, settle)
                found += recovering.turned_off(other[0])
    return tuple(sorted(found, key=lambda item: natural_key(item.position)))


def _hard(leg: Leg, demands: Mapping[str, PositionDemand]) -> bool:
    """A leg of two positions between two rails, or one that may be that.

    While the voltage between the rails is not known, they may as well alternate.
    """
    if leg.kind in ("half-bridge leg", "chopper cell"):
        return True
    pair = (*leg.high, *leg.low)
    alone = len(leg.high) == len(leg.low) == 1 and not leg.others and len(leg.rails) == 2
    return alone and any(isinstance(demands[name].off_voltage, Unknown) for name in pair)


class _Recovering(Record):
    """A position whose free path another one may turn off."""

    position: Position
    demand: PositionDemand
    worked: Worked
    settle: Mapping[str, str]

    def turned_off(self, by: str) -> list[HardCommutation]:
        ways = ((self.position.free_forward, True), (self.position.free_reverse, False))
        for free, forward in ways:
            if not free:
                continue
            flowing = self._largest(
                self.demand.on_current, self.demand.on_low, self.demand.on_high, forward
            )
            standing = self._largest(
                self.demand.off_voltage, self.demand.off_low, self.demand.off_high, not forward
            )
            if all(isinstance(value, Unknown) or value > 0.0 for value in (flowing, standing)):
                return [HardCommutation(self.position.name, by, flowing, standing)]
        return []

    def _largest(
        self,
        span: Interval | Unknown,
        low: Witness | None,
        high: Witness | None,
        positive: bool,
    ) -> float | Unknown:
        """The largest value of that sign; below zero where there is none."""
        if isinstance(span, Unknown):
            return span
        value = span.high if positive else -span.low
        witness = high if positive else low
        if math.isfinite(value) or witness is None:
            return value
        box = self.worked.box
        names = {*witness.form.names, *witness.form.substitute(box.means).names}
        lines = [self.settle.get(n, n) for n in sorted(names) if not box.ranges[n].bounded]
        return Unknown(f"recovery of {self.position.name}", " and ".join(dict.fromkeys(lines)))
