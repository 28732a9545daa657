"""Read parts files into patterns with kinds, pins, figures, and the insides of modules.

parts:
  "SW-N100-*": {kind: mosfet, ratings: {blocking: 100 V}}
"""

from collections.abc import Iterable, Mapping, Sequence

from rulecheck.parts.entries import EntryReader, Path, did_you_mean
from rulecheck.parts.part import Kind
from rulecheck.parts.part_data import PartData, StatedDevice, StatedPart, StatedWinding
from rulecheck.parts.part_data_file import DeviceEntry, PartDataFile, PartEntry, WindingEntry
from rulecheck.parts.roles import role_of
from rulecheck.reading import SourceText, read_yaml
from rulecheck.values import Dimension, Problem, error

Roles = tuple[str, ...]


def read_part_data(sources: Sequence[SourceText]) -> PartData:
    """All parts files; what could be read stays in the product even where problems remain."""
    parts: list[StatedPart] = []
    problems: list[Problem] = []
    for source in sources:
        marks = read_yaml(source, PartDataFile)
        problems += marks.problems
        if marks.value is None:
            continue
        reader = EntryReader(marks, problems)
        found = (_part(key, entry, reader) for key, entry in marks.value.parts.items())
        parts += [part for part in found if part is not None]
    return PartData(tuple(parts), (*problems, *_repeated(parts)))


def _repeated(parts: Iterable[StatedPart]) -> Iterable[Problem]:
    first: dict[str, StatedPart] = {}
    for part in parts:
        earlier = first.setdefault(part.key.casefold(), part)
        if earlier is not part:
            what = f"part '{part.key}' is described at {earlier.span} already"
            yield error(part.span, what, "keep one of the two entries")


def _part(key: str, entry: PartEntry, reader: EntryReader) -> StatedPart | None:
    path: Path = ("parts", key)
    kind = reader.kind(entry.kind, path)
    stated = reader.figures(entry, kind or Kind.OTHER, path, key)
    if kind is None:
        return None
    listed, named = _pins(entry, kind, path, reader)
    return StatedPart(
        key,
        kind,
        listed,
        named,
        stated.data,
        stated.facts,
        reader.marks.span(path),
        devices=_devices(entry, kind, path, listed, reader),
        windings=_windings(entry, kind, path, listed, reader),
        inductance=reader.number(entry.inductance, Dimension.INDUCTANCE, (*path, "inductance")),
    )


def _pins(
    entry: PartEntry, kind: Kind, path: Path, reader: EntryReader
) -> tuple[Roles, Mapping[str, str]]:
    where = (*path, "pins")
    if isinstance(entry.pins, Mapping):
        named = {role_of(role, kind): str(pin) for role, pin in entry.pins.items()}
        reader.check_roles(tuple(named), kind, where)
        return (), named
    roles = tuple(role_of(str(role), kind) for role in entry.pins or ())
    if entry.pins is not None:
        reader.check_roles(roles, kind, where)
    elif kind in _INSIDES:
        what = f"{kind} '{path[-1]}' does not name its pins"
        reader.fail(path, what, "list them in netlist order: pins: [plus, mid, minus, ...]")
    return roles, {}


_INSIDES = {
    Kind.MODULE: ("devices", "inner devices"),
    Kind.WINDING_SET: ("windings", "windings"),
}
"""Kinds that are described by what is inside: the key, and its name in a message."""


def _allowed_inside(kind: Kind, owner: Kind, given: bool, path: Path, reader: EntryReader) -> bool:
    """Whether an entry of this kind is read inside; a kind that needs an inside must have one."""
    key, name = _INSIDES[owner]
    if given and kind is not owner:
        reader.fail((*path, key), f"{kind.called} has no {name}", f"write kind: {owner}")
    if not given and kind is owner:
        reader.fail(path, f"{owner} '{path[-1]}' lists no {key}", f"list them under {key}:")
    return given and kind is owner


def _devices(
    entry: PartEntry, kind: Kind, path: Path, pins: Roles, reader: EntryReader
) -> tuple[StatedDevice, ...]:
    written = entry.devices or {}
    if not _allowed_inside(kind, Kind.MODULE, bool(written), path, reader):
        return ()
    found = (
        _device(name, device, (*path, "devices", name), pins, reader)
        for name, device in written.items()
    )
    return tuple(device for device in found if device is not None)


def _device(
    name: str, entry: DeviceEntry, path: Path, owner: Roles, reader: EntryReader
) -> StatedDevice | None:
    kind = reader.kind(entry.kind, path)
    stated = reader.figures(entry, kind or Kind.OTHER, path, f"{path[1]}, {name}")
    if kind is None:
        return None
    pins = {role_of(role, kind): str(pin).lower() for role, pin in entry.pins.items()}
    reader.check_roles(tuple(pins), kind, (*path, "pins"))
    for role, pin in entry.pins.items():
        _check_pin(str(pin), owner, (*path, "pins", role), reader)
    return StatedDevice(name, kind, pins, stated.data, stated.facts, reader.marks.span(path))


def _check_pin(pin: str, owner: Roles, path: Path, reader: EntryReader) -> None:
    if owner and pin.lower() not in owner:
        reader.fail(path, f"part '{path[1]}' has no pin '{pin}'", did_you_mean(pin, owner))


def _windings(
    entry: PartEntry, kind: Kind, path: Path, pins: Roles, reader: EntryReader
) -> tuple[StatedWinding, ...]:
    written = entry.windings or {}
    if not _allowed_inside(kind, Kind.WINDING_SET, bool(written), path, reader):
        return ()
    found = (
        _winding(name, winding, (*path, "windings", name), pins, reader)
        for name, winding in written.items()
    )
    return tuple(winding for winding in found if winding is not None)


def _winding(
    name: str, entry: WindingEntry, path: Path, owner: Roles, reader: EntryReader
) -> StatedWinding | None:
    turns = reader.number(entry.turns, Dimension.NUMBER, (*path, "turns"))
    if len(entry.pins) != 2:
        what = f"a winding has two pins; here are {len(entry.pins)}"
        reader.fail((*path, "pins"), what, "name the pin with the dot, then the other")
        return None
    if turns is None or turns <= 0.0:
        reader.fail((*path, "turns"), "turns are above zero", "write a number, or a ratio to 1")
        return None
    for pin in entry.pins:
        _check_pin(str(pin), owner, (*path, "pins"), reader)
    dot, other = (str(pin).lower() for pin in entry.pins)
    return StatedWinding(name, dot, other, turns)
