"""A stage, or its demands, from cards and a sheet in one line.

>>> stage = stage_of("M1 BUS G SW SW FET ...", "ports: ...")
>>> stage.roles["C12"]
"""

from rulecheck.demand import Demands, find_demands
from rulecheck.netlist import read_circuit_text
from rulecheck.parts import identify_parts, read_part_data
from rulecheck.reading import SourceText
from rulecheck.stage import Position, Stage, StageReading, read_sheet, read_stage
from rulecheck.values import Interval

MODELS = """
.model FET VDMOS(Rd=1m)
.model DX D(Is=1p)
.model SWX SW(Ron=1m)
.model NPX NPN(Bf=50)
.model PPX PNP(Bf=50)
"""
PARTS = """
parts:
  "IGX": {kind: igbt}
  "IGD": {kind: igbt-with-diode}
"""


def reading_of(cards: str, sheet: str = "", data: str = PARTS) -> StageReading:
    """The stage and the problems that show when sheet and circuit meet."""
    circuit = read_circuit_text(SourceText("t.cir", f"* test\n{cards}\n{MODELS}.end\n"))
    parts = identify_parts(circuit, read_part_data([SourceText("t.parts.yaml", data)]))
    reading = read_sheet(SourceText("t.stage.yaml", sheet or "{}"))
    assert not reading.problems, [problem.line() for problem in reading.problems]
    return read_stage(parts, reading.sheet)


def stage_of(cards: str, sheet: str = "", data: str = PARTS) -> Stage:
    reading = reading_of(cards, sheet, data)
    assert not reading.problems, [problem.line() for problem in reading.problems]
    return reading.stage


def demands_of(cards: str, sheet: str = "", data: str = PARTS) -> Demands:
    return find_demands(stage_of(cards, sheet, data))


def position(stage: Stage, name: str) -> Position:
    return next(p for p in stage.positions if p.name == name)


def span(low: float, high: float) -> Interval:
    return Interval(low, high)
