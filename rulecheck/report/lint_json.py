"""Findings as JSON: one object for one netlist, a list of them for several."""

import json
from typing import TextIO

from rulecheck import __version__
from rulecheck.report.changes import ABSENT, Changes
from rulecheck.report.figures import json_number
from rulecheck.report.lint_result import LintReport, LintRun
from rulecheck.report.look import PLAIN, Look
from rulecheck.rulebook import Verdict


def render(run: LintRun, stream: TextIO, look: Look = PLAIN) -> None:
    """Write the findings and the tally; unknown numbers are null."""
    del look
    documents = [_document(report) for report in run.reports]
    json.dump(documents[0] if len(documents) == 1 else documents, stream, indent=1, sort_keys=False)
    stream.write("\n")


def _document(report: LintReport) -> dict[str, object]:
    document: dict[str, object] = {
        "rulecheck": __version__,
        "netlist": report.netlist,
        "findings": [_finding(finding) for finding in report.findings],
        "tally": {
            "holds": report.tally.holds,
            "broken": report.tally.broken,
            "undecided": report.tally.undecided,
            "excused": report.tally.excused,
        },
    }
    if report.changes is not None:
        document["changes"] = _changes(report.changes)
    return document


def _changes(changes: Changes) -> dict[str, object]:
    groups = (
        ("findings", changes.findings),
        ("positions", changes.positions),
        ("parts", changes.parts),
        ("ports", changes.ports),
    )
    return {"against": changes.old} | {
        name: [
            {"subject": c.subject, "what": c.what, "old": _there(c.old), "new": _there(c.new)}
            for c in group
        ]
        for name, group in groups
    }


def _there(text: str) -> str | None:
    return None if text == ABSENT else text


def _finding(finding: Verdict) -> dict[str, object]:
    return {
        "rule": finding.rule,
        "level": finding.level,
        "verdict": finding.verdict,
        "subject": finding.subject,
        "parts": list(finding.parts),
        "nets": list(finding.nets),
        "message": finding.message,
        "values": {name: json_value(value) for name, value in finding.values.items()},
        "missing": [{"what": item.what, "settle_with": item.settle} for item in finding.missing],
        "where": {
            "file": finding.span.file,
            "line": finding.span.line,
            "column": finding.span.column,
        },
        "deviation": _deviation(finding),
    }


def json_value(value: object) -> object:
    """A value of a finding as JSON has it: numbers finite or null, the rest as text."""
    if isinstance(value, bool | str) or value is None:
        return value
    if isinstance(value, int | float):
        return json_number(float(value))
    if isinstance(value, tuple | list):
        return [json_value(item) for item in value]
    return None


def _deviation(finding: Verdict) -> dict[str, str] | None:
    excuse = finding.excuse
    if excuse is None:
        return None
    return {"reason": excuse.reason, "accepted_by": excuse.accepted_by, "until": excuse.until}
