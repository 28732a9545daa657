"""Packs of rules, the condition language, verdicts in three values, deviations."""

from rulecheck.rulebook.deviation_file import DeviationEntry
from rulecheck.rulebook.deviations import (
    Deviation,
    apply_deviations,
    read_deviations,
    unused_deviations,
)
from rulecheck.rulebook.examples import Trial, try_examples
from rulecheck.rulebook.judge import judge
from rulecheck.rulebook.load import load_packs
from rulecheck.rulebook.pack_file import PackFile
from rulecheck.rulebook.record import new_since, read_record, record_text
from rulecheck.rulebook.rulebook import PackInForce, Rule, Rulebook, SwitchedOff
from rulecheck.rulebook.rules_text import rules_text
from rulecheck.rulebook.shipped import (
    BY_NAME,
    DISCHARGE_LIMITS,
    IN_FORCE,
    PROFILES,
    SUFFIX,
    packs_in_force,
    shipped_pack,
)
from rulecheck.rulebook.verdicts import Excuse, Tally, Verdict, Verdicts, Waiting

__all__ = [
    "BY_NAME",
    "DISCHARGE_LIMITS",
    "IN_FORCE",
    "PROFILES",
    "SUFFIX",
    "Deviation",
    "DeviationEntry",
    "Excuse",
    "PackFile",
    "PackInForce",
    "Rule",
    "Rulebook",
    "SwitchedOff",
    "Tally",
    "Trial",
    "Verdict",
    "Verdicts",
    "Waiting",
    "apply_deviations",
    "judge",
    "load_packs",
    "new_since",
    "packs_in_force",
    "read_deviations",
    "read_record",
    "record_text",
    "rules_text",
    "shipped_pack",
    "try_examples",
    "unused_deviations",
]
