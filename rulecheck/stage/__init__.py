"""The power stage: ports, part roles, branches and switch positions."""

from rulecheck.stage.build import StageReading, read_stage
from rulecheck.stage.common_window import CommonWindow, Segment, common_window
from rulecheck.stage.gate_command import GateCommand, OnTimes
from rulecheck.stage.gate_drive import DrivenBy, DriveOutput, GateClamp, GateDrive, GatePath
from rulecheck.stage.position import Position
from rulecheck.stage.sheet import EMPTY_SHEET, Sheet, SheetReading, read_sheet
from rulecheck.stage.sheet_file import SheetFile
from rulecheck.stage.stage import (
    Barrier,
    Branch,
    BranchKind,
    Crossing,
    Port,
    PortKind,
    Role,
    Stage,
    Switching,
    Transformer,
)
from rulecheck.stage.text import stage_text

__all__ = [
    "EMPTY_SHEET",
    "Barrier",
    "Branch",
    "BranchKind",
    "CommonWindow",
    "Crossing",
    "DriveOutput",
    "DrivenBy",
    "GateClamp",
    "GateCommand",
    "GateDrive",
    "GatePath",
    "OnTimes",
    "Port",
    "PortKind",
    "Position",
    "Role",
    "Segment",
    "Sheet",
    "SheetFile",
    "SheetReading",
    "Stage",
    "StageReading",
    "Switching",
    "Transformer",
    "common_window",
    "read_sheet",
    "read_stage",
    "stage_text",
]
