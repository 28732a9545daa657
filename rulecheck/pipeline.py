"""The whole analysis as one list of named steps."""

import os
from collections.abc import Callable, Sequence
from pathlib import Path

from rulecheck.capability import Capabilities, find_capabilities
from rulecheck.demand import Demands, find_demands
from rulecheck.facts import Facts, collect_facts
from rulecheck.netlist import ORDINARY, Access, Circuit, read_circuit_text
from rulecheck.parts import PartList, identify_parts, read_part_data
from rulecheck.reading import SourceText, read_text
from rulecheck.stage import EMPTY_SHEET, SheetReading, Stage, read_sheet, read_stage
from rulecheck.values import Problem, Span, error, errors_of
from rulecheck.values.record import Record, field

SHEET_SUFFIX = ".stage.yaml"
NO_SHEET = SheetReading(EMPTY_SHEET, ())
STEPS = ("circuit", "parts", "stage", "capability", "demand", "facts")
Tell = Callable[[str], None]
"""Takes the name of each step as it begins."""


def _tell_nobody(step: str) -> None:
    """Nobody waits for word."""


class Analysis(Record):
    """Every product of the steps for one netlist, and every problem met on the way."""

    netlist: str
    circuit: Circuit
    parts: PartList
    stage: Stage
    capabilities: Capabilities
    demands: Demands
    facts: Facts
    problems: tuple[Problem, ...]
    """Errors here are cards that could not be read; the analysis names their elements."""
    inputs: tuple[str, ...]
    """Every file that was read."""


class Unusable(Record):
    """No analysis: a file could not be read, or sheet or part data are at fault."""

    problems: tuple[Problem, ...]


class Sources(Record):
    """Where a netlist's companions are; no sheet named means the one beside it, if any."""

    sheet: Path | None = None
    parts: tuple[Path, ...] = field(default=())
    access: Access = ORDINARY


BESIDE = Sources()


def analyse(
    path: Path, sources: Sources = BESIDE, tell: Tell = _tell_nobody
) -> Analysis | Unusable:
    """Read the files and analyse them; the sheet's own part data come before those named here."""
    limits = sources.access.limits
    netlist = read_text(path, limits)
    sheet_path = sources.sheet or sheet_beside(path)
    sheet = read_text(sheet_path, limits) if sheet_path is not None else None
    reading = read_sheet(sheet) if isinstance(sheet, SourceText) else NO_SHEET
    parts = [read_text(file, limits) for file in part_files(reading, sources)]
    failed = tuple(text for text in (netlist, sheet, *parts) if isinstance(text, Problem))
    if isinstance(netlist, Problem) or failed:
        return Unusable((*failed, *reading.problems))
    texts = [text for text in parts if isinstance(text, SourceText)]
    return _run_steps(netlist, reading, texts, sources.access, tell)


def analyse_text(
    netlist: SourceText,
    sheet: SourceText | None = None,
    parts: Sequence[SourceText] = (),
    access: Access = ORDINARY,
) -> Analysis | Unusable:
    """The same on texts at hand; nothing but the netlist's includes is read from disk."""
    reading = read_sheet(sheet) if sheet is not None else NO_SHEET
    return _run_steps(netlist, reading, parts, access)


def sheet_beside(netlist: Path) -> Path | None:
    """`hut.stage.yaml` for `hut.cir`, where it is there."""
    sheet = netlist.parent / (netlist.stem + SHEET_SUFFIX)
    return sheet if os.path.lexists(sheet) else None


def part_files(sheet: SheetReading, sources: Sources) -> tuple[Path, ...]:
    """The sheet's part data, relative to the sheet, then those named besides; each once."""
    folder = Path(sheet.sheet.file).parent
    listed = tuple(folder / name for name in sheet.sheet.parts)
    return tuple(dict.fromkeys((*listed, *sources.parts)))


def _run_steps(
    netlist: SourceText,
    sheet: SheetReading,
    parts: Sequence[SourceText],
    access: Access,
    tell: Tell = _tell_nobody,
) -> Analysis | Unusable:
    tell("circuit")
    part_data = read_part_data(parts)
    circuit = read_circuit_text(netlist, access)
    problems = (*circuit.problems, *sheet.problems, *part_data.problems)
    if errors_of((*sheet.problems, *part_data.problems)) or not circuit.elements:
        return Unusable(_with_reason(netlist.file, problems))
    tell("parts")
    part_list = identify_parts(circuit, part_data)
    tell("stage")
    stage, stage_problems = _stage(part_list, sheet)
    if errors_of(stage_problems):
        return Unusable((*problems, *stage_problems))
    tell("capability")
    capabilities = find_capabilities(stage.positions)
    tell("demand")
    demands = find_demands(stage)
    tell("facts")
    facts = collect_facts(stage, capabilities, demands)
    return Analysis(
        netlist.file,
        circuit,
        part_list,
        stage,
        capabilities,
        demands,
        facts,
        (*problems, *stage_problems),
        _inputs(netlist, sheet, parts, circuit),
    )


def _stage(parts: PartList, sheet: SheetReading) -> tuple[Stage, tuple[Problem, ...]]:
    reading = read_stage(parts, sheet.sheet)
    return reading.stage, reading.problems


def _inputs(
    netlist: SourceText, sheet: SheetReading, parts: Sequence[SourceText], circuit: Circuit
) -> tuple[str, ...]:
    own = (netlist.file, sheet.sheet.file, *(source.file for source in parts))
    return tuple(dict.fromkeys(file for file in (*own, *circuit.files) if file))


def _with_reason(file: str, problems: tuple[Problem, ...]) -> tuple[Problem, ...]:
    """An empty file is an error too, whether or not the reader saw one."""
    if errors_of(problems):
        return problems
    return (*problems, error(Span(file, 1), "no element in this netlist", "export it again"))
