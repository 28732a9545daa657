"""What the facts are collected from, with the look-ups that several subjects need."""

from collections.abc import Iterable, Mapping

from rulecheck.capability import Capabilities
from rulecheck.demand import Demands, Group, Variable
from rulecheck.facts.facts import Bounds, Value
from rulecheck.parts import Datum, Part
from rulecheck.stage import Position, Role, Stage
from rulecheck.values import Interval, Span, Unknown, natural_key
from rulecheck.values.record import Record


class Inputs(Record):
    """The three products and their indexes; nothing in it is a decision."""

    stage: Stage
    capabilities: Capabilities
    demands: Demands
    part_by_name: Mapping[str, Part]
    position_by_name: Mapping[str, Position]
    positions_of_part: Mapping[str, tuple[str, ...]]
    legs_of_position: Mapping[str, tuple[str, ...]]
    group_of_position: Mapping[str, Group]
    devices_at_gate: Mapping[str, tuple[str, ...]]
    """By merged net of a gate or base: the gated devices driven from it."""
    parts_at_net: Mapping[str, tuple[str, ...]]
    """By merged net: everything with a pin there."""
    voltage_between: Mapping[tuple[str, str], Interval | Unknown]
    """By merged nets: the first over the second, where a stiff voltage stands between them."""
    branch_parts: frozenset[str]
    """The parts that are power branches."""
    ports_at_net: Mapping[str, tuple[str, ...]]
    power_nets: frozenset[str]
    """Merged nets at the ends of power branches and at ports."""
    grounds: frozenset[str]
    """The ground and what looks like another, as far as something is on it."""
    spelling: Mapping[str, str]
    """Model texts, which have no case, by lower case -> as first written."""
    variable_by_name: Mapping[str, Variable]
    shared: frozenset[frozenset[str]]
    """Pairs of merged nets with a sharing or snubber part across them."""
    gates_of_position: Mapping[str, tuple[str, ...]]
    """By position: the gates whose traced drive serves a device of it."""
    held_by_ports: Mapping[str, tuple[str, ...]]
    """By merged net: the nets, as written, at which ports with a voltage stand."""

    def merged(self, net: str) -> str:
        return self.stage.merged.get(net, net)

    def span_of_parts(self, names: Iterable[str]) -> Span:
        """The place of the first part that has one; else the netlist's first line."""
        for name in names:
            if name in self.part_by_name:
                return self.part_by_name[name].span
        return Span(self.stage.netlist, 1)

    def related_spans(self, names: Iterable[str]) -> tuple[Span, ...]:
        """The places of all parts but the first."""
        spans = [self.part_by_name[name].span for name in names if name in self.part_by_name]
        return tuple(dict.fromkeys(spans[1:]))

    def parts_of_positions(self, names: Iterable[str]) -> tuple[str, ...]:
        known = (self.position_by_name[name] for name in names if name in self.position_by_name)
        return tuple(dict.fromkeys(part for position in known for part in position.parts))


def gather(stage: Stage, capabilities: Capabilities, demands: Demands) -> Inputs:
    """Index the three products."""
    parts = {part.name: part for part in stage.parts.parts}
    positions = {position.name: position for position in stage.positions}
    return Inputs(
        stage,
        capabilities,
        demands,
        parts,
        positions,
        _grouped((part, p.name) for p in stage.positions for part in p.parts),
        _grouped(
            (name, leg.name) for leg in demands.legs for name in (*leg.high, *leg.low, *leg.others)
        ),
        {name: group for group in demands.groups for name in group.positions},
        _grouped(
            (stage.merged.get(pin.net, pin.net), part.name)
            for part in stage.parts.parts
            if part.gated
            for pin in part.pins
            if pin.role in ("gate", "base")
        ),
        _grouped(
            (stage.merged.get(pin.net, pin.net), part.name)
            for part in stage.parts.parts
            for pin in part.pins
        ),
        _stiff_voltages(stage, demands),
        frozenset(branch.part for branch in stage.branches if branch.part),
        _grouped(
            (net, port.name) for port in stage.ports for net in (*port.nets, port.neutral) if net
        ),
        _power_nets(stage),
        _grounds(stage),
        {part.text.casefold(): part.text for part in reversed(stage.parts.parts)},
        {variable.name: variable for variable in demands.variables},
        frozenset(
            frozenset(stage.merged.get(net, net) for net in parts[name].nets)
            for name, role in stage.roles.items()
            if role in (Role.SHARING, Role.SNUBBER) and name in parts
        ),
        _gates_of_positions(stage),
        _held_by_ports(stage),
    )


def _gates_of_positions(stage: Stage) -> dict[str, tuple[str, ...]]:
    positions = _grouped((part, p.name) for p in stage.positions for part in p.parts)
    return _grouped(
        (position, gate)
        for gate, drive in stage.gate_drives.items()
        for device in drive.devices
        for position in positions.get(device, ())
    )


def _held_by_ports(stage: Stage) -> dict[str, tuple[str, ...]]:
    spelled = {net.lower(): net for net in stage.merged}
    nets = (
        spelled.get(net.lower(), net)
        for port in stage.ports
        if port.voltage is not None
        for net in port.named_nets or port.nets
    )
    return _grouped((stage.merged.get(net, net), net) for net in nets)


def _power_nets(stage: Stage) -> frozenset[str]:
    ends = {net for branch in stage.branches for net in (branch.start, branch.end)}
    return frozenset(ends | {net for port in stage.ports for net in (*port.nets, port.neutral)})


def _grounds(stage: Stage) -> frozenset[str]:
    listed = stage.parts
    on = {pin.net for part in listed.parts for pin in part.pins}
    return frozenset(net for net in (listed.ground, *listed.grounds) if net in on)


def _stiff_voltages(stage: Stage, demands: Demands) -> dict[tuple[str, str], Interval | Unknown]:
    ranges = {variable.name: variable.range for variable in demands.variables}
    found: dict[tuple[str, str], Interval | Unknown] = {}
    for branch in stage.branches:
        span = ranges.get(f"v({branch.name.removeprefix('port/')})")
        if span is None:
            continue
        ends = (branch.start, branch.end)
        # of several side by side, one whose voltage is known speaks for all
        if isinstance(found.get(ends, span), Unknown) or ends not in found:
            found[ends] = span
            found[ends[::-1]] = span if isinstance(span, Unknown) else -span
    return found


def group_name(positions: Iterable[str]) -> str:
    """A group is named after its first position, in natural order."""
    return min(positions, key=natural_key, default="")


def _grouped(pairs: Iterable[tuple[str, str]]) -> dict[str, tuple[str, ...]]:
    found: dict[str, dict[str, None]] = {}
    for key, value in pairs:
        found.setdefault(key, {})[value] = None
    return {key: tuple(values) for key, values in found.items()}


def stated_number(part: Part, path: str) -> Value:
    """A stated figure as one number; of a range the larger magnitude."""
    datum = _stated(part, path)
    if isinstance(datum, Unknown):
        return datum
    return datum.value.magnitude if isinstance(datum.value, Interval) else datum.value


def stated_range(part: Part, path: str) -> Value:
    """A stated figure as a range; a single number is a range of one."""
    datum = _stated(part, path)
    if isinstance(datum, Unknown):
        return datum
    value = datum.value
    return value if isinstance(value, Interval) else Interval(value, value)


def _stated(part: Part, path: str) -> Datum | Unknown:
    """The figure; a missing rating is called one, lest it be taken for what the part sees."""
    datum = part.datum(path)
    group, _, word = path.partition(".")
    if isinstance(datum, Unknown) and group == "ratings":
        return Unknown(f"{word} rating of {part.name}", datum.settle)
    return datum


def at_least(low: float, value: float | Unknown, missing: tuple[Unknown, ...]) -> Value:
    """A number known exactly, or from below with what is missing."""
    if not isinstance(value, Unknown):
        return value
    return Bounds(Interval(low, float("inf")), missing or (value,))
