"""What each element is: kind, pins by role, ratings, edges."""

from rulecheck.parts.part import Conduction, Core, Datum, Edge, Kind, Part, PartList, Pin

__all__ = ["Conduction", "Core", "Datum", "Edge", "Kind", "Part", "PartList", "Pin"]
