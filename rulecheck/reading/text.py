"""Open a text file whatever wrote it: byte order marks, encodings, line ends."""

import difflib
from dataclasses import dataclass
from pathlib import Path

from rulecheck.values import Problem, Span, error

_MARKS = (
    (b"\xef\xbb\xbf", "utf-8"),
    (b"\xff\xfe", "utf-16-le"),
    (b"\xfe\xff", "utf-16-be"),
)
_SAMPLE = 4096
_END_OF_FILE = 0x1A


@dataclass(frozen=True, slots=True)
class SourceText:
    """A file's text with lines ended by newline alone; `file` is the path as the user gave it."""

    file: str
    text: str


def read_text(path: Path) -> SourceText | Problem:
    """Read a file in UTF-8, UTF-16 or an 8-bit code; a file that cannot be opened is a problem."""
    try:
        data = path.read_bytes()
    except FileNotFoundError:
        return error(Span(str(path), 1), f"there is no file '{path}'", _nearest(path))
    except IsADirectoryError:
        return error(Span(str(path), 1), f"'{path}' is a directory", "name a file in it")
    except (OSError, ValueError) as reason:
        what = f"'{path}' cannot be opened ({getattr(reason, 'strerror', None) or reason})"
        return error(Span(str(path), 1), what, "check its name and permissions")
    return SourceText(str(path), decode(data))


def decode(data: bytes) -> str:
    """Text of the bytes up to a DOS end-of-file byte; no byte sequence fails."""
    text = _characters(data)
    return text.replace("\r\n", "\n").replace("\r", "\n")


def _characters(data: bytes) -> str:
    for mark, encoding in _MARKS:
        if data.startswith(mark):
            rest = data[len(mark) :]
            return rest.decode(encoding, "replace").partition("\x1a")[0]
    wide = _wide_encoding(data[:_SAMPLE])
    if wide:
        return data.decode(wide, "replace").partition("\x1a")[0]
    narrow = data.split(bytes([_END_OF_FILE]), 1)[0]
    for encoding in ("utf-8", "cp1252"):
        try:
            return narrow.decode(encoding)
        except UnicodeDecodeError:
            continue
    return narrow.decode("latin-1")


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
