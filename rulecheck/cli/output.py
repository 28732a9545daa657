"""Write reports: whole files or none, and never over a file that was read."""

import errno
import os
import sys
import tempfile
from collections.abc import Iterable
from pathlib import Path

from rulecheck.values import Problem, Span, error, harmless
from rulecheck.values.record import Record

_STANDARD_OUTPUT = (None, "-", "/dev/stdout")
_DEVICES = ("/dev/", "/proc/")


class Document(Record):
    """A finished report and where it goes; no file is standard output."""

    text: str
    file: str | None
    colored: bool = False
    """Whether the text may hold colour codes; what a file said is made harmless in it already."""


def refused(files: Iterable[str], inputs: Iterable[str]) -> tuple[Problem, ...]:
    """One error for each output file that is also an input."""
    read = {os.path.realpath(path) for path in inputs}
    return tuple(
        error(Span(file, 1), "the output would overwrite an input", "name another file after -o")
        for file in files
        if os.path.realpath(file) in read
    )


def write_documents(documents: Iterable[Document]) -> tuple[Problem, ...]:
    """Write them all; a file that cannot be written is an error, and its old content stays.

    Every file is complete beside its target before the first one takes its place.
    """
    problems: list[Problem] = []
    ready: list[tuple[str, Path]] = []
    for document in documents:
        text = harmless(document.text, document.colored)
        if document.file in _STANDARD_OUTPUT:
            _print(text)
            continue
        try:
            beside = _beside(Path(document.file), text)
        except OSError as failure:
            problems.append(_not_written(document.file, failure))
        else:
            ready += [(beside, Path(document.file))] if beside else []
    for beside, target in ready:
        try:
            _take_place(beside, target)
        except OSError as failure:
            problems.append(_not_written(str(target), failure))
    return tuple(problems)


def _not_written(file: str, failure: OSError) -> Problem:
    reason = failure.strerror or str(failure) or type(failure).__name__
    return error(Span(file, 1), f"cannot be written: {reason}", "choose a file you may write")


def _print(text: str) -> None:
    """To standard output; a reader that has left (`| head`) does not change what was found."""
    try:
        sys.stdout.write(text)
        sys.stdout.flush()
    except BrokenPipeError:
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())


def write_whole(path: Path, text: str) -> None:
    """Replace the file in one step, so that a reader sees the old content or the new one.

    Raises OSError where the folder is missing or not writable, or where a link stands there.
    """
    beside = _beside(path, text)
    if beside:
        _take_place(beside, path)


def _beside(target: Path, text: str) -> str:
    """The name of a complete new file beside the target; empty where a device took the text."""
    data = text.encode("utf-8", "backslashreplace")
    if target.exists() and not target.is_file():
        _give_to_device(target, data)
        return ""
    if os.path.islink(target):
        if not str(target.absolute()).startswith(_DEVICES):
            where = os.readlink(target)
            raise OSError(errno.ELOOP, f"it is a link to '{where}'; name that file, or delete it")
        _give_to_device(target, data)
        return ""
    descriptor, name = tempfile.mkstemp(prefix=f".{target.name[:100]}.", dir=target.parent)
    try:
        with os.fdopen(descriptor, "wb") as file:
            file.write(data)
            file.flush()
            os.fsync(descriptor)
        os.chmod(name, _mode(target))
    except BaseException:
        os.unlink(name)
        raise
    return name


def _take_place(name: str, target: Path) -> None:
    try:
        os.replace(name, target)
    except BaseException:
        os.unlink(name)
        raise


def _give_to_device(target: Path, data: bytes) -> None:
    """A pipe that nobody reads is an error, not a wait without end."""
    waiting = getattr(os, "O_NONBLOCK", 0)
    descriptor = os.open(target, os.O_WRONLY | waiting)
    if waiting:
        os.set_blocking(descriptor, True)
    with os.fdopen(descriptor, "wb") as device:
        device.write(data)


def _mode(target: Path) -> int:
    """The old file's mode, or what a plain `open` would give a new one."""
    if target.exists():
        return target.stat().st_mode & 0o777
    mask = os.umask(0)
    os.umask(mask)
    return 0o666 & ~mask
