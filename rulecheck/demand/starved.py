"""Positions that would carry one direction only although, over a period, they can carry nothing.

    a panel not connected to its converter: C1 with a stated voltage, and Q1 alone at its net

A capacitor carries no DC. Where nothing but one position joins a capacitor to the rest, the mean
of that position is zero; a current of one sign has no such mean, so something is not drawn or
not stated. Which of the two cannot be known here.
"""

from collections.abc import Iterator, Mapping

from rulecheck.demand.analysis import Worked
from rulecheck.demand.demands import PositionDemand, Undetermined
from rulecheck.values import Interval


def starved(worked: Worked, demands: Mapping[str, PositionDemand]) -> Iterator[Undetermined]:
    """What nothing feeds or loads, one entry a position."""
    for cluster in worked.topology.clusters:
        for link in cluster.positions:
            mean = worked.means.branches.get(link.name)
            current = demands[link.name].on_current
            if mean is None or not mean.is_zero or not isinstance(current, Interval):
                continue
            one_sign = current.low >= 0.0 or current.high <= 0.0
            if one_sign and current.bounded and current.magnitude > 0.0:
                what = f"what feeds or loads the far side of {link.name}: its mean current is zero"
                yield Undetermined(what, "a port there, with `supplies:` or `draws:`")
