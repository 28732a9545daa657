"""A pack as it stands in YAML: the shape that `*.rules.yaml` is validated against.

pack: position
parameters:
  derate.blocking: {value: 0.8, meaning: share of the rating that may be used, source: ...}
rules:
  - id: reverse-current-path
    subject: position
    applies: needs-reverse-current
    requires: carries-reverse
    ...
"""

from typing import Annotated, Literal

import msgspec
from msgspec import Meta

from rulecheck.facts import VOCABULARY

Level = Literal["error", "warning", "note"]
Figure = str | int | float
Condition = Annotated[str, Meta(description="a condition, see `rulecheck rules --facts`")]
SubjectName = Annotated[
    str,
    Meta(
        description="the kind of subject that it judges",
        extra_json_schema={"enum": list(VOCABULARY)},
    ),
]


class ParameterEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """A quantity with its unit, or a table of quantities by word with a row `other`."""

    value: Figure | dict[str, Figure]
    meaning: str = ""
    source: str = ""


class ExampleEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """A small stage and what the rule says of it, or of the one subject named."""

    netlist: str
    expect: Literal["holds", "broken", "undecided", "silent"]
    """`silent`: the rule has nothing to say, because it does not apply."""
    of: str | None = None
    sheet: str | None = None
    parts: str | None = None
    shows: str = ""


class GraverEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """Another level where a further condition is met."""

    when: Condition
    level: Level


class RuleEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """One rule, its own manual page and its own test."""

    id: str
    subject: SubjectName
    requires: Condition
    level: Level
    message: str
    why: str
    remedy: str
    source: str
    examples: list[ExampleEntry]
    applies: Condition | None = None
    graver: GraverEntry | None = None
    values: dict[str, Condition] = {}
    parameters: dict[str, ParameterEntry] = {}


class ChangeEntry(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """What a pack changes in a rule of an earlier pack, with a reason."""

    rule: str
    reason: str
    level: Level | None = None
    off: bool = False
    parameters: dict[str, ParameterEntry] = {}


class PackFile(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """A whole `*.rules.yaml`."""

    pack: str
    version: Figure = 1
    about: str = ""
    parameters: dict[str, ParameterEntry] = {}
    set: dict[str, ParameterEntry] = {}
    """New values for parameters of earlier packs."""
    rules: list[RuleEntry] = []
    change: list[ChangeEntry] = []
