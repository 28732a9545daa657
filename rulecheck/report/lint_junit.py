"""Findings as JUnit XML, which continuous integration servers show as tests.

One suite a netlist; one case for each finding, and one for each rule with no finding.
"""

from typing import TextIO
from xml.etree import ElementTree

from rulecheck.report.lint_lines import finding_line
from rulecheck.report.lint_result import LintReport, LintRun, unusable_line
from rulecheck.report.look import PLAIN, Look
from rulecheck.report.one_line import visible
from rulecheck.rulebook import Verdict


def render(run: LintRun, stream: TextIO, look: Look = PLAIN) -> None:
    """Write `testsuites`; what would fail the run is a failure, what is undecided is skipped."""
    del look
    root = ElementTree.Element("testsuites", name="rulecheck")
    for report in run.reports:
        root.append(_suite(run, report))
    for netlist in run.unusable:
        root.append(_unusable_suite(netlist))
    ElementTree.indent(root, " ")
    stream.write('<?xml version="1.0" encoding="UTF-8"?>\n')
    stream.write(ElementTree.tostring(root, encoding="unicode") + "\n")


def _suite(run: LintRun, report: LintReport) -> ElementTree.Element:
    cases = [_case(run, report, finding) for finding in report.findings]
    answered = {finding.rule for finding in report.findings}
    cases += [_named_case(report, rule.id) for rule in run.rules if rule.id not in answered]
    counts = {
        "tests": len(cases),
        "failures": sum(case.find("failure") is not None for case in cases),
        "errors": 0,
        "skipped": sum(case.find("skipped") is not None for case in cases),
    }
    attributes = {name: str(count) for name, count in counts.items()}
    suite = ElementTree.Element("testsuite", {"name": _legal(report.netlist), **attributes})
    suite.extend(cases)
    return suite


def _unusable_suite(netlist: str) -> ElementTree.Element:
    counts = {"tests": "1", "failures": "0", "errors": "1", "skipped": "0"}
    suite = ElementTree.Element("testsuite", {"name": _legal(netlist), **counts})
    attributes = {"classname": _legal(netlist), "name": "analysis", "time": "0"}
    case = ElementTree.SubElement(suite, "testcase", attributes)
    ElementTree.SubElement(case, "error", message=_legal(unusable_line(netlist)))
    return suite


def _case(run: LintRun, report: LintReport, finding: Verdict) -> ElementTree.Element:
    case = _named_case(report, f"{finding.rule}: {finding.subject}")
    message = _legal(finding.message)
    text = _legal(finding_line(finding, report.is_recorded(finding)))
    if run.fails(report, finding):
        failure = ElementTree.SubElement(case, "failure", type=finding.level, message=message)
        failure.text = text
    elif finding.verdict == "undecided":
        ElementTree.SubElement(case, "skipped", message=f"undecided: {message}")
    else:
        ElementTree.SubElement(case, "system-out").text = text
    return case


def _named_case(report: LintReport, name: str) -> ElementTree.Element:
    return ElementTree.Element(
        "testcase", classname=_legal(report.netlist), name=_legal(name), time="0"
    )


def _legal(text: str) -> str:
    """XML 1.0 has no place for most control signs, not even escaped."""
    return "".join(sign if _allowed(ord(sign)) else "\ufffd" for sign in visible(text, PLAIN))


def _allowed(code: int) -> bool:
    return (
        code in (0x9, 0xA, 0xD)
        or 0x20 <= code <= 0xD7FF
        or 0xE000 <= code <= 0xFFFD
        or (code > 0xFFFF)
    )
