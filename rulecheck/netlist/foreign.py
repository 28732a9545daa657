"""Files that are no netlist: named as what they seem to be."""

import re
from collections.abc import Callable

from rulecheck.reading import SourceText
from rulecheck.values import Problem, Span, error

_HEAD = 20_000
_WEB = re.compile(r"^[ \t]*<(?:!doctype\s+html|html)\b", re.IGNORECASE | re.MULTILINE)
_XML = re.compile(r"\s*<\?xml\b", re.IGNORECASE)
_TAG = re.compile(r"\s*</?[a-z!][\w:-]*[\s/>]", re.IGNORECASE)
_LIST = re.compile(r"\s*(?:\(\s*[A-Za-z_]|\))")
_SECTION = re.compile(r"\s*\[[^\]]+\]\s*\Z")
_SETTING = re.compile(r"\s*[\w.\\/-]+\s*=")
_TABLE = re.compile(r"\s*\"[^\"]*\"\s*[,;\t ]\s*\"[^\"]*\"")
_DATA = re.compile(r"\s*[\[{]\s*[\"{\[]")
_YAML = re.compile(r"\s*[\w\"*-]+:(?:\s|\Z)|\s*- |---\s*\Z|#")
_CONTROL = re.compile(r"[\x00-\x08\x0e-\x1f\ufffd]")
_ALMOST_ALL = 0.9
_MOST = 0.5


def _share(pattern: re.Pattern[str], text: str) -> float:
    """How many of the rows that are not blank begin so."""
    rows = [row for row in text.split("\n") if row.strip()]
    return sum(bool(pattern.match(row)) for row in rows) / max(len(rows), 1)


def _first(pattern: re.Pattern[str], text: str) -> bool:
    return pattern.match(text.strip().partition("\n")[0]) is not None


def _binary(text: str) -> bool:
    return text.count("\0") * 200 > len(text) or len(_CONTROL.findall(text)) * 20 > len(text)


def _lists(text: str) -> bool:
    return _first(_LIST, text) and (_share(_LIST, text) > _MOST or "\n" not in text.strip())


def _settings(text: str) -> bool:
    sections = sum(bool(_SECTION.match(row)) for row in text.split("\n"))
    return _first(_SECTION, text) and (sections > 1 or _share(_SETTING, text) > _MOST)


def _markup(text: str) -> bool:
    return bool(_XML.match(text)) or (_first(_TAG, text) and _share(_TAG, text) > _MOST)


# What the text seems to be, and how that shows; in this order.
_KINDS: tuple[tuple[str, Callable[[str], bool]], ...] = (
    ("a binary file", _binary),
    ("a web page", lambda text: bool(_WEB.search(text))),
    ("a file of marked-up text (XML)", _markup),
    ("a list in parentheses, as board tools write their netlists", _lists),
    ("a file of sections and settings, such as a schematic or a project", _settings),
    ("a table in quotes, as board tools write their netlists", lambda t: _share(_TABLE, t) > _MOST),
    ("a JSON file", lambda text: bool(_DATA.match(text))),
    ("a YAML file, such as a stage sheet", lambda text: _share(_YAML, text) > _ALMOST_ALL),
)


def name_foreign(source: SourceText) -> Problem | None:
    """One error that says what the file seems to be, or None where it may be a netlist."""
    head = source.text[:_HEAD]
    span = Span(source.file, 1)
    remedy = "give a SPICE-style netlist: export it from the schematic"
    if not head.strip():
        return error(span, "the file is empty", remedy)
    for what, shows in _KINDS:
        if shows(head):
            return error(span, f"this is no netlist; it seems to be {what}", remedy)
    return None
