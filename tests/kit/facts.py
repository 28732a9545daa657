"""Facts of a netlist, and one rule's verdict on one of its subjects, in a line."""

from functools import cache

from rulecheck.facts import Facts
from rulecheck.pipeline import Unusable, analyse_text
from rulecheck.reading import SourceText
from rulecheck.rulebook import IN_FORCE, Rulebook, judge, load_packs, shipped_pack


def facts_of(netlist: str, sheet: str, parts: str) -> Facts:
    analysis = analyse_text(
        SourceText("t.cir", netlist),
        SourceText("t.stage.yaml", sheet),
        [SourceText("t.parts.yaml", parts)],
    )
    assert not isinstance(analysis, Unusable), [p.line() for p in analysis.problems]
    return analysis.facts


@cache
def _rulebook() -> Rulebook:
    packs = (shipped_pack(name) for name in IN_FORCE)
    return load_packs([pack for pack in packs if pack is not None])


def verdict_of(rule: str, subject: str, netlist: str, sheet: str, parts: str) -> str:
    """`holds`, `broken` or `undecided`; `silent` where the rule does not apply."""
    found = [
        verdict.verdict
        for verdict in judge(_rulebook(), facts_of(netlist, sheet, parts)).verdicts
        if (verdict.rule, verdict.subject) == (rule, subject)
    ]
    return found[0] if found else "silent"
