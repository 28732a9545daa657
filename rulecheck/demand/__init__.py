"""What the circuit asks of each position, from its legal switching states."""

from rulecheck.demand.bank_records import BankFindings, CapacitorBank, Discharge
from rulecheck.demand.build import find_demands
from rulecheck.demand.commands import ClosedLoop, CommandedGroup, CommandedState, Takeover
from rulecheck.demand.demands import (
    Bridge,
    Demands,
    FreeShort,
    Group,
    HardCommutation,
    InterruptedCurrent,
    Leg,
    PositionDemand,
    State,
    Undetermined,
    Variable,
    Witness,
)
from rulecheck.demand.evaluate import polarities_of
from rulecheck.demand.likeness import Likeness, compare_legs
from rulecheck.demand.text import demands_text
from rulecheck.demand.waveforms.records import (
    CapacitorWaves,
    Derived,
    InductorWaves,
    PositionWaves,
    Waveforms,
)

__all__ = [
    "BankFindings",
    "Bridge",
    "CapacitorBank",
    "CapacitorWaves",
    "ClosedLoop",
    "CommandedGroup",
    "CommandedState",
    "Demands",
    "Derived",
    "Discharge",
    "FreeShort",
    "Group",
    "HardCommutation",
    "InductorWaves",
    "InterruptedCurrent",
    "Leg",
    "Likeness",
    "PositionDemand",
    "PositionWaves",
    "State",
    "Takeover",
    "Undetermined",
    "Variable",
    "Waveforms",
    "Witness",
    "compare_legs",
    "demands_text",
    "find_demands",
    "polarities_of",
]
