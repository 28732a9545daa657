"""Where an included file is: as written, beside the file that includes it, or by base name.

A netlist may come from anybody, so that it reads nothing but files of its own folder and of the
folders that were allowed, links followed.
"""

import os
import re
from collections.abc import Iterator, Sequence
from pathlib import Path

from rulecheck.values.record import Record

_DRIVE = re.compile(r"[A-Za-z]:/")


def clean_path(text: str) -> str:
    """The path without quotes, backslashes as slashes."""
    stripped = text.strip()
    if len(stripped) > 1 and stripped[0] in "\"'<":
        stripped = stripped[1:].partition({"<": ">"}.get(stripped[0], stripped[0]))[0]
    return stripped.strip().replace("\\", "/")


class Outside(Record):
    """A path that leads out of all folders whose files may be included."""

    path: Path


def resolve_path(text: str, includer: Path, folders: Sequence[Path]) -> Path | Outside | None:
    """The file that a clean path means, or None where there is none in the folders.

    A path of another machine is looked for by its base name; letter case is ignored where no
    file is spelt exactly so. What lies outside is not even looked at.
    """
    if not text or "\0" in text:
        return None
    outside: Outside | None = None
    for candidate in _candidates(text, includer, folders):
        if not _within(candidate, folders):
            outside = outside or Outside(candidate)
            continue
        found = _existing(candidate)
        if found is not None:
            return found if _within(found, folders) else Outside(found)
    return outside


def _candidates(text: str, includer: Path, folders: Sequence[Path]) -> Iterator[Path]:
    base = text.rpartition("/")[2]
    for folder in (includer.parent, *folders):
        if not _DRIVE.match(text):
            yield folder / text
        yield folder / base


def _within(path: Path, folders: Sequence[Path]) -> bool:
    try:
        real = Path(os.path.realpath(path))
        return any(real.is_relative_to(os.path.realpath(folder)) for folder in folders)
    except (OSError, ValueError):
        return False


def _existing(candidate: Path) -> Path | None:
    """What is there under the name; whether it is a plain file shows when it is opened."""
    try:
        if candidate.exists():
            return None if candidate.is_dir() else candidate
        wanted = candidate.name.lower()
        names = sorted(entry.name for entry in candidate.parent.iterdir())
    except (OSError, ValueError):
        return None
    same = next((name for name in names if name.lower() == wanted), None)
    return candidate.parent / same if same else None
