"""In which directions positions conduct while some of their gates are on.

Q1 with its gate on          both ways
a back-to-back pair of which one gate is on: one way through the other's diode
all gates off                the free paths alone
"""

from collections.abc import Collection, Iterable, Mapping

from rulecheck.demand.states import RawState
from rulecheck.demand.topology import Cluster
from rulecheck.parts import Conduction
from rulecheck.stage import Position
from rulecheck.values import AffineForm

Ways = Mapping[str, tuple[bool, bool]]
"""By position: whether it conducts from start to end, and from end to start."""


def ways_of(cluster: Cluster, devices_on: Collection[str]) -> Ways:
    """What the group's positions conduct with the gates of these devices on, all others off."""
    return {
        link.name: _ways(link.position, devices_on) for link in cluster.positions if link.position
    }


def _ways(position: Position, devices_on: Collection[str]) -> tuple[bool, bool]:
    onward: dict[str, list[str]] = {}
    for edge in position.edges:
        gated = edge.conduction is Conduction.GATED and edge.part in devices_on
        if gated or edge.conduction is Conduction.FREE:
            onward.setdefault(edge.tail, []).append(edge.head)
    forward = _reaches(onward, position.start, position.end)
    return forward, _reaches(onward, position.end, position.start)


def _reaches(onward: Mapping[str, Iterable[str]], start: str, end: str) -> bool:
    seen, waiting = {start}, [start]
    while waiting:
        for net in onward.get(waiting.pop(), ()):
            if net not in seen:
                seen.add(net)
                waiting.append(net)
    return end in seen


def forms_while(cluster: Cluster, state: RawState, ways: Ways) -> list[AffineForm] | None:
    """Forms that are zero or positive where the positions conduct so; None: they cannot at all.

    An on position conducts its current the way it may; an off one is not forward-biased in a
    direction in which it would conduct.
    """
    forms: list[AffineForm] = []
    for link in cluster.positions:
        forward, reverse = ways[link.name]
        if link.name in state.on:
            if not forward and not reverse:
                return None
            current = state.solution.on_currents[link.name]
            forms += [] if reverse else [current]
            forms += [] if forward else [-current]
        else:
            voltage = state.solution.off_voltages[link.name]
            forms += [-voltage] if forward else []
            forms += [voltage] if reverse else []
    return forms
