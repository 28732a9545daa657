"""Read a stage sheet: quantities checked for their units, every mistake located.

`voltage: 230 V rms` of a two-net port becomes the range -325.27 V ... 325.27 V;
`draws: 5 A` becomes a current of -5 A out of the port's first net into the stage.
"""

import math
from collections.abc import Iterator, Mapping
from itertools import combinations

from rulecheck.reading import SourceText, read_yaml
from rulecheck.stage.sheet_file import (
    LegSwitchingEntry,
    OverrideEntry,
    PortEntry,
    SheetFile,
    SwitchingEntry,
)
from rulecheck.stage.sheet_reader import Path, Reader, modulated, read_alternating
from rulecheck.stage.stage import Barrier, PortKind, Role, Switching
from rulecheck.values import Dimension, Interval, Problem, Span
from rulecheck.values.record import Record, field

ROLES = {role.value.replace(" ", "-"): role for role in Role} | {
    "bulk": Role.BULK_CAPACITOR,
    "resistor": Role.LOAD,
}


class SheetPort(Record):
    """A port with quantities read and nets as written; None is what the sheet leaves open."""

    name: str
    kind: PortKind
    nets: tuple[str, ...]
    neutral: str
    voltage: Interval | None
    current: Interval | None
    power: Interval | None
    frequency: Interval | None
    least_amplitude: float
    draws: bool
    modulation: str
    modulation_index: Interval | None
    power_factor: Interval | None
    span: Span
    source: str = ""
    fused_elsewhere: bool = False
    withstands: tuple[str, ...] = ()
    ripple: float | None = None


class Override(Record):
    name: str
    current: Interval | None
    voltage: Interval | None
    role: Role | None
    span: Span
    leakage: float | None = None
    rms_current: float | None = None
    balance: str = ""


class LegSheet(Record):
    midpoint: str
    switching: Switching
    span: Span


class Domain(Record):
    """Nets, as written, that belong together galvanically."""

    nets: tuple[str, ...]
    span: Span


class SupplySheet(Record):
    """What the sheet states of a gate supply: its voltage over the return that goes with it."""

    net: str
    voltage: Interval
    span: Span


class Sheet(Record):
    file: str = ""
    ports: tuple[SheetPort, ...] = ()
    switching: Switching = field(default_factory=Switching)
    legs: tuple[LegSheet, ...] = ()
    efficiency: float = 1.0
    parts: tuple[str, ...] = ()
    overrides: Mapping[str, Override] = field(default_factory=dict)
    """By lower-case element name."""
    domains: Mapping[str, Domain] = field(default_factory=dict)
    barriers: tuple[Barrier, ...] = ()
    """One for each two domains."""
    gate_supplies: tuple[SupplySheet, ...] = ()


class SheetReading(Record):
    """The sheet as far as it could be read, and every mistake in it."""

    sheet: Sheet
    problems: tuple[Problem, ...]


EMPTY_SHEET = Sheet()


def read_sheet(source: SourceText) -> SheetReading:
    """Read a `*.stage.yaml`; the sheet holds what could be read even where problems remain."""
    marks = read_yaml(source, SheetFile)
    if marks.value is None:
        return SheetReading(Sheet(file=source.file), marks.problems)
    reader = Reader(marks)
    sheet = _sheet(source.file, marks.value, reader)
    return SheetReading(sheet, (*marks.problems, *reader.problems))


def _sheet(file: str, entries: SheetFile, reader: Reader) -> Sheet:
    legs = {**entries.switching.legs, **entries.legs}
    efficiency = reader.number(entries.efficiency, Dimension.NUMBER, ("efficiency",))
    if efficiency is not None and not 0.0 < efficiency <= 1.0:
        reader.fail(
            ("efficiency",), f"efficiency {efficiency:g} is not above 0 and up to 1", "write 0.95"
        )
        efficiency = None
    return Sheet(
        file,
        tuple(_port(name, entry, reader) for name, entry in entries.ports.items()),
        _switching(entries.switching, ("switching",), reader),
        tuple(_leg(net, entry, entries, reader) for net, entry in legs.items()),
        efficiency or 1.0,
        tuple(entries.parts),
        {name.lower(): _override(name, entry, reader) for name, entry in entries.set.items()},
        {
            name: Domain(tuple(map(str, nets)), reader.marks.span(("domains", name)))
            for name, nets in entries.domains.items()
        },
        _barriers(entries, reader),
        tuple(_gate_supplies(entries, reader)),
    )


def _barriers(entries: SheetFile, reader: Reader) -> tuple[Barrier, ...]:
    """One for each two domains, with the voltages that an entry states."""
    names = tuple(entries.domains)
    stated: dict[frozenset[str], Barrier] = {}
    for index, entry in enumerate(entries.barriers):
        path: Path = ("barriers", index)
        unknown = [name for name in entry.between if name not in names]
        if len(set(entry.between)) != 2 or unknown:
            what = f"`between` names two domains; here are {', '.join(entry.between) or 'none'}"
            reader.fail((*path, "between"), what, f"use two of {', '.join(names) or '`domains:`'}")
            continue
        first, second = entry.between
        volts = reader.number(entry.voltage, Dimension.VOLTAGE, (*path, "voltage"))
        test = reader.number(entry.test_voltage, Dimension.VOLTAGE, (*path, "test-voltage"))
        span = reader.marks.span(path)
        stated[frozenset(entry.between)] = Barrier((first, second), volts, test, span)
    whole = reader.marks.span(("domains",))
    return tuple(
        stated.get(frozenset(pair), Barrier(pair, None, None, whole))
        for pair in combinations(names, 2)
    )


def _gate_supplies(entries: SheetFile, reader: Reader) -> Iterator[SupplySheet]:
    for net, written in entries.gate_supplies.items():
        path: Path = ("gate-supplies", net)
        voltage = reader.interval(written, Dimension.VOLTAGE, path)
        if voltage is not None:
            yield SupplySheet(net, voltage, reader.marks.span(path))


def _leg(net: str, entry: LegSwitchingEntry, entries: SheetFile, reader: Reader) -> LegSheet:
    path: Path = ("legs", net) if net in entries.legs else ("switching", "legs", net)
    return LegSheet(net, _switching(entry, path, reader), reader.marks.span(path))


def _switching(entry: SwitchingEntry | LegSwitchingEntry, path: Path, reader: Reader) -> Switching:
    phase = None
    if isinstance(entry, LegSwitchingEntry):
        phase = reader.number(entry.phase, Dimension.NUMBER, (*path, "phase"))
    return Switching(
        reader.number(entry.frequency, Dimension.FREQUENCY, (*path, "frequency")),
        reader.number(entry.dead_time, Dimension.TIME, (*path, "dead-time")),
        reader.number(entry.edge, Dimension.TIME, (*path, "edge")),
        reader.number(entry.shortest_pulse, Dimension.TIME, (*path, "shortest-pulse")),
        reader.number(entry.stray_inductance, Dimension.INDUCTANCE, (*path, "stray-inductance")),
        phase,
    )


def _override(name: str, entry: OverrideEntry, reader: Reader) -> Override:
    path: Path = ("set", name)
    current, _ = read_alternating(entry.current, Dimension.CURRENT, (*path, "current"), reader)
    voltage, _ = read_alternating(entry.voltage, Dimension.VOLTAGE, (*path, "voltage"), reader)
    role = None
    if entry.role is not None:
        role = ROLES.get(entry.role.lower().replace(" ", "-"))
        if role is None:
            known = ", ".join(sorted(ROLES))
            reader.fail((*path, "role"), f"role '{entry.role}' is not known", f"use one of {known}")
    leakage = reader.number(entry.leakage, Dimension.INDUCTANCE, (*path, "leakage"))
    span = reader.marks.span(path)
    rms = reader.number(entry.rms_current, Dimension.CURRENT, (*path, "rms-current"))
    return Override(name, current, voltage, role, span, leakage, rms, entry.balance or "")


def _port(name: str, entry: PortEntry, reader: Reader) -> SheetPort:
    path: Path = ("ports", name)
    nets = _port_nets(entry, path, reader)
    voltage, alternating_voltage = _port_voltage(entry, path, reader)
    current, alternating_current = _port_current(entry, path, reader)
    frequency = reader.interval(entry.frequency, Dimension.FREQUENCY, (*path, "frequency"))
    alternating = (
        alternating_voltage or alternating_current or (frequency is not None and frequency.high > 0)
    )
    if entry.phases is not None:
        kind = PortKind.PHASES
    else:
        kind = PortKind.AC if alternating else PortKind.DC
    least = 0.0
    if kind is not PortKind.DC:
        least = max(voltage.low, 0.0) if voltage is not None else 0.0
        voltage, current = _amplitude(voltage), _amplitude(current)
    power = reader.interval(entry.power, Dimension.POWER, (*path, "power"))
    power = -power if power is not None else None
    span = reader.marks.span(path)
    return SheetPort(
        name,
        kind,
        nets,
        "" if entry.neutral is None else str(entry.neutral),
        voltage,
        current,
        power,
        frequency,
        least,
        entry.draws is not None,
        *modulated(entry, kind, path, reader),
        span,
        entry.source or "",
        entry.fuse == "elsewhere",
        tuple(entry.withstands),
        reader.number(entry.ripple, Dimension.VOLTAGE, (*path, "ripple")),
    )


def _amplitude(value: Interval | None) -> Interval | None:
    """An AC quantity takes every value up to its largest amplitude, both ways."""
    return None if value is None else Interval(-value.magnitude, value.magnitude)


def _port_nets(entry: PortEntry, path: Path, reader: Reader) -> tuple[str, ...]:
    if (entry.between is None) == (entry.phases is None):
        reader.fail(
            path,
            f"port '{path[-1]}' needs either `between` or `phases`",
            "write `between: [PLUS, MINUS]` or `phases: [U, V, W]`",
        )
        return ()
    if entry.between is not None and len(entry.between) != 2:
        reader.fail(
            (*path, "between"), "`between` takes two nets", "write `between: [PLUS, MINUS]`"
        )
        return ()
    if entry.phases is not None and len(entry.phases) < 2:
        reader.fail((*path, "phases"), "`phases` takes two nets or more", "write [U, V, W]")
        return ()
    return tuple(str(net) for net in entry.between or entry.phases or ())


def _port_voltage(entry: PortEntry, path: Path, reader: Reader) -> tuple[Interval | None, bool]:
    if entry.line_voltage is None:
        return read_alternating(entry.voltage, Dimension.VOLTAGE, (*path, "voltage"), reader)
    where = (*path, "line-voltage")
    if entry.voltage is not None:
        reader.fail(where, "both `voltage` and `line-voltage` are given", "keep one of them")
    if entry.phases is None:
        reader.fail(where, "`line-voltage` belongs to a port with `phases`", "write `voltage`")
    line, _ = read_alternating(entry.line_voltage, Dimension.VOLTAGE, where, reader)
    count = len(entry.phases or ()) or 3
    # line to line of neighbouring phases of a symmetrical set of n: 2 sin(pi/n) times the phase
    ratio = 2.0 * math.sin(math.pi / count)
    return (None if line is None else line.scaled(1.0 / ratio)), True


def _port_current(entry: PortEntry, path: Path, reader: Reader) -> tuple[Interval | None, bool]:
    if entry.supplies is not None and entry.draws is not None:
        reader.fail(
            (*path, "draws"),
            "both `supplies` and `draws` are given",
            "keep one; `supplies: [-80 A, 80 A]` says both directions",
        )
    key = "supplies" if entry.supplies is not None else "draws"
    raw = entry.supplies if entry.supplies is not None else entry.draws
    current, alternating = read_alternating(raw, Dimension.CURRENT, (*path, key), reader)
    if current is not None and key == "draws":
        current = -current
    return current, alternating
