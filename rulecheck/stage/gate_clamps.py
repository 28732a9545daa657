"""Zeners from a gate to its device's own return, and what they hold the gate to.

A<ZG-18<K at GATE, anode at SOURCE             +18 V, -0.7 V
two back to back                               +18.7 V, -18.7 V
"""

from collections.abc import Collection, Iterator

from rulecheck.parts import Kind, Part
from rulecheck.stage.gate_drive import GateClamp
from rulecheck.stage.layout import Layout, Touch
from rulecheck.values import Unknown, natural_key

_DROP = 0.7
"""Volts across a zener diode that conducts forward (common practice)."""

_Level = float | Unknown


def find_clamps(
    layout: Layout, nets: Collection[str], returns: Collection[str]
) -> tuple[GateClamp, ...]:
    """Of all zeners, alone or two in series, between these nets and the returns."""
    found: dict[tuple[str, ...], GateClamp] = {}
    for net in sorted(nets):
        for touch in _zeners(layout, net):
            for chain in _chains(layout, touch, net, returns):
                clamp = _clamp(chain)
                found.setdefault(clamp.parts, clamp)
    return tuple(found.values())


def _zeners(layout: Layout, net: str) -> tuple[Touch, ...]:
    return tuple(t for t in layout.touches.get(net, ()) if t.part.kind is Kind.ZENER)


def _chains(
    layout: Layout, touch: Touch, net: str, returns: Collection[str]
) -> Iterator[tuple[Touch, ...]]:
    """One zener, or two in series, each with the pin nearer to the gate."""
    for other in layout.others(touch.part, net):
        if other in returns:
            yield (touch,)
            continue
        for second in _zeners(layout, other):
            if second.part.name != touch.part.name and set(layout.others(second.part, other)) & set(
                returns
            ):
                yield (touch, second)


def _clamp(chain: tuple[Touch, ...]) -> GateClamp:
    names = tuple(sorted((touch.part.name for touch in chain), key=natural_key))
    highest: _Level = 0.0
    lowest: _Level = 0.0
    for touch in chain:
        breakdown = _breakdown(touch.part)
        up, down = (breakdown, _DROP) if touch.role == "cathode" else (_DROP, breakdown)
        highest, lowest = _plus(highest, up, 1.0), _plus(lowest, down, -1.0)
    return GateClamp(names, highest, lowest)


def _plus(level: _Level, step: _Level, sign: float) -> _Level:
    if isinstance(level, Unknown):
        return level
    return step if isinstance(step, Unknown) else level + sign * step


def _breakdown(part: Part) -> _Level:
    datum = part.datum("ratings.blocking")
    if isinstance(datum, Unknown):
        return datum
    return datum.value if isinstance(datum.value, float) else datum.value.high
