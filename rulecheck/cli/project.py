"""The project file: which netlists, sheets, parts and packs a repository's check takes in."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from pathlib import Path
from typing import Literal

import msgspec

from rulecheck.reading import SourceText, YamlReading, read_text, read_yaml
from rulecheck.rulebook import DeviationEntry
from rulecheck.values import Problem, Span, error

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
    deviations: list[DeviationEntry] = []
    fail_at: Literal["error", "warning", "note"] | None = None
    undecided: Literal["pass", "fail"] | None = None


@dataclass(frozen=True, slots=True)
class Project:
    """The project file with its paths resolved; without a file, all is empty."""

    file: str = ""
    netlists: tuple[Path, ...] = ()
    sheets: Mapping[Path, Path] = field(default_factory=dict)
    parts: tuple[Path, ...] = ()
    packs: tuple[str, ...] = ()
    """Names of packs that travel with the program, or paths."""
    fail_at: str = "error"
    undecided_fails: bool = False
    deviations: tuple[DeviationEntry, ...] = ()
    deviation_spans: tuple[Span, ...] = ()
    problems: tuple[Problem, ...] = ()


def find_project(asked: str | None) -> Project:
    """The project file that was asked for, else `rulecheck.yaml` here, else an empty project."""
    path = Path(asked or PROJECT_NAME)
    if asked is None and not path.is_file():
        return Project()
    source = read_text(path)
    if isinstance(source, Problem):
        return Project(file=str(path), problems=(source,))
    return read_project(source)


def read_project(source: SourceText) -> Project:
    """Resolve the paths of a project file; its mistakes are in `problems`, each at its place."""
    reading = read_yaml(source, ProjectFile)
    if reading.value is None:
        return Project(file=source.file, problems=reading.problems)
    entries, folder = reading.value, Path(source.file).parent
    netlists, problems = _netlists(reading, entries, folder)
    return Project(
        source.file,
        netlists,
        {folder / netlist: folder / sheet for netlist, sheet in entries.sheets.items()},
        tuple(folder / name for name in entries.parts),
        tuple(_pack(name, folder) for name in entries.packs),
        entries.fail_at or "error",
        entries.undecided == "fail",
        tuple(entries.deviations),
        tuple(reading.span(("deviations", n)) for n in range(len(entries.deviations))),
        (*reading.problems, *problems),
    )


def _netlists(
    reading: YamlReading[ProjectFile], entries: ProjectFile, folder: Path
) -> tuple[tuple[Path, ...], tuple[Problem, ...]]:
    """Each named netlist once, those of a pattern in order of name."""
    found: dict[Path, None] = {}
    problems: list[Problem] = []
    for number, name in enumerate(entries.netlists):
        matches = sorted(folder.glob(name)) if set(name) & set(_WILD) else [folder / name]
        if not matches:
            span = reading.span(("netlists", number))
            problems.append(error(span, f"no file matches '{name}'", "correct the pattern"))
        found.update(dict.fromkeys(matches))
    return tuple(found), tuple(problems)


def _pack(name: str, folder: Path) -> str:
    """A pack's path is relative to the project file; a plain name is one that travels along."""
    return str(folder / name) if name.endswith((".yaml", ".yml")) else name
