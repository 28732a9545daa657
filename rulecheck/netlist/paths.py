"""Where an included file is: as written, beside the file that includes it, or by base name."""

import re
from pathlib import Path

_DRIVE = re.compile(r"[A-Za-z]:/")


def clean_path(text: str) -> str:
    """The path without quotes, backslashes as slashes."""
    stripped = text.strip()
    if len(stripped) > 1 and stripped[0] in "\"'<":
        stripped = stripped[1:].partition({"<": ">"}.get(stripped[0], stripped[0]))[0]
    return stripped.strip().replace("\\", "/")


def resolve_path(text: str, includer: Path) -> Path | None:
    """The file that a clean path means, or None where there is none.

    A path of another machine is looked for by its base name beside the including file;
    letter case is ignored where no file is spelt exactly so.
    """
    if not text or "\0" in text:
        return None
    folder = includer.parent
    base = text.rpartition("/")[2]
    tries = [folder / base] if _DRIVE.match(text) else [folder / text, folder / base]
    for candidate in tries:
        found = _existing(candidate)
        if found is not None:
            return found
    return None


def _existing(candidate: Path) -> Path | None:
    try:
        if candidate.is_file():
            return candidate
        wanted = candidate.name.lower()
        names = sorted(entry.name for entry in candidate.parent.iterdir())
    except (OSError, ValueError):
        return None
    same = next((name for name in names if name.lower() == wanted), None)
    found = candidate.parent / same if same else None
    return found if found is not None and found.is_file() else None
