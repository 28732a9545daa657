"""Collect the facts: every subject's module is asked once, the stage's links close the circle."""

from collections.abc import Callable, Iterable, Mapping
from dataclasses import replace

from rulecheck.capability import Capabilities
from rulecheck.demand import Demands
from rulecheck.facts import (
    free_path_facts,
    gate_drive_facts,
    leg_facts,
    net_facts,
    part_facts,
    passive_facts,
    port_facts,
    position_facts,
    state_facts,
)
from rulecheck.facts.facts import Bounds, Facts, Subject, Value
from rulecheck.facts.inputs import Inputs, gather
from rulecheck.facts.vocabulary import VOCABULARY
from rulecheck.stage import Stage
from rulecheck.values import Interval, Unknown, natural_key

_COLLECTORS: tuple[Callable[[Inputs], tuple[Subject, ...]], ...] = (
    net_facts.collect,
    part_facts.collect,
    position_facts.collect,
    leg_facts.collect,
    state_facts.collect,
    gate_drive_facts.collect,
    passive_facts.collect,
    port_facts.collect,
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
    by_kind["stage"] = [_closed(subject, by_kind) for subject in net_facts.collect_stage(inputs)]
    subjects = {kind: _distinct(found) for kind, found in by_kind.items()}
    by_name = {(s.kind, s.name): s for found in subjects.values() for s in found}
    return Facts(stage.netlist, subjects, by_name)


def _distinct(subjects: Iterable[Subject]) -> tuple[Subject, ...]:
    """In natural order; of two with one name the first, which the second then stands behind."""
    kept: dict[str, Subject] = {}
    for subject in subjects:
        kept.setdefault(subject.name, subject)
    return tuple(sorted(kept.values(), key=lambda subject: natural_key(subject.name)))


def _closed(stage: Subject, by_kind: Mapping[str, list[Subject]]) -> Subject:
    """The stage's subject with its links, and with what is counted over its positions."""
    links = {
        link: tuple(dict.fromkeys(subject.name for subject in by_kind[kind]))
        for link, kind in _OF_STAGE.items()
    }
    one_way = [s for s in by_kind["position"] if _holds_one_polarity(s)]
    counts = {
        "turned-positions": _how_many([subject.values["turned"] for subject in one_way]),
        "asymmetric-positions": float(len(one_way)),
    }
    return replace(stage, values={**stage.values, **counts}, links=links)


def _how_many(answers: list[Value]) -> Value:
    """The number of yes among the answers, within bounds where some are not known."""
    least = float(sum(answer is True for answer in answers))
    unknown = tuple(dict.fromkeys(a for a in answers if isinstance(a, Unknown)))
    if not unknown:
        return least
    most = least + sum(isinstance(answer, Unknown) for answer in answers)
    return Bounds(Interval(least, most), unknown)


def _holds_one_polarity(position: Subject) -> bool:
    values = position.values
    one = values["holds-off-forward"] != values["holds-off-reverse"]
    return one and values["gated"] is True
