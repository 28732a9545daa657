"""Collect the facts: every subject's module is asked once, the stage's links close the circle."""

from collections.abc import Callable, Iterable, Mapping

from rulecheck.capability import Capabilities
from rulecheck.demand import Demands
from rulecheck.facts import (
    bank_facts,
    clamp_facts,
    commanded_facts,
    core_facts,
    filter_facts,
    free_path_facts,
    gate_drive_facts,
    gate_supply_facts,
    isolation_facts,
    leg_facts,
    line_facts,
    net_facts,
    part_facts,
    passive_facts,
    port_facts,
    position_facts,
    shunt_facts,
    snubber_facts,
    state_facts,
    transformer_facts,
    winding_clamp_facts,
)
from rulecheck.facts.facts import Facts, Subject
from rulecheck.facts.inputs import Inputs, gather
from rulecheck.facts.turned import find_suspects, stage_values
from rulecheck.facts.vocabulary import VOCABULARY
from rulecheck.stage import Stage
from rulecheck.values import natural_key
from rulecheck.values.record import replace

_COLLECTORS: tuple[Callable[[Inputs], tuple[Subject, ...]], ...] = (
    net_facts.collect,
    part_facts.collect,
    position_facts.collect,
    leg_facts.collect,
    state_facts.collect,
    commanded_facts.collect,
    gate_drive_facts.collect,
    gate_supply_facts.collect,
    passive_facts.collect,
    bank_facts.collect,
    filter_facts.collect,
    port_facts.collect,
    line_facts.collect,
    shunt_facts.collect,
    clamp_facts.collect,
    snubber_facts.collect,
    winding_clamp_facts.collect,
    core_facts.collect,
    transformer_facts.collect,
    isolation_facts.collect,
    free_path_facts.collect,
)
_OF_STAGE = {
    "parts": "part",
    "nets": "net",
    "positions": "position",
    "legs": "leg",
    "bridges": "bridge",
    "groups": "group",
    "ports": "port",
    "free-paths": "free-path",
}


def collect_facts(stage: Stage, capabilities: Capabilities, demands: Demands) -> Facts:
    """Everything that a rule may ask of the stage; unknown where nobody stated it."""
    inputs = gather(stage, capabilities, demands)
    collected = [subject for collector in _COLLECTORS for subject in collector(inputs)]
    by_kind: dict[str, list[Subject]] = {kind: [] for kind in VOCABULARY}
    for subject in collected:
        by_kind[subject.kind].append(subject)
    suspects = find_suspects(inputs, by_kind["position"])
    by_kind["position"] = [
        replace(p, values={**p.values, "all-turned": p.name in suspects.positions})
        for p in by_kind["position"]
    ]
    (whole,) = net_facts.collect_stage(inputs)
    values = {**whole.values, **stage_values(inputs, suspects)}
    by_kind["stage"] = [replace(whole, values=values, links=_links_of_stage(by_kind))]
    subjects = {kind: _distinct(found) for kind, found in by_kind.items()}
    by_name = {(s.kind, s.name): s for found in subjects.values() for s in found}
    return Facts(stage.netlist, subjects, by_name)


def _links_of_stage(by_kind: Mapping[str, list[Subject]]) -> dict[str, tuple[str, ...]]:
    return {
        link: tuple(dict.fromkeys(subject.name for subject in by_kind[kind]))
        for link, kind in _OF_STAGE.items()
    }


def _distinct(subjects: Iterable[Subject]) -> tuple[Subject, ...]:
    """In natural order; of two with one name the first, which the second then stands behind."""
    kept: dict[str, Subject] = {}
    for subject in subjects:
        kept.setdefault(subject.name, subject)
    return tuple(sorted(kept.values(), key=lambda subject: natural_key(subject.name)))
