"""Findings as SARIF 2.1.0 (OASIS), one run over all netlists.

A broken rule is a result of kind `fail`, an undecided one of kind `open` (its level is then
`none`, as the standard asks); a deviation is an accepted external suppression.
"""

import json
from typing import TextIO
from urllib.parse import quote

from rulecheck import __version__
from rulecheck.report.cautions import CAUTIONS
from rulecheck.report.changes import ABSENT, Changes
from rulecheck.report.lint_json import json_value
from rulecheck.report.lint_result import (
    LintReport,
    LintRun,
    excuse_text,
    off_line,
    sentence,
    tally_line,
    undecided_lines,
    unusable_line,
)
from rulecheck.report.look import PLAIN, Look
from rulecheck.report.one_line import one_line
from rulecheck.report.open_points import merged
from rulecheck.rulebook import Rule, Verdict
from rulecheck.values import Span

SCHEMA = (
    "https://docs.oasis-open.org/sarif/sarif/v2.1.0/errata01/os/schemas/sarif-schema-2.1.0.json"
)


def render(run: LintRun, stream: TextIO, look: Look = PLAIN) -> None:
    """Write one log with one run."""
    del look
    log = {"$schema": SCHEMA, "version": "2.1.0", "runs": [_run(run)]}
    json.dump(log, stream, indent=1)
    stream.write("\n")


def _run(run: LintRun) -> dict[str, object]:
    places = {rule.id: number for number, rule in enumerate(run.rules)}
    return {
        "tool": {
            "driver": {
                "name": "rulecheck",
                "version": __version__,
                "semanticVersion": __version__,
                "rules": [_rule(rule) for rule in run.rules],
            }
        },
        "columnKind": "unicodeCodePoints",
        "invocations": [
            {
                "executionSuccessful": not run.unusable,
                "toolExecutionNotifications": _notifications(run),
            }
        ],
        "results": [
            _result(report, finding, places)
            for report in run.reports
            for finding in report.findings
        ],
    }


def _rule(rule: Rule) -> dict[str, object]:
    return {
        "id": rule.id,
        "shortDescription": {"text": rule.id.replace("-", " ")},
        "fullDescription": {"text": rule.why or rule.id},
        "help": {"text": rule.remedy or rule.why or rule.id},
        "defaultConfiguration": {"level": rule.level},
        "properties": {"source": rule.source},
    }


def _result(report: LintReport, finding: Verdict, places: dict[str, int]) -> dict[str, object]:
    undecided = finding.verdict == "undecided"
    result: dict[str, object] = {
        "ruleId": finding.rule,
        "ruleIndex": places.get(finding.rule, -1),
        "kind": "open" if undecided else "fail",
        "level": "none" if undecided else finding.level,
        "message": {"text": one_line(sentence(finding), PLAIN)},
        "locations": [_location(finding)],
        "properties": _properties(finding),
    }
    if finding.fingerprint:
        result["partialFingerprints"] = {"rulecheck/v1": finding.fingerprint}
    if report.recorded is not None:
        result["baselineState"] = "unchanged" if report.is_recorded(finding) else "new"
    elif report.changes is not None:
        result["baselineState"] = _since(report.changes, finding)
    if finding.related:
        result["relatedLocations"] = [
            {"id": number, "physicalLocation": _place(span)}
            for number, span in enumerate(finding.related, 1)
        ]
    if finding.excuse is not None:
        result["suppressions"] = [
            {"kind": "external", "status": "accepted", "justification": excuse_text(finding)}
        ]
    return result


def _since(changes: Changes, finding: Verdict) -> str:
    """Against an earlier netlist: `new`, `updated` where it says otherwise, or `unchanged`."""
    of_it = (c for c in changes.findings if (c.what, c.subject) == (finding.rule, finding.subject))
    return next(("new" if c.old == ABSENT else "updated" for c in of_it), "unchanged")


def _location(finding: Verdict) -> dict[str, object]:
    parts = [{"name": name, "kind": "element"} for name in finding.parts]
    nets = [{"name": name, "kind": "net"} for name in finding.nets]
    return {"physicalLocation": _place(finding.span), "logicalLocations": [*parts, *nets]}


def _place(span: Span) -> dict[str, object]:
    return {
        "artifactLocation": {"uri": quote(span.file.replace("\\", "/"), safe="/")},
        "region": {"startLine": span.line, "startColumn": span.column},
    }


def _properties(finding: Verdict) -> dict[str, object]:
    return {
        "verdict": finding.verdict,
        "values": {name: json_value(value) for name, value in finding.values.items()},
        "missing": [item.settle for item in finding.missing],
    }


def _notifications(run: LintRun) -> list[dict[str, object]]:
    """What a reader of the results alone would miss: the open points and the cautions."""
    lines = [line for report in run.reports for line in _open_lines(report)]
    lines += [f"rule switched off: {off_line(off)}" for off in run.switched_off]
    failed = [_notification("error", unusable_line(netlist)) for netlist in run.unusable]
    return [*failed, *(_notification("note", line) for line in (*lines, *CAUTIONS))]


def _notification(level: str, text: str) -> dict[str, object]:
    return {"level": level, "message": {"text": one_line(text, PLAIN)}}


def _open_lines(report: LintReport) -> list[str]:
    lines = [tally_line(report.tally), *undecided_lines(report)]
    lines += [
        f"undetermined: {item.what}; settle with {item.settle_with}" for item in report.undetermined
    ]
    lines += [f"not covered: {line}" for line in report.not_covered]
    lines += [f"assumed: {line}" for line in merged(report.assumed)]
    return [f"{report.netlist}: {line}" for line in lines]
