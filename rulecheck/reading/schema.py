"""The JSON Schema of a shape, and which keys or words it allows at a place."""

from collections.abc import Iterator
from typing import Any

import msgspec

Path = tuple[str | int, ...]


def json_schema(shape: type) -> dict[str, Any]:
    """JSON Schema (draft 2020-12) of a typed struct; quantities carry their unit as `x-unit`."""
    schema = msgspec.json.schema(shape)
    return {"$schema": "https://json-schema.org/draft/2020-12/schema", **schema}


def keys_allowed(shape: type, path: Path) -> tuple[str, ...]:
    """The keys that a mapping at that path may have; none where any may stand."""
    found: dict[str, None] = {}
    for place in _places(shape, path):
        found.update(dict.fromkeys(place.get("properties", {})))
        found.update(dict.fromkeys(place.get("propertyNames", {}).get("enum", ())))
    return tuple(found)


def words_allowed(shape: type, path: Path) -> tuple[str, ...]:
    """The words that an enumeration at that path takes."""
    found: dict[str, None] = {}
    for place in _places(shape, path):
        found.update(dict.fromkeys(str(word) for word in place.get("enum", ())))
    return tuple(found)


def _places(shape: type, path: Path) -> list[dict[str, Any]]:
    schema = msgspec.json.schema(shape)
    places = list(_alternatives(schema, schema))
    for step in path:
        places = [
            alternative
            for place in places
            for inner in _inner(place, step)
            for alternative in _alternatives(inner, schema)
        ]
    return places


def _alternatives(place: dict[str, Any], schema: dict[str, Any]) -> Iterator[dict[str, Any]]:
    if "$ref" in place:
        name = place["$ref"].rpartition("/")[2]
        yield from _alternatives(schema["$defs"][name], schema)
        return
    yield place
    for choice in place.get("anyOf", ()):
        yield from _alternatives(choice, schema)


def _inner(place: dict[str, Any], step: str | int) -> Iterator[dict[str, Any]]:
    if isinstance(step, int):
        prefix = place.get("prefixItems", ())
        candidate = prefix[step] if step < len(prefix) else place.get("items")
    else:
        candidate = place.get("properties", {}).get(step, place.get("additionalProperties"))
    if isinstance(candidate, dict):
        yield candidate
