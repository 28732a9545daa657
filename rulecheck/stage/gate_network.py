"""The resistance between a gate and what pulls it, one direction at a time.

HO - 22 - GH                 turn-on: 22 ohm (the diode blocks)
HO - 6.8 - K<D3<A - GH       turn-off: 22 and 6.8 ohm side by side, 5.19 ohm
"""

import math
from collections.abc import Collection, Mapping

from rulecheck.values import Unknown
from rulecheck.values.record import Record

_FROM, _TO = "\0from", "\0to"
_CONDUCTS = 1e-9
"""Of the whole voltage; a diode with less across it stays off."""


class Resistive(Record):
    """A resistor, or a bead of 0 ohm, between two nets."""

    name: str
    ends: tuple[str, str]
    ohms: float | Unknown


class OneWay(Record):
    """A diode, from anode to cathode."""

    name: str
    anode: str
    cathode: str


class Network(Record):
    resistors: tuple[Resistive, ...]
    diodes: tuple[OneWay, ...]


def resistance(network: Network, start: Collection[str], end: Collection[str]) -> float | Unknown:
    """Ohms from the nets of `start`, held high, to those of `end`, held low; diodes are ideal.

    Infinite where no current has a way. Kirchhoff's laws, by eliminating one net after another
    (star-mesh transformation).
    """
    names = dict.fromkeys(start, _FROM) | dict.fromkeys(end, _TO)
    if set(start) & set(end):
        return 0.0
    for item in network.resistors:
        if isinstance(item.ohms, Unknown):
            return item.ohms
    return _settle(network, names)


def _settle(network: Network, names: dict[str, str]) -> float:
    """Close one diode after another that has voltage in its direction."""
    waiting = list(network.diodes)
    while True:
        joined = _merge_zero_ohms(network, names)
        if joined(_FROM) == joined(_TO):
            return 0.0
        mesh = _conductances(network, joined)
        potentials = _potentials(mesh, joined(_FROM), joined(_TO))
        closing = next(
            (
                diode
                for diode in waiting
                if potentials.get(joined(diode.anode), 0.0)
                > potentials.get(joined(diode.cathode), 0.0) + _CONDUCTS
            ),
            None,
        )
        if closing is None:
            conductance = _between(mesh, joined(_FROM), joined(_TO))
            return 1.0 / conductance if conductance > 0.0 else float("inf")
        waiting.remove(closing)
        network = Network(
            (*network.resistors, Resistive(closing.name, (closing.anode, closing.cathode), 0.0)),
            tuple(waiting),
        )


class _Joined:
    """Nets that zero ohms make one."""

    def __init__(self, names: Mapping[str, str]) -> None:
        self._parent = dict(names)

    def __call__(self, net: str) -> str:
        while net in self._parent:
            net = self._parent[net]
        return net

    def join(self, one: str, other: str) -> None:
        one, other = self(one), self(other)
        if one == other:
            return
        # the two poles keep their names
        self._parent[other if one in (_FROM, _TO) else one] = one if one in (_FROM, _TO) else other


def _merge_zero_ohms(network: Network, names: Mapping[str, str]) -> _Joined:
    joined = _Joined(names)
    for item in network.resistors:
        if item.ohms == 0.0:
            joined.join(*item.ends)
    return joined


_Mesh = dict[str, dict[str, float]]


def _conductances(network: Network, joined: _Joined) -> _Mesh:
    mesh: _Mesh = {joined(_FROM): {}, joined(_TO): {}}
    for item in network.resistors:
        one, other = (joined(net) for net in item.ends)
        if one == other or isinstance(item.ohms, Unknown) or item.ohms == 0.0:
            continue
        _add(mesh, one, other, 1.0 / item.ohms)
    return mesh


def _add(mesh: _Mesh, one: str, other: str, siemens: float) -> None:
    for a, b in ((one, other), (other, one)):
        mesh.setdefault(a, {})[b] = mesh.get(a, {}).get(b, 0.0) + siemens


def _between(mesh: _Mesh, start: str, end: str) -> float:
    left = {net: dict(row) for net, row in mesh.items()}
    for net in sorted(set(left) - {start, end}):
        _eliminate(left, net)
    return left[start].get(end, 0.0)


def _eliminate(mesh: _Mesh, net: str) -> None:
    row = mesh.pop(net)
    for other in row:
        del mesh[other][net]
    total = sum(row.values())
    around = sorted(row)
    for index, one in enumerate(around):
        for other in around[index + 1 :]:
            _add(mesh, one, other, row[one] * row[other] / total)


def _potentials(mesh: _Mesh, start: str, end: str) -> dict[str, float]:
    """Of every net that resistors tie to a pole, with 1 at `start` and 0 at `end`."""
    found = {start: 1.0, end: 0.0}
    for net in sorted(set(mesh) - {start, end}):
        left = {name: dict(row) for name, row in mesh.items()}
        for other in sorted(set(left) - {start, end, net}):
            _eliminate(left, other)
        up, down = left[net].get(start, 0.0), left[net].get(end, 0.0)
        if up + down > 0.0:
            found[net] = up / (up + down)
    return found


def carrying(network: Network, start: Collection[str], end: Collection[str]) -> tuple[str, ...]:
    """Names of the resistors without which the resistance would be another."""
    whole = resistance(network, start, end)
    return tuple(
        item.name
        for item in network.resistors
        if isinstance(item.ohms, float)
        and item.ohms > 0.0
        and not _alike(resistance(_without(network, item), start, end), whole)
    )


def _alike(one: float | Unknown, other: float | Unknown) -> bool:
    if isinstance(one, Unknown) or isinstance(other, Unknown):
        return one == other
    return math.isclose(one, other, rel_tol=1e-9)


def _without(network: Network, item: Resistive) -> Network:
    return Network(tuple(r for r in network.resistors if r is not item), network.diodes)
