"""Islands of nets: what parts join, and whether a ground holds their potential.

A core or an isolator between two islands leaves the far one without a ground on purpose.
"""

from collections.abc import Mapping

from rulecheck.facts.inputs import Inputs
from rulecheck.parts import Kind
from rulecheck.values import Unknown, natural_key
from rulecheck.values.record import Record

_APART = frozenset({Kind.ISOLATOR, Kind.WINDING_SET, Kind.CONTROLLER, Kind.DRIVER, Kind.OTHER})

_LEAVES = _APART | {Kind.CONNECTOR, Kind.SENSOR}
"""Kinds beyond which a potential may be fixed by what the netlist does not show."""


class Island(Record):
    """Nets joined by parts; `head` is the first of them in natural order."""

    head: str
    size: int
    grounded: bool | Unknown
    """Not known where a part that is not understood may hold it."""


def find_islands(inputs: Inputs) -> Mapping[str, Island]:
    """Every net's island. Linear in the number of pins, by union of sets."""
    above: dict[str, str] = {}

    def root(net: str) -> str:
        while above.setdefault(net, net) != net:
            above[net] = above[above[net]]
            net = above[net]
        return net

    for part in inputs.stage.parts.parts:
        nets = part.nets
        for net in nets:
            root(net)
        if part.kind not in _APART:
            for net in nets[1:]:
                above[root(net)] = root(nets[0])
    for port in inputs.stage.ports:
        for net in port.nets:
            root(net)
    for net in inputs.stage.merged:
        root(net)
    return _described(inputs, {net: root(net) for net in sorted(above, key=natural_key)})


def _described(inputs: Inputs, roots: Mapping[str, str]) -> Mapping[str, Island]:
    members: dict[str, list[str]] = {}
    for net, root in roots.items():
        members.setdefault(root, []).append(net)
    held = {roots[net] for net in inputs.grounds}
    wound = {name for core in inputs.stage.parts.cores for name in core.windings}
    for part in inputs.stage.parts.parts:
        if part.kind in _LEAVES or part.name in wound:
            held |= {roots[net] for net in part.nets}
    unclear: dict[str, Unknown] = {}
    for part in inputs.stage.parts.parts:
        if part.kind is Kind.UNKNOWN:
            for net in part.nets:
                unclear.setdefault(roots[net], part.missing("kind"))
    islands = {
        root: Island(nets[0], len(nets), root in held or unclear.get(root, False))
        for root, nets in members.items()
    }
    return {net: islands[root] for net, root in roots.items()}
