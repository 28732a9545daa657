"""The power stage: ports, part roles, branches and switch positions."""

from rulecheck.stage.position import Position
from rulecheck.stage.stage import (
    Branch,
    BranchKind,
    Port,
    PortKind,
    Role,
    Stage,
    Switching,
    Transformer,
)

__all__ = [
    "Branch",
    "BranchKind",
    "Port",
    "PortKind",
    "Position",
    "Role",
    "Stage",
    "Switching",
    "Transformer",
]
