"""Open a text file whatever wrote it: byte order marks, encodings, line ends."""

import difflib
import os
import stat
from pathlib import Path

from rulecheck.values import USUAL, Limits, Problem, Span, error, note, raise_limit
from rulecheck.values.record import Record

_MARKS = (
    (b"\xef\xbb\xbf", "utf-8"),
    (b"\xff\xfe", "utf-16-le"),
    (b"\xfe\xff", "utf-16-be"),
)
_SAMPLE = 4096
_END_OF_FILE = 0x1A
_WITHOUT_WAITING: int = getattr(os, "O_NONBLOCK", 0) | getattr(os, "O_BINARY", 0)


class SourceText(Record):
    """A file's text with lines ended by newline alone; `file` is the path as the user gave it."""

    file: str
    text: str
    notes: tuple[Problem, ...] = ()
    """What was guessed about its encoding."""


def read_text(path: Path, limits: Limits = USUAL) -> SourceText | Problem:
    """Read a file in UTF-8, UTF-16 or an 8-bit code; a file that cannot be opened is a problem.

    Nothing but a plain file is opened: a device or a pipe could block, never end, or act.
    """
    start = Span(str(path), 1)
    most = limits["file-bytes"]
    try:
        data = _plain_bytes(path, most + 1)
    except FileNotFoundError:
        return error(start, f"there is no file '{path}'", _nearest(path))
    except IsADirectoryError:
        return error(start, f"'{path}' is a directory", "name a file in it")
    except NotAPlainFileError:
        what = f"'{path}' is a device, a pipe or a socket, and is not read"
        return error(start, what, "copy what it holds into a file")
    except (OSError, ValueError) as reason:
        what = f"'{path}' cannot be opened ({getattr(reason, 'strerror', None) or reason})"
        return error(start, what, "check its name and permissions")
    if len(data) > most:
        return error(start, f"the file has more than {most} bytes", raise_limit("file-bytes"))
    text, notes = _characters(data, str(path))
    return SourceText(str(path), _line_ends(text), notes)


class NotAPlainFileError(Exception):
    """Raised for a path that leads to a device, a pipe or a socket."""


def _plain_bytes(path: Path, most: int) -> bytes:
    """At most so many bytes of a plain file; looked at before it is opened, and once it is."""
    _must_be_plain(os.stat(path))
    descriptor = os.open(path, os.O_RDONLY | _WITHOUT_WAITING)
    with open(descriptor, "rb") as file:
        _must_be_plain(os.fstat(descriptor))
        return file.read(most)


def _must_be_plain(status: os.stat_result) -> None:
    if stat.S_ISDIR(status.st_mode):
        raise IsADirectoryError
    if not stat.S_ISREG(status.st_mode):
        raise NotAPlainFileError


def decode(data: bytes) -> str:
    """Text of the bytes up to a DOS end-of-file byte; no byte sequence fails."""
    return _line_ends(_characters(data, "")[0])


def _line_ends(text: str) -> str:
    return text.replace("\r\n", "\n").replace("\r", "\n")


def _characters(data: bytes, file: str) -> tuple[str, tuple[Problem, ...]]:
    for mark, encoding in _MARKS:
        if data.startswith(mark):
            return _marked(data[len(mark) :], encoding, file)
    wide = _wide_encoding(data[:_SAMPLE])
    if wide:
        return _marked(data, wide, file)
    narrow = data.split(bytes([_END_OF_FILE]), 1)[0]
    try:
        return narrow.decode("utf-8"), ()
    except UnicodeDecodeError as reason:
        return _eight_bit(narrow), (_no_utf_8(narrow, reason.start, file),)


def _marked(data: bytes, encoding: str, file: str) -> tuple[str, tuple[Problem, ...]]:
    text = data.decode(encoding, "replace").partition("\x1a")[0]
    if "\ufffd" not in text:
        return text, ()
    line = _line_ends(text[: text.index("\ufffd")]).count("\n") + 1
    what = f"the file is {encoding.upper()} by its first bytes, and something here is not"
    return text, (note(Span(file, line), what, "save it anew as UTF-8"),)


def _eight_bit(data: bytes) -> str:
    try:
        return data.decode("cp1252")
    except UnicodeDecodeError:
        return data.decode("latin-1")


def _no_utf_8(data: bytes, at: int, file: str) -> Problem:
    before = _line_ends(_eight_bit(data[:at]))
    span = Span(file, before.count("\n") + 1, len(before) - before.rfind("\n"))
    what = f"byte {data[at]:#04x} is no UTF-8, so that the whole file is read as Latin-1"
    return note(span, what, "save it as UTF-8 if signs look wrong")


def _wide_encoding(sample: bytes) -> str:
    """UTF-16 without a mark shows as a zero in nearly every second byte."""
    pairs = len(sample) // 2
    if not pairs:
        return ""
    first = sample[0::2].count(0) / pairs
    second = sample[1::2].count(0) / pairs
    if second > 0.6 and first < 0.1:
        return "utf-16-le"
    if first > 0.6 and second < 0.1:
        return "utf-16-be"
    return ""


def _nearest(path: Path) -> str:
    try:
        names = sorted(entry.name for entry in path.parent.iterdir())
    except (OSError, ValueError):
        return f"there is no directory '{path.parent}' either; check the path"
    close = difflib.get_close_matches(path.name, names, 1)
    return f"did you mean '{path.parent / close[0]}'?" if close else "check the name"
