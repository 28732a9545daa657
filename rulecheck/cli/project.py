"""The project file: which netlists, sheets, parts and packs a repository's check takes in."""

import itertools
import os
from collections.abc import Mapping
from pathlib import Path, PurePath
from typing import Literal

import msgspec

from rulecheck.reading import SourceText, YamlReading, read_text, read_yaml
from rulecheck.rulebook import DeviationEntry
from rulecheck.values import USUAL, Limits, Problem, Span, error, raise_limit
from rulecheck.values.record import Record, field

PROJECT_NAME = "rulecheck.yaml"
_WILD = "*?["


class ProjectFile(
    msgspec.Struct, frozen=True, kw_only=True, forbid_unknown_fields=True, rename="kebab"
):
    """`rulecheck.yaml`; paths are relative to it, netlists may be patterns such as `*.cir`."""

    netlists: list[str] = []
    sheets: dict[str, str] = {}
    parts: list[str] = []
    packs: list[str] = []
    include_dirs: list[str] = []
    deviations: list[DeviationEntry] = []
    fail_at: Literal["error", "warning", "note"] | None = None
    undecided: Literal["pass", "fail"] | None = None


class Project(Record):
    """The project file with its paths resolved; without a file, all is empty."""

    file: str = ""
    netlists: tuple[Path, ...] = ()
    sheets: Mapping[Path, Path] = field(default_factory=dict)
    parts: tuple[Path, ...] = ()
    packs: tuple[str, ...] = ()
    """Names of packs that travel with the program, or paths."""
    include_dirs: tuple[Path, ...] = ()
    fail_at: str = "error"
    undecided_fails: bool = False
    deviations: tuple[DeviationEntry, ...] = ()
    deviation_spans: tuple[Span, ...] = ()
    problems: tuple[Problem, ...] = ()


def find_project(asked: str | None, limits: Limits = USUAL) -> Project:
    """The project file that was asked for, else `rulecheck.yaml` here, else an empty project."""
    path = Path(asked or PROJECT_NAME)
    if asked is None and not os.path.lexists(path):
        return Project()
    source = read_text(path, limits)
    if isinstance(source, Problem):
        return Project(file=str(path), problems=(source,))
    return read_project(source, limits)


def read_project(source: SourceText, limits: Limits = USUAL) -> Project:
    """Resolve the paths of a project file; its mistakes are in `problems`, each at its place."""
    reading = read_yaml(source, ProjectFile)
    if reading.value is None:
        return Project(file=source.file, problems=reading.problems)
    entries, folder = reading.value, Path(source.file).parent
    netlists, problems = _netlists(reading, folder, limits["netlists"])
    outside = _outside(reading, folder)
    return Project(
        source.file,
        netlists,
        {folder / netlist: folder / sheet for netlist, sheet in entries.sheets.items()},
        tuple(folder / name for name in entries.parts),
        tuple(_pack(name, folder) for name in entries.packs),
        tuple(folder / name for name in entries.include_dirs),
        entries.fail_at or "error",
        entries.undecided == "fail",
        tuple(entries.deviations),
        tuple(reading.span(("deviations", n)) for n in range(len(entries.deviations))),
        (*reading.problems, *problems, *outside),
    )


def _outside(reading: YamlReading[ProjectFile], folder: Path) -> tuple[Problem, ...]:
    """A project file may come from anybody: it opens no folder but its own and those below."""
    own = os.path.realpath(folder)
    names = reading.value.include_dirs if reading.value else []
    return tuple(
        error(
            reading.span(("include-dirs", number)),
            f"'{name}' is not below the project file's folder",
            "allow it on the command line, with --include-dir",
        )
        for number, name in enumerate(names)
        if not Path(os.path.realpath(folder / name.replace("\0", ""))).is_relative_to(own)
    )


def _netlists(
    reading: YamlReading[ProjectFile], folder: Path, most: int
) -> tuple[tuple[Path, ...], tuple[Problem, ...]]:
    """Each named netlist once, those of a pattern in order of name."""
    found: dict[Path, None] = {}
    problems: list[Problem] = []
    for number, name in enumerate(reading.value.netlists if reading.value else ()):
        span = reading.span(("netlists", number))
        matches = _matches(name, folder, most)
        if isinstance(matches, str):
            problems.append(error(span, matches, "correct the pattern"))
        elif len(matches) + len(found) > most:
            what = f"the project has more than {most} netlists"
            problems.append(error(span, what, raise_limit("netlists")))
        else:
            found.update(dict.fromkeys(matches))
    return tuple(found), tuple(problems)


def _matches(name: str, folder: Path, most: int) -> list[Path] | str:
    """The files of one entry, at most one more than allowed; or what is wrong with it."""
    if not set(name) & set(_WILD):
        return [folder / name]
    if ".." in PurePath(name).parts or PurePath(name).is_absolute():
        return f"the pattern '{name}' leads out of the project file's folder"
    if PurePath(name).parts.count("**") > 1:
        return f"the pattern '{name}' searches all folders twice"
    try:
        matches = sorted(itertools.islice(folder.glob(name), most + 1))
    except (ValueError, NotImplementedError, OSError) as reason:
        return f"'{name}' is no pattern: {reason}"
    return matches or f"no file matches '{name}'"


def _pack(name: str, folder: Path) -> str:
    """A pack's path is relative to the project file; a plain name is one that travels along."""
    return str(folder / name) if name.endswith((".yaml", ".yml")) else name
