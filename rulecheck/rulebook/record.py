"""Records of today's broken findings, so that a later run can fail on what is new alone.

The record is JSON, one object: netlist -> list of [fingerprint, rule, subject], sorted.
"""

import json
from collections.abc import Iterable, Mapping
from typing import Any

from rulecheck.reading import SourceText
from rulecheck.rulebook.verdicts import BROKEN, Verdict, Verdicts
from rulecheck.values import Problem, Span, error

FORMAT = "rulecheck record 1"
Known = Mapping[str, frozenset[str]]
"""By netlist: the fingerprints of its recorded findings."""


def record_text(runs: Iterable[Verdicts]) -> str:
    """The broken and not excused findings of a run, as the text of a record file."""
    netlists = {
        _name(run.netlist): sorted(
            [verdict.fingerprint, verdict.rule, verdict.subject]
            for verdict in run.verdicts
            if _counts(verdict)
        )
        for run in runs
    }
    return json.dumps({"format": FORMAT, "netlists": netlists}, indent=1, sort_keys=True) + "\n"


def read_record(source: SourceText) -> Known | Problem:
    """The fingerprints of a record file; a file that is none is a problem."""
    try:
        content = json.loads(source.text)
    except (ValueError, RecursionError):
        return _no_record(source)
    if not _is_record(content):
        return _no_record(source)
    return {
        netlist: frozenset(str(entry[0]) for entry in entries)
        for netlist, entries in content["netlists"].items()
    }


def new_since(known: Known, netlist: str, verdicts: Iterable[Verdict]) -> tuple[Verdict, ...]:
    """The broken and not excused findings of that netlist that the record does not have."""
    recorded = known.get(_name(netlist), frozenset())
    return tuple(v for v in verdicts if _counts(v) and v.fingerprint not in recorded)


def _counts(verdict: Verdict) -> bool:
    return verdict.verdict == BROKEN and verdict.excuse is None


def _name(netlist: str) -> str:
    name = netlist.replace("\\", "/")
    return name.removeprefix("./")


def _is_record(content: Any) -> bool:
    if not isinstance(content, dict) or content.get("format") != FORMAT:
        return False
    netlists = content.get("netlists")
    return isinstance(netlists, dict) and all(
        isinstance(entries, list) and all(isinstance(e, list) and e for e in entries)
        for entries in netlists.values()
    )


def _no_record(source: SourceText) -> Problem:
    remedy = "write one with `rulecheck lint --record FILE`"
    return error(Span(source.file, 1), "this is no record of findings", remedy)
