"""Read parts files: kinds, pins and figures checked, every mistake located.

hut.parts.yaml:3:16: error: 58 A is a current; a voltage is wanted here, such as 58 V
hut.parts.yaml:2:11: error: 'mosfeet' is no kind of part; did you mean 'mosfet'?
"""

import difflib
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field

import msgspec

from rulecheck.parts.figures import APPLICABLE, BY_PATH, SECTIONS, Figure
from rulecheck.parts.part import Datum, Kind
from rulecheck.parts.part_data import PartData, StatedDevice, StatedPart
from rulecheck.parts.part_data_file import STATED_KINDS, DeviceEntry, PartDataFile, PartEntry
from rulecheck.parts.roles import SIGNAL_ROLES, allowed, required, role_of
from rulecheck.reading import SourceText, YamlReading, read_yaml
from rulecheck.reading.quantities import as_interval, as_number
from rulecheck.values import Interval, Problem, Span, error, note

Path = tuple[str | int, ...]
_FREE_NAMES = frozenset({Kind.DRIVER, Kind.ISOLATOR})


def read_part_data(sources: Sequence[SourceText]) -> PartData:
    """All parts files; what could be read stays in the product even where problems remain."""
    parts: list[StatedPart] = []
    problems: list[Problem] = []
    for source in sources:
        marks = read_yaml(source, PartDataFile)
        problems += marks.problems
        if marks.value is None:
            continue
        reader = _Reader(marks, problems)
        found = (reader.part(key, entry) for key, entry in marks.value.parts.items())
        parts += [part for part in found if part is not None]
    return PartData(tuple(parts), (*problems, *_repeated(parts)))


def _repeated(parts: Iterable[StatedPart]) -> Iterable[Problem]:
    first: dict[str, StatedPart] = {}
    for part in parts:
        earlier = first.setdefault(part.key.casefold(), part)
        if earlier is not part:
            what = f"part '{part.key}' is described at {earlier.span} already"
            yield error(part.span, what, "keep one of the two entries")


@dataclass(slots=True)
class _Stated:
    data: dict[str, Datum] = field(default_factory=dict)
    facts: dict[str, str] = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class _Reader:
    """Converts the entries of one file and collects their problems."""

    marks: YamlReading[PartDataFile]
    problems: list[Problem]

    def part(self, key: str, entry: PartEntry) -> StatedPart | None:
        path: Path = ("parts", key)
        kind = self._kind(entry.kind, path)
        stated = self._figures(entry, kind or Kind.OTHER, path, key)
        if kind is None:
            return None
        listed, named = self._pins(entry, kind, path)
        devices = self._devices(entry, kind, path, key, listed)
        span = self.marks.span(path)
        return StatedPart(key, kind, listed, named, stated.data, stated.facts, devices, span)

    def _fail(self, path: Path, what: str, remedy: str) -> None:
        self.problems.append(error(self.marks.span(path), what, remedy))

    def _kind(self, word: str, path: Path) -> Kind | None:
        kind = STATED_KINDS.get(word.strip().lower())
        if kind is None:
            what = f"'{word}' is no kind of part"
            self._fail((*path, "kind"), what, _did_you_mean(word, STATED_KINDS))
        return kind

    def _figures(self, entry: PartEntry | DeviceEntry, kind: Kind, path: Path, key: str) -> _Stated:
        stated = _Stated()
        for section in SECTIONS:
            written = getattr(entry, section, None)
            for name, raw in _given(written):
                where = (*path, section, name)
                figure = BY_PATH[f"{section}.{name}"]
                if figure.path not in APPLICABLE[kind]:
                    self._fail(where, f"a {kind} has no {section} figure '{name}'", _those_of(kind))
                else:
                    self._figure(figure, raw, where, f"part data {key}", stated)
        return stated

    def _figure(
        self, figure: Figure, raw: object, where: Path, origin: str, stated: _Stated
    ) -> None:
        if figure.words:
            stated.facts[figure.path] = str(raw).lower()
            return
        span = self.marks.span(where)
        value = _value(figure, raw, span)
        if isinstance(value, Problem):
            self.problems.append(value)
        else:
            stated.data[figure.path] = Datum(value, figure.dimension, origin, span)

    def _pins(
        self, entry: PartEntry, kind: Kind, path: Path
    ) -> tuple[tuple[str, ...], Mapping[str, str]]:
        where = (*path, "pins")
        if isinstance(entry.pins, Mapping):
            named = {role_of(role, kind): str(pin) for role, pin in entry.pins.items()}
            self._check_roles(tuple(named), kind, where)
            return (), named
        roles = tuple(role_of(str(role), kind) for role in entry.pins or ())
        if entry.pins is not None:
            self._check_roles(roles, kind, where)
        elif kind is Kind.MODULE:
            what = f"module '{path[-1]}' does not name its pins"
            self._fail(path, what, "list them in netlist order: pins: [plus, mid, minus, ...]")
        return roles, {}

    def _check_roles(self, roles: tuple[str, ...], kind: Kind, where: Path) -> None:
        known = allowed(kind)
        for role in roles:
            if known is not None and role not in known:
                self._fail(where, f"a {kind} has no pin '{role}'", _did_you_mean(role, known))
            elif kind in _FREE_NAMES and (near := _slip(role)):
                self.problems.append(
                    note(self.marks.span(where), f"pin '{role}' is no usual role", near)
                )
        missing = [role for role in required(kind) if role not in roles]
        if missing:
            what = f"a {kind} needs a pin '{missing[0]}'"
            self._fail(where, what, f"its roles are {', '.join(known or ())}")

    def _devices(
        self, entry: PartEntry, kind: Kind, path: Path, key: str, pins: tuple[str, ...]
    ) -> tuple[StatedDevice, ...]:
        written = entry.devices or {}
        if written and kind is not Kind.MODULE:
            self._fail((*path, "devices"), f"a {kind} has no inner devices", "write kind: module")
            return ()
        if kind is Kind.MODULE and not written:
            self._fail(path, f"module '{key}' lists no devices", "list them under devices:")
        devices = (
            self._device(name, device, (*path, "devices", name), key, pins)
            for name, device in written.items()
        )
        return tuple(device for device in devices if device is not None)

    def _device(
        self, name: str, entry: DeviceEntry, path: Path, key: str, module_pins: tuple[str, ...]
    ) -> StatedDevice | None:
        kind = self._kind(entry.kind, path)
        stated = self._figures(entry, kind or Kind.OTHER, path, f"{key}, {name}")
        if kind is None:
            return None
        pins = {role_of(role, kind): str(pin) for role, pin in entry.pins.items()}
        self._check_roles(tuple(pins), kind, (*path, "pins"))
        for role, pin in entry.pins.items():
            if module_pins and str(pin).lower() not in module_pins:
                what = f"module '{key}' has no pin '{pin}'"
                self._fail((*path, "pins", role), what, _did_you_mean(str(pin), module_pins))
        return StatedDevice(name, kind, pins, stated.data, stated.facts, self.marks.span(path))


def _given(written: msgspec.Struct | None) -> Iterable[tuple[str, object]]:
    """Names (as in the file) and raw values of what a section states."""
    if written is None:
        return
    for name, encoded in zip(
        written.__struct_fields__, written.__struct_encode_fields__, strict=True
    ):
        raw = getattr(written, name)
        if raw is not None:
            yield encoded, raw


def _value(figure: Figure, raw: object, span: Span) -> float | Interval | Problem:
    if not figure.ranged:
        return as_number(raw, figure.dimension, span)
    value = as_interval(raw, figure.dimension, span)
    if figure.path == "ratings.gate" and isinstance(value, Interval) and value.low == value.high:
        return Interval(-abs(value.high), abs(value.high))
    return value


def _did_you_mean(word: str, known: Iterable[str]) -> str:
    options = sorted(known)
    close = difflib.get_close_matches(word.strip().lower(), options, 1)
    return f"did you mean '{close[0]}'?" if close else f"use one of {', '.join(options)}"


def _slip(role: str) -> str:
    """A remark on a free pin name that looks like a slip of a role that later steps look for."""
    if any(role == known or role.startswith(f"{known}-") for known in SIGNAL_ROLES):
        return ""
    close = difflib.get_close_matches(role, SIGNAL_ROLES, 1, cutoff=0.8)
    return f"did you mean '{close[0]}'?" if close else ""


def _those_of(kind: Kind) -> str:
    paths = ", ".join(APPLICABLE[kind])
    return f"those of a {kind} are {paths}" if paths else f"a {kind} takes none"
