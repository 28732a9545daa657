"""Files that are no netlist: named as what they seem to be."""

import re
from collections.abc import Callable

from rulecheck.reading import SourceText
from rulecheck.values import Problem, Span, error

_HEAD = 20_000
_WEB = re.compile(r"<(?:!doctype\s+html|html|head|body)\b", re.IGNORECASE)
_MARKUP = re.compile(r"\s*<\?xml\b|\s*<[a-z][\w-]*[\s>]", re.IGNORECASE)
_LISTS = re.compile(r"\s*\(\s*[A-Za-z_][\w-]*[\s()]")
_SECTION = re.compile(r"\[[^\]\n]+\]\s*\Z")
_SETTING = re.compile(r"[\w .\\/-]+\s*=")
_TABLE = re.compile(r"\s*\"[^\"]*\"(?:\s*[,;\t]\s*\"[^\"]*\")+|\s*\"[^\"]*\"\s+\"[^\"]*\"")
_YAML = re.compile(r"[\w-]+:(?:\s|\Z)|\s+[\w\"*-]+:(?:\s|\Z)|\s+- |---\s*\Z|#")
_CONTROL = re.compile(r"[\x00-\x08\x0e-\x1f�]")


def _rows(text: str) -> list[str]:
    return [row for row in text.split("\n") if row.strip()]


def _binary(text: str) -> bool:
    return "\x00" in text or len(_CONTROL.findall(text)) > len(text) / 20


def _sections(text: str) -> bool:
    rows = _rows(text)
    if not rows or not _SECTION.match(rows[0].strip()):
        return False
    settings = sum(bool(_SECTION.match(row.strip()) or _SETTING.match(row)) for row in rows)
    return settings * 2 > len(rows)


def _table(text: str) -> bool:
    rows = _rows(text)
    return len(rows) > 1 and sum(bool(_TABLE.match(row)) for row in rows) * 2 > len(rows)


def _data(text: str) -> bool:
    return text.lstrip()[:1] == "{" and '"' in text[:200]


def _yaml(text: str) -> bool:
    rows = _rows(text)
    return bool(rows) and sum(bool(_YAML.match(row)) for row in rows) * 10 > len(rows) * 9


# What the text seems to be, and how that shows; in this order.
_KINDS: tuple[tuple[str, Callable[[str], bool]], ...] = (
    ("a binary file", _binary),
    ("a web page", lambda text: bool(_WEB.search(text))),
    ("a file of marked-up text (XML)", lambda text: bool(_MARKUP.match(text))),
    (
        "a list in parentheses, as board tools write their netlists",
        lambda text: bool(_LISTS.match(text)),
    ),
    ("a file of sections and settings, such as a schematic or a project", _sections),
    ("a table in quotes, as board tools write their netlists", _table),
    ("a JSON file", _data),
    ("a YAML file, such as a stage sheet", _yaml),
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
