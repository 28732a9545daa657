"""How files are opened: text with its encodings, YAML with line marks into typed structs."""

from rulecheck.reading.packaged import packaged
from rulecheck.reading.schema import json_schema
from rulecheck.reading.text import SourceText, decode, read_text
from rulecheck.reading.typed import YamlReading, read_yaml

__all__ = [
    "SourceText",
    "YamlReading",
    "decode",
    "json_schema",
    "packaged",
    "read_text",
    "read_yaml",
]
