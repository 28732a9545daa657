"""The YAML files that a user writes: the shape of each, its words, and what it is called."""

from collections.abc import Mapping

from rulecheck.cli.project import ProjectFile
from rulecheck.cli.project_words import PROJECT_WORDS
from rulecheck.parts import PartDataFile
from rulecheck.parts.part_data_words import PART_DATA_WORDS
from rulecheck.reading.keys import Words
from rulecheck.rulebook import PackFile
from rulecheck.rulebook.pack_words import PACK_WORDS
from rulecheck.stage import SheetFile
from rulecheck.stage.sheet_words import SHEET_WORDS
from rulecheck.values.record import Record


class FileShape(Record):
    shape: type
    words: Words
    called: str


FILE_SHAPES: Mapping[str, FileShape] = {
    "sheet": FileShape(SheetFile, SHEET_WORDS, "a stage sheet"),
    "parts": FileShape(PartDataFile, PART_DATA_WORDS, "a file of part data"),
    "rules": FileShape(PackFile, PACK_WORDS, "a pack of rules"),
    "project": FileShape(ProjectFile, PROJECT_WORDS, "a project file"),
}
"""By the name of its schema."""
