"""What guards a port: a fuse in its line, a way of surviving reversal, a surge clamp."""

from collections import deque
from collections.abc import Iterator

from rulecheck.facts.feeding import Wires
from rulecheck.facts.inputs import Inputs
from rulecheck.facts.line_facts import fused_nets
from rulecheck.parts import Conduction, Kind, Part
from rulecheck.stage import Port, PortKind
from rulecheck.values import Unknown

_POLARISED = ("electrolytic", "tantalum")
_CLAMPS = frozenset({Kind.ZENER, Kind.VARISTOR})
_FEED_RESISTANCE = 1e3
"""Ohm; a larger resistor limits a reversed current to nothing that harms."""


def is_fused(inputs: Inputs, wires: Wires, port: Port) -> bool | Unknown:
    """A fuse or breaker in one line of two, in every line of a set of phases."""
    lines = {net for name, net in fused_nets(inputs, wires) if name == port.name}
    wanted = set(port.nets)
    fused = wanted <= lines if port.kind is PortKind.PHASES else bool(wanted & lines)
    if fused:
        return True
    unread = (
        inputs.part_by_name[name]
        for net in port.nets
        for name in inputs.parts_at_net.get(net, ())
        if inputs.part_by_name[name].kind is Kind.UNKNOWN
    )
    part = next(unread, None)
    return False if part is None else part.missing("kind")


def is_surge_clamped(inputs: Inputs, port: Port) -> bool:
    """Every net of the port but one has a clamp to another net of it."""
    nets = set(port.nets) | ({port.neutral} if port.neutral else set())
    clamped = [
        {inputs.merged(net) for net in part.nets}
        for net in port.nets
        for part in _at(inputs, net)
        if part.kind in _CLAMPS
    ]
    inside = [pair for pair in clamped if pair <= nets and len(pair) == 2]
    return len(set().union(*inside)) >= len(nets) if inside else False


def is_reverse_protected(inputs: Inputs, wires: Wires, port: Port) -> bool | Unknown:
    """Turned round, the port drives no current; or a diode across it blows its fuse."""
    if port.kind is not PortKind.DC:
        return False
    plus, minus = port.nets
    if not _conducts(inputs, minus, plus):
        return True
    across = any(minus == tail and plus == head for tail, head in _free_ways(inputs, minus))
    return is_fused(inputs, wires, port) if across else False


def _conducts(inputs: Inputs, start: str, end: str) -> bool:
    """Whether current can flow from start to end with all gates off."""
    seen = {start}
    waiting = deque([start])
    while waiting:
        for _, head in _ways(inputs, waiting.popleft()):
            if head == end:
                return True
            if head not in seen:
                seen.add(head)
                waiting.append(head)
    return False


def _ways(inputs: Inputs, net: str) -> Iterator[tuple[str, str]]:
    yield from _free_ways(inputs, net)
    for part in _at(inputs, net):
        if _passes_both_ways(part):
            yield from ((net, inputs.merged(n)) for n in part.nets if inputs.merged(n) != net)


def _free_ways(inputs: Inputs, net: str) -> Iterator[tuple[str, str]]:
    for part in _at(inputs, net):
        for edge in part.edges:
            if edge.conduction is Conduction.FREE and inputs.merged(edge.tail) == net:
                yield net, inputs.merged(edge.head)


def _passes_both_ways(part: Part) -> bool:
    if part.kind is Kind.INDUCTOR:
        return True
    if part.kind is Kind.RESISTOR:
        return isinstance(part.value, Unknown) or part.value < _FEED_RESISTANCE
    return part.kind is Kind.CAPACITOR and part.facts.get("ratings.dielectric") in _POLARISED


def _at(inputs: Inputs, net: str) -> list[Part]:
    return [inputs.part_by_name[name] for name in inputs.parts_at_net.get(net, ())]
