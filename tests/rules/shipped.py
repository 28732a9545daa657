"""The shipped packs and the analysis of their examples, each example analysed once."""

from collections.abc import Sequence
from functools import cache

from rulecheck.facts import Facts
from rulecheck.pipeline import Unusable, analyse_text
from rulecheck.reading import SourceText
from rulecheck.rulebook import IN_FORCE, Rulebook, load_packs, shipped_pack
from rulecheck.values import Problem

Answer = Facts | tuple[Problem, ...]


@cache
def rulebook(*extra: str) -> Rulebook:
    """All packs in force, and further ones by name."""
    packs = [shipped_pack(name) for name in (*IN_FORCE, *extra)]
    return load_packs([pack for pack in packs if pack is not None])


def analyse(netlist: SourceText, sheet: SourceText | None, parts: Sequence[SourceText]) -> Answer:
    return _analyse(netlist.text, sheet.text if sheet else None, tuple(p.text for p in parts))


@cache
def _analyse(netlist: str, sheet: str | None, parts: tuple[str, ...]) -> Answer:
    analysis = analyse_text(
        SourceText("hut.cir", netlist),
        SourceText("hut.stage.yaml", sheet) if sheet is not None else None,
        [SourceText("hut.parts.yaml", text) for text in parts],
    )
    return analysis.problems if isinstance(analysis, Unusable) else analysis.facts
