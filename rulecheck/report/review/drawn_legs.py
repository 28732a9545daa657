"""Which schematics a stage needs: one a leg, and one for each knot of positions in no leg."""

from collections.abc import Iterable, Mapping, Sequence

from rulecheck.demand import Demands, Leg
from rulecheck.parts import Kind, Part
from rulecheck.report.quadrant_result import PositionResult, QuadrantResult
from rulecheck.report.review.drawing import Mark, Schematics
from rulecheck.report.review.layout import TwoTerminal
from rulecheck.report.review.position_pages import standing_of
from rulecheck.report.review.schematic import Device, Outlet, Subject, draw_schematic
from rulecheck.report.review.symbols import draw_symbol
from rulecheck.stage import Branch, BranchKind, Role, Stage
from rulecheck.values import natural_key
from rulecheck.values.record import Record

_GATES = ("gate", "base")
_LINES = ("selector leg", "rectifier leg")
_MOST_OUTLETS = 3


class Marks(Record):
    """Findings by the part, and by the leg, that they are about."""

    parts: Mapping[str, tuple[Mark, ...]]
    legs: Mapping[str, tuple[Mark, ...]]


def draw_legs(stage: Stage, demands: Demands, result: QuadrantResult, marks: Marks) -> Schematics:
    """Every position in one drawing: with its leg, or with those that it shares a net with."""
    rows = {row.position.name: row for row in result.positions}
    legs = [_leg_subject(legs, stage, rows, marks) for legs in _sharing(demands.legs)]
    taken = {name for leg in demands.legs for name in _members(leg)}
    rest = [row for name, row in rows.items() if name not in taken]
    subjects = [*legs, *(_knot_subject(knot, stage, marks) for knot in _knots(rest, stage.ground))]
    names = sorted({d.symbol for s in subjects for d in s.devices} | {"inductor"})
    symbols = {name: draw_symbol(name) for name in names}
    return Schematics(
        tuple(draw_schematic(subject, symbols) for subject in subjects),
        tuple(symbols.values()),
        frozenset(name for subject in subjects for name in _names(subject)),
    )


def _names(subject: Subject) -> Iterable[str]:
    yield subject.name
    yield from (device.part.name for device in subject.devices)
    yield from (outlet.name for outlet in subject.outlets)


def _members(leg: Leg) -> tuple[str, ...]:
    return (*leg.high, *leg.low, *leg.others)


def _sharing(legs: Sequence[Leg]) -> list[list[Leg]]:
    """Legs that have a position in common, together; each such set is drawn once."""
    sets: list[list[Leg]] = []
    for leg in legs:
        own = set(_members(leg))
        joined = [found for found in sets if any(own & set(_members(other)) for other in found)]
        kept = [found for found in sets if found not in joined]
        sets = [*kept, [*(other for found in joined for other in found), leg]]
    return sets


def _leg_subject(
    legs: Sequence[Leg], stage: Stage, rows: Mapping[str, PositionResult], marks: Marks
) -> Subject:
    """The legs' positions between the rails of the first of them."""
    names = dict.fromkeys(name for leg in legs for name in _members(leg))
    members = [rows[name] for name in names if name in rows]
    devices = [device for row in members for device in _devices(row, stage, marks)]
    heights = _rail_heights(legs[0])
    capacitors = () if legs[0].kind in _LINES else _capacitors(heights, stage, marks)
    return Subject(
        ", ".join(leg.name for leg in legs),
        "; ".join(f"{leg.name}: {leg.kind}" for leg in legs),
        (*devices, *capacitors),
        heights,
        _ends(members) | {leg.midpoint for leg in legs},
        tuple(outlet for leg in legs for outlet in _outlets(leg.midpoint, stage, marks)),
        tuple(mark for leg in legs for mark in marks.legs.get(leg.name, ())),
        _notes(members, stage),
    )


def _ends(rows: Iterable[PositionResult]) -> frozenset[str]:
    return frozenset(net for row in rows for net in (row.position.start, row.position.end))


def _rail_heights(leg: Leg) -> dict[str, float]:
    """The rails from top to bottom; lines that a leg selects among all stand above it."""
    if leg.kind in _LINES and (len(leg.rails) > 2 or leg.kind == _LINES[0]):
        return {net: 1.0 - 0.02 * k for k, net in enumerate(leg.rails)} | {leg.midpoint: 0.0}
    step = 1.0 / (len(leg.rails) - 1)
    return {net: 1.0 - step * k for k, net in enumerate(leg.rails)}


def _devices(row: PositionResult, stage: Stage, marks: Marks) -> list[Device]:
    """The devices of a position, each from the net that its forward current enters."""
    devices = []
    for name in row.position.parts:
        edge = next((edge for edge in row.position.edges if edge.part == name), None)
        part = stage.parts.by_name.get(name)
        if edge is None or part is None:
            continue
        gate = next((pin.net for pin in part.pins if pin.role in _GATES), "")
        devices.append(Device(
            TwoTerminal(name, edge.tail, edge.head), symbol_of(part), part.text,
            stage.merged.get(gate, gate), standing_of(row), marks.parts.get(name, ()),
        ))  # fmt: skip
    return devices


def symbol_of(part: Part) -> str:
    """The symbol of a kind; a MOSFET without a body diode and a PNP have their own."""
    if part.facts.get("body-diode") == "none":
        return f"{part.kind.value}-without-diode"
    if part.kind is Kind.BJT and part.facts.get("polarity") == "pnp":
        return "bjt-pnp"
    return part.kind.value


def _capacitors(heights: Mapping[str, float], stage: Stage, marks: Marks) -> list[Device]:
    """Bulk capacitors from rail to rail, those in parallel as one."""
    found: dict[tuple[str, str], list[str]] = {}
    for branch in stage.branches:
        part = stage.parts.by_name.get(branch.part)
        if part is None or part.kind is not Kind.CAPACITOR:
            continue
        if branch.start in heights and branch.end in heights:
            ends = sorted((branch.start, branch.end), key=lambda net: -heights[net])
            found.setdefault((ends[0], ends[1]), []).append(part.name)
    return [
        Device(
            TwoTerminal(names[0], *ends), "capacitor",
            f"and {len(names) - 1} more" if len(names) > 1 else "", "", "",
            tuple(mark for name in names for mark in marks.parts.get(name, ())),
        )
        for ends, names in found.items()
    ]  # fmt: skip


def _outlets(midpoint: str, stage: Stage, marks: Marks) -> tuple[Outlet, ...]:
    branches = [
        _outlet(branch, midpoint, marks)
        for branch in stage.branches
        if branch.kind is BranchKind.CURRENT and midpoint in (branch.start, branch.end)
    ]
    windings = [
        Outlet(
            midpoint,
            core.name,
            "to " + (end if start == midpoint else start),
            True,
            marks.parts.get(core.name, ()),
        )
        for core in stage.transformers
        for start, end in core.windings
        if midpoint in (start, end)
        for found in (marks.parts.get(core.name, ()),)
    ]
    return tuple([*branches, *windings][:_MOST_OUTLETS])


def _outlet(branch: Branch, midpoint: str, marks: Marks) -> Outlet:
    name = branch.part or branch.port
    to = _other(midpoint, branch.start, branch.end) if branch.part else branch.port
    found = marks.parts.get(name, ())
    return Outlet(midpoint, name, f"to {to}", bool(branch.part), found)


def _other(net: str, start: str, end: str) -> str:
    return end if start == net else start


def _notes(members: Sequence[PositionResult], stage: Stage) -> tuple[str, ...]:
    """Parts that belong to the positions and are not drawn, by their role."""
    names = {name for row in members for name in (row.position.name, *row.position.parts)}
    nets = {net for row in members for net in (row.position.start, row.position.end)}
    by_role: dict[str, list[str]] = {}
    for part, owner in stage.role_of.items():
        role = stage.roles.get(part)
        if role in (Role.SNUBBER, Role.CLAMP, Role.SHARING, Role.GATE_DRIVE) and (
            owner in names or (role is Role.SNUBBER and owner in nets)
        ):
            by_role.setdefault(role.value, []).append(part)
    return tuple(
        f"{role}: {', '.join(sorted(parts, key=natural_key))}"
        for role, parts in sorted(by_role.items())
    )


def _knots(rows: Sequence[PositionResult], ground: str) -> list[list[PositionResult]]:
    """Positions that share a net other than ground, together."""
    knots: list[tuple[set[str], list[PositionResult]]] = []
    for row in rows:
        nets = {row.position.start, row.position.end} - {ground}
        joined = [knot for knot in knots if knot[0] & nets]
        merged = (nets.union(*(k[0] for k in joined)), [r for k in joined for r in k[1]] + [row])
        knots = [knot for knot in knots if knot not in joined] + [merged]
    return [members for _, members in knots]


def _knot_subject(rows: Sequence[PositionResult], stage: Stage, marks: Marks) -> Subject:
    names = [row.position.name for row in rows]
    devices = [device for row in rows for device in _devices(row, stage, marks)]
    outer = {net: 0.8 for row in rows for net in (row.position.start,)}
    outer |= {row.position.end: 0.2 for row in rows if row.position.end not in outer}
    if stage.ground in outer:
        outer[stage.ground] = 0.0
    return Subject(
        ", ".join(names), f"{', '.join(names)}: part of no leg", tuple(devices),
        _spread(outer), _ends(rows), (), (), _notes(rows, stage),
    )  # fmt: skip


def _spread(heights: Mapping[str, float]) -> dict[str, float]:
    """The same order with every net at a height of its own."""
    order = sorted(heights, key=lambda net: (-heights[net], natural_key(net)))
    return {net: 1.0 - k / max(len(order) - 1, 1) for k, net in enumerate(order)}
