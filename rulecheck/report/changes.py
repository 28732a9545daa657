"""What changed between two netlists of a stage: parts, ports, positions, findings."""

from collections.abc import Iterator, Mapping

from rulecheck.capability import Capabilities, Direction
from rulecheck.demand import Demands
from rulecheck.parts import Datum, Part
from rulecheck.report.figures import figure, range_figure
from rulecheck.report.quadrant_result import PositionResult, quadrant_result
from rulecheck.report.standing import standing
from rulecheck.rulebook import Verdicts
from rulecheck.stage import Port, Stage, Switching
from rulecheck.values import Interval, QuadrantSet, Span, Unknown, natural_key, write_quantity
from rulecheck.values.record import Record

ABSENT = "not there"
_DIGITS = 9
Fields = Mapping[str, str]
"""What is compared of one thing: by its label, as text."""


class Version(Record):
    """One of the two netlists, analysed and judged."""

    stage: Stage
    capabilities: Capabilities
    demands: Demands
    verdicts: Verdicts


class Change(Record):
    """One thing of one subject that reads otherwise now."""

    subject: str
    what: str
    old: str
    new: str
    span: Span
    """In the new netlist, or in the old one where the subject is gone."""


class Changes(Record):
    old: str
    new: str
    parts: tuple[Change, ...]
    ports: tuple[Change, ...]
    positions: tuple[Change, ...]
    """What they must do, what they can do, and the result."""
    findings: tuple[Change, ...]
    """New ones and those that are gone, by subject; `what` is the rule."""

    @property
    def groups(self) -> tuple[tuple[str, tuple[Change, ...]], ...]:
        """Headings with their changes; those without any are left out."""
        all_groups = (
            ("Findings", self.findings),
            ("Positions: demand and capability", self.positions),
            ("Parts and values", self.parts),
            ("Ports and switching", self.ports),
        )
        return tuple((heading, changes) for heading, changes in all_groups if changes)


def find_changes(old: Version, new: Version) -> Changes:
    """Compare by name, without regard to case; the order of cards is no change."""
    return Changes(
        old.stage.netlist,
        new.stage.netlist,
        _compared(_parts(old.stage), _parts(new.stage)),
        _compared(_ports(old.stage), _ports(new.stage)),
        _compared(_positions(old), _positions(new)),
        _findings(old.verdicts, new.verdicts),
    )


def change_lines(changes: Changes) -> tuple[tuple[str, tuple[str, ...]], ...]:
    """Headings with a line for each change, for reports in plain text."""
    return tuple(
        (heading, tuple(change_line(change) for change in group))
        for heading, group in changes.groups
    )


def change_line(change: Change) -> str:
    """`C15: value was 220 uF, is 330 uF`; what came or went says so."""
    lead = f"{change.subject}: {change.what}".removesuffix(" ")
    if ABSENT in (change.old, change.new):
        word = "new" if change.old == ABSENT else "gone"
        return f"{lead} {word}: {change.new if word == 'new' else change.old}"
    return f"{lead} was {change.old}, is {change.new}"


class _Thing(Record):
    name: str
    fields: Fields
    span: Span
    whole: str
    """In a few words, for one that came or went."""


def _compared(old: Mapping[str, _Thing], new: Mapping[str, _Thing]) -> tuple[Change, ...]:
    names = sorted({*old, *new}, key=natural_key)
    return tuple(change for name in names for change in _between(old.get(name), new.get(name)))


def _between(old: _Thing | None, new: _Thing | None) -> Iterator[Change]:
    thing = new or old
    if thing is None:
        return
    if old is None or new is None:
        before, after = (ABSENT, thing.whole) if old is None else (thing.whole, ABSENT)
        yield Change(thing.name, "", before, after, thing.span)
        return
    for label in dict.fromkeys((*old.fields, *new.fields)):
        before, after = old.fields.get(label, "not stated"), new.fields.get(label, "not stated")
        if before != after:
            yield Change(new.name, label, before, after, new.span)


def _parts(stage: Stage) -> dict[str, _Thing]:
    return {part.name.lower(): _part(part) for part in stage.parts.parts}


def _part(part: Part) -> _Thing:
    pins = ", ".join(f"{pin.role} {pin.net}" for pin in part.pins)
    fields = {"kind": part.kind.value, "type": part.text or "none", **_value(part), "pins": pins}
    fields |= {path: _datum(datum) for path, datum in sorted(part.data.items())}
    fields |= dict(sorted(part.facts.items()))
    nets = ", ".join(pin.net for pin in part.pins)
    return _Thing(part.name, fields, part.span, f"{part.kind.value} {part.text} on {nets}")


def _value(part: Part) -> Fields:
    units = {"resistor": "ohm", "inductor": "H", "capacitor": "F"}
    unit = units.get(part.kind.value)
    return {"value": _exact(part.value, unit)} if unit else {}


def _datum(datum: Datum) -> str:
    unit = datum.dimension.value
    if isinstance(datum.value, float | int):
        return _exact(datum.value, unit)
    return _exact_range(datum.value, unit)


def _exact(value: float | Unknown, unit: str) -> str:
    """All digits that were written: a change of the ninth is one."""
    return "unknown" if isinstance(value, Unknown) else write_quantity(value, unit, _DIGITS)


def _exact_range(value: Interval | Unknown, unit: str) -> str:
    if isinstance(value, Unknown):
        return "unknown"
    ends = dict.fromkeys((_exact(value.low, unit), _exact(value.high, unit)))
    return " … ".join(ends)


def _ports(stage: Stage) -> dict[str, _Thing]:
    """The ports by name, and what holds for the stage as a whole, which has no name."""
    operation = _operation("switching", stage.switching, stage)
    legs = {
        f"switching of {net.lower()}": _operation(f"switching of {net}", switching, stage)
        for net, switching in stage.leg_switching.items()
    }
    return {port.name.lower(): _port(port) for port in stage.ports} | {"": operation} | legs


def _operation(name: str, switching: Switching, stage: Stage) -> _Thing:
    figures = (
        ("frequency", switching.frequency, "Hz"),
        ("dead time", switching.dead_time, "s"),
        ("edge", switching.edge, "s"),
    )
    fields = {label: _exact(value, unit) for label, value, unit in figures if value is not None}
    fields["efficiency"] = f"{stage.efficiency:g}"
    return _Thing(name, fields, Span(stage.sheet or stage.netlist, 1), ", ".join(fields.values()))


def _port(port: Port) -> _Thing:
    ranges = (
        ("voltage", port.voltage, "V"),
        ("current", port.current, "A"),
        ("power", port.power, "W"),
        ("frequency", port.frequency, "Hz"),
    )
    fields = {"nets": ", ".join(port.nets), "kind": port.kind.value}
    fields |= {name: _exact_range(value, unit) for name, value, unit in ranges if value is not None}
    return _Thing(port.name, fields, port.span, f"port at {', '.join(port.nets)}")


def _positions(version: Version) -> dict[str, _Thing]:
    rows = quadrant_result(version.stage, version.capabilities, version.demands).positions
    return {row.position.name.lower(): _position(row) for row in rows}


def _position(row: PositionResult) -> _Thing:
    position, forward, reverse = row.position, row.capability.forward, row.capability.reverse
    fields = {
        "devices": ", ".join(position.parts),
        "from": position.start,
        "to": position.end,
        "needs": _quadrants(row.needs),
        "must block": range_figure(row.demand.off_voltage, "V"),
        "must carry": range_figure(row.demand.on_current, "A"),
        "has": _quadrants(row.capability.quadrants),
        "blocks forward": _blocks(forward),
        "blocks reverse": _blocks(reverse),
        "carries forward": _carries(forward),
        "carries reverse": _carries(reverse),
        "result": ", ".join(standing(row)),
    }
    whole = f"position from {position.start} to {position.end}, {fields['result']}"
    return _Thing(position.name, fields, position.span, whole)


def _quadrants(quadrants: QuadrantSet | Unknown) -> str:
    return "unknown" if isinstance(quadrants, Unknown) else quadrants.label


def _blocks(direction: Direction) -> str:
    return figure(direction.blocks, "V") if direction.holds_off else "no"


def _carries(direction: Direction) -> str:
    return figure(direction.current, "A") if direction.carries else "no"


def _findings(old: Verdicts, new: Verdicts) -> tuple[Change, ...]:
    """A finding is the same where rule and subject are; an accepted one counts like any other."""
    before, after = _by_fingerprint(old), _by_fingerprint(new)
    keys = sorted({*before, *after}, key=lambda key: _rank(after.get(key) or before[key]))
    return tuple(
        Change(found.name, found.whole, _state(before.get(key)), _state(after.get(key)), found.span)
        for key in keys
        for found in (after.get(key) or before[key],)
        if _state(before.get(key)) != _state(after.get(key))
    )


def _by_fingerprint(verdicts: Verdicts) -> dict[str, _Thing]:
    return {
        v.fingerprint: _Thing(v.subject, {"state": _grade(v.verdict, v.level, v.message)}, v.span,
                              v.rule)
        for v in verdicts.verdicts
        if v.verdict != "holds"
    }  # fmt: skip


def _grade(verdict: str, level: str, message: str) -> str:
    return f"undecided, {message}" if verdict == "undecided" else f"{level}, {message}"


def _state(thing: _Thing | None) -> str:
    return thing.fields["state"] if thing is not None else ABSENT


def _rank(thing: _Thing) -> tuple[object, ...]:
    return (thing.span, thing.whole, natural_key(thing.name))
