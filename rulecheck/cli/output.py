"""Write reports: whole files or none, and never over a file that was read."""

import os
import sys
import tempfile
from collections.abc import Iterable
from pathlib import Path

from rulecheck.values import Problem, Span, error
from rulecheck.values.record import Record


class Document(Record):
    """A finished report and where it goes; no file is standard output."""

    text: str
    file: str | None


def refused(files: Iterable[str], inputs: Iterable[str]) -> tuple[Problem, ...]:
    """One error for each output file that is also an input."""
    read = {os.path.realpath(path) for path in inputs}
    return tuple(
        error(Span(file, 1), "the output would overwrite an input", "name another file after -o")
        for file in files
        if os.path.realpath(file) in read
    )


def write_documents(documents: Iterable[Document]) -> tuple[Problem, ...]:
    """Write them all; a file that cannot be written is an error, and its old content stays."""
    problems: list[Problem] = []
    for document in documents:
        if document.file is None or document.file == "-":
            sys.stdout.write(document.text)
        else:
            try:
                write_whole(Path(document.file), document.text)
            except OSError as failure:
                reason = failure.strerror or type(failure).__name__
                what = f"cannot be written: {reason}"
                problems.append(error(Span(document.file, 1), what, "choose a file you may write"))
    return tuple(problems)


def write_whole(path: Path, text: str) -> None:
    """Replace the file in one step, so that a reader sees the old content or the new one.

    Raises OSError where the folder is missing or not writable.
    """
    target = Path(os.path.realpath(path))
    if target.exists() and not target.is_file():
        with target.open("w", encoding="utf-8", newline="") as device:
            device.write(text)
        return
    descriptor, name = tempfile.mkstemp(prefix=f".{target.name}.", dir=target.parent)
    try:
        with os.fdopen(descriptor, "w", encoding="utf-8", newline="") as file:
            file.write(text)
        os.chmod(name, _mode(target))
        os.replace(name, target)
    except BaseException:
        os.unlink(name)
        raise


def _mode(target: Path) -> int:
    """The old file's mode, or what a plain `open` would give a new one."""
    if target.exists():
        return target.stat().st_mode & 0o7777
    mask = os.umask(0)
    os.umask(mask)
    return 0o666 & ~mask
