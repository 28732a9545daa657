"""Convert what every entry of a parts file has: kind, figures, roles of pins.

hut.parts.yaml:3:16: error: 58 A is a current; a voltage is wanted here, such as 58 V
hut.parts.yaml:2:11: error: 'mosfeet' is no kind of part; did you mean 'mosfet'?
"""

import difflib
from collections.abc import Iterable

import msgspec

from rulecheck.parts.figures import APPLICABLE, BY_PATH, SECTIONS, Figure
from rulecheck.parts.part import Datum, Kind
from rulecheck.parts.part_data_file import STATED_KINDS, DeviceEntry, PartDataFile, PartEntry
from rulecheck.parts.roles import SIGNAL_ROLES, allowed, required
from rulecheck.reading import YamlReading
from rulecheck.reading.quantities import as_interval, as_number
from rulecheck.values import Dimension, Interval, Problem, Span, error, note
from rulecheck.values.record import Mutable, Record, field

Path = tuple[str | int, ...]
_FREE_NAMES = frozenset({Kind.DRIVER, Kind.ISOLATOR})


class Stated(Mutable):
    """Figures and words of one entry by path."""

    data: dict[str, Datum] = field(default_factory=dict)
    facts: dict[str, str] = field(default_factory=dict)


class EntryReader(Record):
    """Reads the entries of one file and collects their problems."""

    marks: YamlReading[PartDataFile]
    problems: list[Problem]

    def fail(self, path: Path, what: str, remedy: str) -> None:
        self.problems.append(error(self.marks.span(path), what, remedy))

    def kind(self, word: str, path: Path) -> Kind | None:
        kind = STATED_KINDS.get(word.strip().lower())
        if kind is None:
            what = f"'{word}' is no kind of part"
            self.fail((*path, "kind"), what, did_you_mean(word, STATED_KINDS))
        return kind

    def number(self, raw: object, dimension: Dimension, path: Path) -> float | None:
        if raw is None:
            return None
        value = as_number(raw, dimension, self.marks.span(path))
        if isinstance(value, Problem):
            self.problems.append(value)
            return None
        return value

    def figures(self, entry: PartEntry | DeviceEntry, kind: Kind, path: Path, key: str) -> Stated:
        stated = Stated()
        for section in SECTIONS:
            written = getattr(entry, section, None)
            for name, raw in _given(written):
                where = (*path, section, name)
                figure = BY_PATH[f"{section}.{name}"]
                if figure.path not in APPLICABLE[kind]:
                    self.fail(
                        where, f"{kind.called} has no {section} figure '{name}'", _those_of(kind)
                    )
                else:
                    self._figure(figure, raw, where, f"part data {key}", stated)
        return stated

    def _figure(
        self, figure: Figure, raw: object, where: Path, origin: str, stated: Stated
    ) -> None:
        if figure.words:
            words = raw if isinstance(raw, list) else [raw]
            stated.facts[figure.path] = " ".join(str(word).lower() for word in words)
            return
        span = self.marks.span(where)
        value = _value(figure, raw, span)
        if isinstance(value, Problem):
            self.problems.append(value)
        else:
            stated.data[figure.path] = Datum(value, figure.dimension, origin, span)

    def check_roles(self, roles: tuple[str, ...], kind: Kind, where: Path) -> None:
        known = allowed(kind)
        for role in roles:
            if known is not None and role not in known:
                self.fail(where, f"{kind.called} has no pin '{role}'", did_you_mean(role, known))
            elif kind in _FREE_NAMES and (near := _slip(role)):
                self.problems.append(
                    note(self.marks.span(where), f"pin '{role}' is no usual role", near)
                )
        missing = [role for role in required(kind) if role not in roles]
        if missing:
            what = f"{kind.called} needs a pin '{missing[0]}'"
            self.fail(where, what, f"its roles are {', '.join(known or ())}")


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


def did_you_mean(word: str, known: Iterable[str]) -> str:
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
    return f"those of {kind.called} are {paths}" if paths else f"{kind.called} takes none"
