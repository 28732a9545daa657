"""Every key that a YAML file may hold, with the words that say what it means.

The shapes of a file hold its keys and types; a table of `Word`s beside them, by place, holds
what a person is told: `{"ports.*.between": Word("The nets of ...", "[BAT, PGND]")}`.
"""

from collections.abc import Iterator, Mapping
from typing import Any

import msgspec

from rulecheck.values.record import Record

EACH = "*"
"""The step of a place for any key of a mapping by name, or any item of a list."""
_NOUNS = {
    "string": "text",
    "integer": "a number",
    "number": "a number",
    "boolean": "true or false",
    "array": "a list",
    "object": "keys of its own",
}


class Word(Record):
    """What a key means, its value as it may stand in YAML, and an example of a name below it."""

    sentence: str
    example: str = ""
    called: str = ""


Words = Mapping[str, Word]
"""By place, such as `ports.*.between`."""
NO_WORD = Word("No words on this key yet.")


class Key(Record):
    """A key of a file: `path` from its root, and the form of its value in words."""

    path: tuple[str, ...]
    form: str
    required: bool

    @property
    def name(self) -> str:
        return self.path[-1]

    @property
    def place(self) -> str:
        """`ports.*.between`"""
        return ".".join(self.path)


def keys_of(shape: type) -> tuple[Key, ...]:
    """Every key of the file, parents before children, in the order of the shapes."""
    schema = msgspec.json.schema(shape)
    return tuple(key for key, _ in _keys(schema, schema, ()))


def put_words(schema: dict[str, Any], words: Words) -> dict[str, Any]:
    """The JSON Schema with each key's words in it, which an editor shows; changed in place."""
    for key, entry in list(_keys(schema, schema, ())):
        word = words.get(key.place)
        if word is not None:
            entry["description"] = word.sentence
            entry.update({"examples": [word.example]} if word.example else {})
    return schema


def _keys(
    place: dict[str, Any], schema: dict[str, Any], path: tuple[str, ...]
) -> Iterator[tuple[Key, dict[str, Any]]]:
    for inner in _alternatives(place, schema):
        required = inner.get("required", ())
        for name, entry in inner.get("properties", {}).items():
            yield Key((*path, name), _form(entry, schema), name in required), entry
            yield from _keys(entry, schema, (*path, name))
        for entry in (inner.get("additionalProperties"), inner.get("items")):
            if isinstance(entry, dict):
                yield from _keys(entry, schema, (*path, EACH))


def _form(entry: dict[str, Any], schema: dict[str, Any]) -> str:
    """`a voltage, such as 58 V`, `a list`, `one of here, elsewhere`."""
    found: dict[str, None] = {}
    for place in _alternatives(entry, schema):
        words = place.get("enum", ())
        if words:
            found[f"one of {', '.join(str(word) for word in words)}"] = None
        elif "description" in place and "title" not in place:
            return str(place["description"])
        elif place.get("type") in _NOUNS:
            found[_NOUNS[place["type"]]] = None
    return " or ".join(found)


def _alternatives(place: dict[str, Any], schema: dict[str, Any]) -> Iterator[dict[str, Any]]:
    if "$ref" in place:
        yield from _alternatives(schema["$defs"][place["$ref"].rpartition("/")[2]], schema)
        return
    yield place
    for choice in place.get("anyOf", ()):
        yield from _alternatives(choice, schema)
