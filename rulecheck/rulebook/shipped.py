"""The packs that travel with the program, by name: `position`, `derating/rac-severe`."""

from rulecheck.reading import SourceText, packaged

SUFFIX = ".rules.yaml"
IN_FORCE = (
    *("netlist", "position", "leg", "rating", "free-path", "gate-drive", "commutation"),
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

BY_NAME = ("bus",)
"""Packs in force where a project or an argument names them."""
DISCHARGE_LIMITS = (
    "discharge/iec-60204-1",
    "discharge/iec-61010-1",
    "discharge/iec-61800-5-1",
    "discharge/nfpa-79",
    "discharge/un-r94",
    "discharge/vehicle-active",
)
"""Packs of times and of charges let pass, each in force where it is named after `bus`."""


def shipped_pack(name: str) -> SourceText | None:
    """The pack of that name; None where the program has none."""
    if name not in (*IN_FORCE, *BY_NAME, *PROFILES, *DISCHARGE_LIMITS):
        return None
    place = packaged("rules")
    for step in (name + SUFFIX).split("/"):
        place = place / step
    return SourceText(name + SUFFIX, place.read_text(encoding="utf-8"))


def packs_in_force() -> tuple[SourceText, ...]:
    """All packs that hold where a project names none."""
    found = (shipped_pack(name) for name in IN_FORCE)
    return tuple(pack for pack in found if pack is not None)
