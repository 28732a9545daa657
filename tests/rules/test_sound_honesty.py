"""Taking any datum away from a sound stage never makes a verdict `holds` that was not.

A few data of each stage by default, spread over them all; EVERY_DATUM=1 takes each in turn.
"""

import os
from collections.abc import Iterator, Sequence
from functools import cache
from pathlib import Path
from typing import Any

import pytest
import yaml

from rulecheck.capability import find_capabilities
from rulecheck.facts import Facts, collect_facts
from rulecheck.parts import Edge, Part
from rulecheck.parts.edges import find_edges
from rulecheck.pipeline import Analysis, Unusable, analyse, analyse_text
from rulecheck.reading import SourceText, read_text
from rulecheck.rulebook import judge
from rulecheck.stage import Position, Stage
from rulecheck.values.record import replace
from tests.rules.shipped import rulebook

SOUND = sorted((Path(__file__).resolve().parent.parent / "circuits" / "sound").glob("*.cir"))
FEW = 2
Answers = dict[tuple[str, str, str], str]


def answers(facts: Facts) -> Answers:
    verdicts = judge(rulebook(), facts).verdicts
    return {(v.rule, v.kind, v.subject): v.verdict for v in verdicts}


def held(facts: Facts) -> set[tuple[str, str, str]]:
    return {check for check, verdict in answers(facts).items() if verdict == "holds"}


@cache
def analysed(netlist: Path) -> Analysis:
    analysis = analyse(netlist)
    assert isinstance(analysis, Analysis)
    return analysis


def chosen(items: Sequence[Any]) -> Sequence[Any]:
    """All of them, or a few, evenly spread."""
    step = 1 if os.environ.get("EVERY_DATUM") else max(1, len(items) // FEW)
    return items[::step]


@pytest.mark.parametrize("netlist", SOUND, ids=lambda path: path.stem)
def test_a_rating_less_makes_nothing_hold(netlist):
    analysis = analysed(netlist)
    before = held(analysis.facts)
    stated = sorted({(p.text, path) for p in analysis.parts.parts for path in p.data})
    for text, path in chosen(stated):
        new = held(_facts_without(analysis, text, path)) - before
        assert not new, (text, path)


def _facts_without(analysis: Analysis, text: str, path: str) -> Facts:
    """The facts with that figure taken from all parts of that text; demand knows no ratings."""
    stage = analysis.stage
    parts = tuple(_without(p, path) if p.text == text else p for p in stage.parts.parts)
    listed = replace(stage.parts, parts=parts, by_name={part.name: part for part in parts})
    positions = tuple(_with_edges(stage, p, listed.by_name) for p in stage.positions)
    less = replace(stage, parts=listed, positions=positions)
    return collect_facts(less, find_capabilities(positions), analysis.demands)


def _without(part: Part, path: str) -> Part:
    less = replace(part, data={name: datum for name, datum in part.data.items() if name != path})
    return replace(less, edges=find_edges(less))


def _with_edges(stage: Stage, position: Position, parts: Any) -> Position:
    edges = [edge for name in position.parts for edge in _merged(stage, parts[name])]
    return replace(position, edges=tuple(edges))


def _merged(stage: Stage, part: Part) -> Iterator[Edge]:
    for edge in part.edges:
        tail, head = (stage.merged.get(net, net) for net in (edge.tail, edge.head))
        yield replace(edge, tail=tail, head=head)


@pytest.mark.parametrize("netlist", SOUND, ids=lambda path: path.stem)
def test_a_line_less_in_the_sheet_turns_no_verdict_into_holds(netlist):
    """Less is known of the demand, so it may widen, and a rule apply that did not before."""
    analysis = analysed(netlist)
    before = answers(analysis.facts)
    sheet = netlist.with_suffix(".stage.yaml")
    whole = yaml.safe_load(sheet.read_text(encoding="utf-8"))
    parts = [sheet.parent / name for name in whole.get("parts", [])]
    text, *sources = [read_text(path) for path in (netlist, *parts)]
    for path in chosen([leaf for leaf in _leaves(whole) if _is_datum(leaf)]):
        less = yaml.safe_dump(_pruned(whole, path), sort_keys=False)
        found = analyse_text(text, SourceText(str(sheet), less), sources)
        if not isinstance(found, Unusable):
            assert {before.get(check, "holds") for check in held(found.facts)} <= {"holds"}, path


def _is_datum(leaf: tuple[str, ...]) -> bool:
    """A role overrules a reading and adds no knowledge; part data are taken away above."""
    return leaf[0] != "parts" and leaf[-1] != "role"


def _leaves(node: Any, path: tuple[str, ...] = ()) -> Iterator[tuple[str, ...]]:
    if isinstance(node, dict):
        for key, value in node.items():
            yield from _leaves(value, (*path, key))
    else:
        yield path


def _pruned(node: dict[str, Any], path: tuple[str, ...]) -> dict[str, Any]:
    if len(path) == 1:
        return {key: value for key, value in node.items() if key != path[0]}
    return {**node, path[0]: _pruned(node[path[0]], path[1:])}
