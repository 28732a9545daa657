"""How long each step of the analysis takes on one netlist, in this process."""

import time
from collections.abc import Callable
from pathlib import Path
from typing import TypeVar

from rulecheck.capability import find_capabilities
from rulecheck.cli.packs import load_rulebook
from rulecheck.demand import find_demands
from rulecheck.facts import collect_facts
from rulecheck.netlist import read_circuit
from rulecheck.parts import identify_parts, read_part_data
from rulecheck.reading import SourceText, read_text
from rulecheck.rulebook import Rulebook, judge
from rulecheck.stage import read_sheet, read_stage

T = TypeVar("T")


def seconds_by_step(netlist: Path) -> dict[str, float]:
    """Processor seconds by step, in the order of the steps."""
    spent: dict[str, float] = {}

    def timed(step: str, work: Callable[[], T]) -> T:
        start = time.process_time()
        result = work()
        spent[step] = time.process_time() - start
        return result

    sheet = timed("sheet", lambda: read_sheet(_text(netlist.with_suffix(".stage.yaml"))))
    data = read_part_data([_text(netlist.parent / "chain.parts.yaml")])
    circuit = timed("netlist", lambda: read_circuit(netlist))
    parts = timed("parts", lambda: identify_parts(circuit, data))
    stage = timed("stage", lambda: read_stage(parts, sheet.sheet).stage)
    capabilities = timed("capability", lambda: find_capabilities(stage.positions))
    demands = timed("demand", lambda: find_demands(stage))
    facts = timed("facts", lambda: collect_facts(stage, capabilities, demands))
    rulebook = timed("packs", lambda: load_rulebook(()))
    assert isinstance(rulebook, Rulebook)
    timed("judge", lambda: judge(rulebook, facts))
    return spent


def _text(path: Path) -> SourceText:
    source = read_text(path)
    assert isinstance(source, SourceText)
    return source
