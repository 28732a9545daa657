"""The packs that travel with the program, by name: `position`, `derating/rac-severe`."""

from rulecheck.reading import SourceText, packaged

SUFFIX = ".rules.yaml"
IN_FORCE = (
    *("netlist", "position", "leg", "rating", "free-path", "gate-drive"),
    *("protection", "isolation", "consistency", "snubber", "magnetics"),
)
"""Packs in force where a project names none, in order."""
PROFILES = (
    "derating/ecss-q-st-30-11c",
    "derating/eee-inst-002",
    "derating/plain-80-percent",
    "derating/rac-benign",
    "derating/rac-severe",
)
"""Packs of factors; each comes into force after the others, where it is named."""


def shipped_pack(name: str) -> SourceText | None:
    """The pack of that name; None where the program has none."""
    if name not in (*IN_FORCE, *PROFILES):
        return None
    place = packaged("rules")
    for step in (name + SUFFIX).split("/"):
        place = place / step
    return SourceText(name + SUFFIX, place.read_text(encoding="utf-8"))


def packs_in_force() -> tuple[SourceText, ...]:
    """All packs that hold where a project names none."""
    found = (shipped_pack(name) for name in IN_FORCE)
    return tuple(pack for pack in found if pack is not None)
