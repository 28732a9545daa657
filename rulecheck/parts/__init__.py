"""What each element is: kind, pins by role, ratings, edges."""

from rulecheck.parts.identify import identify_parts
from rulecheck.parts.part import Conduction, Core, Datum, Edge, Kind, Part, PartList, Pin
from rulecheck.parts.part_data import NO_PART_DATA, PartData
from rulecheck.parts.part_data_file import PartDataFile
from rulecheck.parts.read_data import read_part_data
from rulecheck.parts.text import parts_text
from rulecheck.parts.through import Joined, is_barrier, joined_nets, through_nets

__all__ = [
    "NO_PART_DATA",
    "Conduction",
    "Core",
    "Datum",
    "Edge",
    "Joined",
    "Kind",
    "Part",
    "PartData",
    "PartDataFile",
    "PartList",
    "Pin",
    "identify_parts",
    "is_barrier",
    "joined_nets",
    "parts_text",
    "read_part_data",
    "through_nets",
]
