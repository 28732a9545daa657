"""Which blocks a stage has: its ports, its filters and transformers, its legs and bridges."""

from collections.abc import Iterable, Mapping

from rulecheck.demand import Bridge, Demands, Leg
from rulecheck.parts import Kind
from rulecheck.report.figures import range_figure
from rulecheck.report.quadrant_result import QuadrantResult
from rulecheck.report.review.blocks import Block, draw_blocks, in_natural_order
from rulecheck.report.review.drawing import BlockView, Mark
from rulecheck.report.review.drawn_legs import Marks
from rulecheck.stage import BranchKind, Port, PortKind, Stage
from rulecheck.values import natural_key
from rulecheck.values.record import Record


class _Members(Record):
    """A leg or bridge: its legs and all their positions."""

    name: str
    kind: str
    legs: tuple[Leg, ...]
    positions: tuple[str, ...]


def block_view(
    stage: Stage, demands: Demands, result: QuadrantResult, marks: Marks
) -> BlockView | None:
    """The stage as blocks; None where they are too many for a drawing."""
    groups = _groups(demands)
    taken = {name for group in groups for name in group.positions}
    blocks = [
        *(_port_block(port, stage, marks) for port in stage.ports),
        *(_group_block(group, stage, result, marks) for group in groups),
        *_inductors(stage, marks),
        *_transformers(stage, marks),
        *_single(result, taken, stage, marks),
    ]
    return draw_blocks(in_natural_order(blocks), _capacitor_words(stage, demands))


def _returns(stage: Stage) -> frozenset[str]:
    """Ground, and the minus nets of ports where they are no port's plus: all stands on them."""
    two = [port.nets for port in stage.ports if port.kind is not PortKind.PHASES]
    minus = {nets[1] for nets in two} - {nets[0] for nets in two}
    return frozenset({stage.ground, *minus})


def _without_returns(nets: Iterable[str], stage: Stage) -> tuple[str, ...]:
    left_out = _returns(stage)
    return tuple(dict.fromkeys(net for net in nets if net not in left_out))


def _port_block(port: Port, stage: Stage, marks: Marks) -> Block:
    words = {PortKind.DC: "DC port", PortKind.AC: "AC port", PortKind.PHASES: "phases"}
    figures = ((port.voltage, "V"), (port.current, "A"), (port.power, "W"))
    stated = [range_figure(value, unit) for value, unit in figures if value is not None]
    nets = _without_returns((*port.nets, *((port.neutral,) if port.neutral else ())), stage)
    found = marks.parts.get(port.name, ())
    return Block(port.name, "port", (words[port.kind], *stated), nets, found)


def _groups(demands: Demands) -> list[_Members]:
    """Bridges with their legs, then the legs of no bridge; each leg once."""
    by_name = {leg.name: leg for leg in demands.legs}
    groups: list[_Members] = []
    used: set[str] = set()
    for bridge in demands.bridges:
        legs = tuple(by_name[name] for name in bridge.legs if name in by_name)
        if legs and not used & {leg.name for leg in legs}:
            groups.append(_members(bridge, legs))
            used |= {leg.name for leg in legs}
    alone = (leg for leg in demands.legs if leg.name not in used)
    return [*groups, *(_members(leg, (leg,)) for leg in alone)]


def _members(named: Bridge | Leg, legs: tuple[Leg, ...]) -> _Members:
    positions = (name for leg in legs for name in (*leg.high, *leg.low, *leg.others))
    return _Members(named.name, named.kind, legs, tuple(dict.fromkeys(positions)))


def _group_block(group: _Members, stage: Stage, result: QuadrantResult, marks: Marks) -> Block:
    rows = {row.position.name: row for row in result.positions}
    inside = {net for name in group.positions if name in rows
              for net in (rows[name].position.start, rows[name].position.end)}  # fmt: skip
    own = [net for leg in group.legs for net in (leg.rails[0], leg.midpoint, leg.rails[-1])]
    outer = [net for net in sorted(inside, key=natural_key) if _leads_on(net, stage)]
    nets = _without_returns(dict.fromkeys((*own, *outer)), stage)
    found = [mark for leg in group.legs for mark in marks.legs.get(leg.name, ())]
    found += [mark for name in group.positions for mark in marks.parts.get(name, ())]
    return Block(
        group.name,
        "leg",
        (group.kind, ", ".join(group.positions)),
        nets,
        tuple(dict.fromkeys(found)),
    )


def _leads_on(net: str, stage: Stage) -> bool:
    return any(net in port.nets for port in stage.ports)


def _inductors(stage: Stage, marks: Marks) -> list[Block]:
    """Inductors between the same nets are one block."""
    found: dict[frozenset[str], list[str]] = {}
    for branch in stage.branches:
        if branch.kind is BranchKind.CURRENT and branch.part:
            found.setdefault(frozenset((branch.start, branch.end)), []).append(branch.part)
    return [
        Block(
            ", ".join(names), "filter", ("inductor",) if len(names) == 1 else ("inductors",),
            _without_returns(sorted(nets, key=natural_key), stage), _marks_of(names, marks),
        )
        for nets, names in found.items()
    ]  # fmt: skip


def _transformers(stage: Stage, marks: Marks) -> list[Block]:
    return [
        Block(
            core.name, "filter", ("transformer", ", ".join(core.parts)),
            _without_returns((net for pair in core.windings for net in pair), stage),
            _marks_of((core.name, *core.parts), marks),
        )
        for core in stage.transformers
    ]  # fmt: skip


def _single(result: QuadrantResult, taken: set[str], stage: Stage, marks: Marks) -> list[Block]:
    """Positions of no leg."""
    return [
        Block(
            row.position.name, "position", ("switch position",),
            _without_returns((row.position.start, row.position.end), stage),
            marks.parts.get(row.position.name, ()),
        )
        for row in result.positions
        if row.position.name not in taken
    ]  # fmt: skip


def _marks_of(names: Iterable[str], marks: Marks) -> tuple[Mark, ...]:
    return tuple(dict.fromkeys(mark for name in names for mark in marks.parts.get(name, ())))


def _capacitor_words(stage: Stage, demands: Demands) -> Mapping[str, str]:
    """Of a net with bulk capacitors to a return: how many there are."""
    returns = _returns(stage)
    count: dict[str, int] = {}
    for branch in stage.branches:
        part = stage.parts.by_name.get(branch.part)
        ends = [net for net in (branch.start, branch.end) if net not in returns]
        if part is not None and part.kind is Kind.CAPACITOR and len(ends) == 1:
            count[ends[0]] = count.get(ends[0], 0) + 1
    return {net: f"⊣⊢ {number}" for net, number in count.items()}
