"""Facts of current transformers and common-mode chokes: how they are connected."""

from collections.abc import Iterator

from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.feeding import Wires, find_wires
from rulecheck.facts.inputs import Inputs
from rulecheck.facts.terms import SubjectTerm, link, text, yes_no
from rulecheck.parts import Kind, Part, through_nets
from rulecheck.values import Unknown

LINE_MAGNETIC = SubjectTerm(
    "line-magnetic",
    "A current transformer or a common-mode choke in a line.",
    (
        text("kind", "`current-transformer` or `common-mode-choke`."),
        yes_no("burdened", "Of a current transformer: a resistor closes its secondary."),
        yes_no("currents-cancel", "Of a choke: the lines of a port pass it so that fluxes cancel."),
    ),
    (link("part", "part", "The same thing as a part."),),
)
_BURDEN = 10e3
"""Ohm; a larger resistor is no burden."""


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    wires = find_wires(inputs)
    kinds = (Kind.CURRENT_TRANSFORMER, Kind.COMMON_MODE_CHOKE)
    parts = (part for part in inputs.stage.parts.parts if part.kind in kinds)
    return tuple(_subject(inputs, wires, part) for part in parts)


def _subject(inputs: Inputs, wires: Wires, part: Part) -> Subject:
    choke = part.kind is Kind.COMMON_MODE_CHOKE
    values: dict[str, Value] = {
        "kind": part.kind.value,
        "burdened": True if choke else _burdened(inputs, part),
        "currents-cancel": _cancel(inputs, wires, part) if choke else True,
    }
    links = {"part": (part.name,)}
    return Subject("line-magnetic", part.name, values, links, (part.name,), part.nets, part.span)


def _burdened(inputs: Inputs, part: Part) -> bool:
    """A way from the one end of the secondary to the other through resistors and diodes."""
    start, end = part.net("secondary-1"), part.net("secondary-2")
    if start is None or end is None:
        return False
    goal, seen = inputs.merged(end), {inputs.merged(start)}
    waiting = list(seen)
    while waiting:
        for net in _beyond(inputs, part, waiting.pop()):
            if net == goal:
                return True
            if net not in seen:
                seen.add(net)
                waiting.append(net)
    return False


def _beyond(inputs: Inputs, own: Part, net: str) -> Iterator[str]:
    for name in inputs.parts_at_net.get(net, ()):
        part = inputs.part_by_name[name]
        small = part.kind is Kind.RESISTOR and (
            isinstance(part.value, Unknown) or part.value <= _BURDEN
        )
        if name != own.name and (small or part.kind in (Kind.DIODE, Kind.ZENER)):
            yield from (inputs.merged(other) for other in part.nets)


def _cancel(inputs: Inputs, wires: Wires, part: Part) -> bool | Unknown:
    """Lines of one port that come to the choke by pins of one side; it is not known of others."""
    spelled = {net.lower(): net for net in inputs.stage.merged}
    sides = [{pair[0] for pair in through_nets(part)}, {pair[1] for pair in through_nets(part)}]
    for port in inputs.stage.ports:
        named = [spelled.get(net.lower(), net) for net in port.named_nets or port.nets]
        met = [_reach(wires, part.name, net) for net in named]
        entered = [[bool(side & nets) for side in sides] for nets in met]
        at_choke = [pair for pair in entered if any(pair)]
        if len(at_choke) >= 2 and all(sum(pair) == 1 for pair in at_choke):
            return len({pair.index(True) for pair in at_choke}) == 1
    settle = f"a port both lines of which lead to {part.name}"
    return Unknown(f"lines through {part.name}", settle)


def _reach(wires: Wires, without: str, start: str) -> set[str]:
    seen = {start}
    waiting = [start]
    while waiting:
        for name, behind in wires.at.get(waiting.pop(), ()):
            if name != without and behind not in seen:
                seen.add(behind)
                waiting.append(behind)
    return seen
