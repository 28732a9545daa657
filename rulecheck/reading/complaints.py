"""What the validation library says, as a record, and in the user's words."""

import difflib
import re
from collections.abc import Callable

from rulecheck.reading.schema import Path, keys_allowed, words_allowed
from rulecheck.values.record import Record

_STEP = re.compile(r"\.([^.\[]+)|\[(\d+|\.\.\.)\]")
_WANTED = re.compile(r"Expected `([^`]+)`, got `([^`]+)`\Z")
ANY_KEY = "..."
"""The library's step for a mapping's value: it does not say which."""

_TYPE_WORDS = {
    "str": "text",
    "int": "a whole number",
    "float": "a number",
    "bool": "true or false",
    "array": "a list",
    "object": "a mapping of keys",
    "null": "nothing",
}
_MOST_CHOICES = 30


class Complaint(Record):
    """One error of the library: its words, the path's steps, and whether it is about a key."""

    words: str
    steps: Path
    about_key: bool = False

    @property
    def types(self) -> tuple[tuple[str, ...], str] | None:
        """The types wanted and the one found, where it is about types."""
        match = _WANTED.match(self.words)
        return (tuple(match[1].split(" | ")), match[2]) if match else None

    @property
    def unknown_key(self) -> str | None:
        match = re.match(r"Object contains unknown field `(.*)`\Z", self.words, re.DOTALL)
        return match[1] if match else None

    @property
    def missing_key(self) -> str | None:
        match = re.match(r"Object missing required field `(.*)`\Z", self.words)
        return match[1] if match else None


def parse_complaint(text: str) -> Complaint:
    """Take the library's message apart: `Expected ... - at `$.rules[2].when``."""
    words, _, place = text.rpartition(" - at ")
    if not words:
        return Complaint(text, ())
    about_key = place.startswith("`key` in ")
    steps: list[str | int] = []
    for name, index in _STEP.findall(place.rpartition("`$")[2].rstrip("`")):
        steps.append(name or (index if index == ANY_KEY else int(index)))
    return Complaint(words, tuple(steps), about_key)


def explain(complaint: Complaint, path: Path, shape: type) -> tuple[str, str]:
    """What is wrong and what to do, in the user's words."""
    for explainer in _EXPLAINERS:
        found = explainer(complaint, path, shape)
        if found is not None:
            return found
    return complaint.words.replace("`", "'"), "correct the value"


Explainer = Callable[[Complaint, Path, type], tuple[str, str] | None]


def _unknown(complaint: Complaint, path: Path, shape: type) -> tuple[str, str] | None:
    key = complaint.unknown_key
    if key is None:
        return None
    return f"unknown key '{key}'", _nearest(key, keys_allowed(shape, path), "no key is")


def _missing(complaint: Complaint, path: Path, shape: type) -> tuple[str, str] | None:
    key = complaint.missing_key
    if key is None:
        return None
    where = f" in '{path[-1]}'" if path and isinstance(path[-1], str) else ""
    return f"key '{key}' is missing{where}", f"add '{key}: ...'"


def _type(complaint: Complaint, path: Path, shape: type) -> tuple[str, str] | None:
    types = complaint.types
    if types is None:
        return None
    wanted, got = types
    words = list(dict.fromkeys(_TYPE_WORDS.get(name, name) for name in wanted if name != "null"))
    found = "nothing is given" if got == "null" else f"this is {_TYPE_WORDS.get(got, got)}"
    place = f" for '{path[-1]}'" if path and isinstance(path[-1], str) else ""
    keys = keys_allowed(shape, path) if "object" in wanted else ()
    hint = f" with the keys {', '.join(keys[:_MOST_CHOICES])}" if keys else ""
    return f"{found}{place}", f"write {' or '.join(words)}{hint}"


def _choice(complaint: Complaint, path: Path, shape: type) -> tuple[str, str] | None:
    match = re.match(r"Invalid (?:enum )?value '?(.*?)'?\Z", complaint.words, re.DOTALL)
    if not match:
        return None
    if complaint.about_key:
        return f"unknown key '{match[1]}'", _nearest(match[1], keys_allowed(shape, path), "no key")
    return f"'{match[1]}' is not known here", _nearest(match[1], words_allowed(shape, path), "none")


_EXPLAINERS: tuple[Explainer, ...] = (_unknown, _missing, _type, _choice)


def _nearest(word: str, known: tuple[str, ...], none: str) -> str:
    lower = {name.lower(): name for name in known}
    close = difflib.get_close_matches(word.lower().replace("_", "-"), lower, 1)
    if close:
        return f"did you mean '{lower[close[0]]}'?"
    if not known:
        return f"{none} known here; delete it"
    return f"use one of {', '.join(known[:_MOST_CHOICES])}"
