"""`rulecheck explain NETLIST NAME`: the derivation for a name, or what one step found."""

import difflib
from collections.abc import Callable, Mapping

from rulecheck.capability import capabilities_text
from rulecheck.cli.analysing import analyse_one, finish
from rulecheck.cli.complaints import complain
from rulecheck.cli.output import Document
from rulecheck.cli.renderers import look_at, rendered
from rulecheck.cli.request import Request
from rulecheck.demand import demands_text
from rulecheck.facts import facts_text
from rulecheck.netlist import circuit_text
from rulecheck.parts import parts_text
from rulecheck.pipeline import Analysis, Unusable
from rulecheck.report.explain import explain, known_names
from rulecheck.report.explain_text import render
from rulecheck.stage import stage_text
from rulecheck.values import Problem, Span, error

STEPS: Mapping[str, Callable[[Analysis], str]] = {
    "circuit": lambda analysis: circuit_text(analysis.circuit),
    "parts": lambda analysis: parts_text(analysis.parts),
    "stage": lambda analysis: stage_text(analysis.stage),
    "capability": lambda analysis: capabilities_text(analysis.capabilities),
    "demand": lambda analysis: demands_text(analysis.demands),
    "facts": lambda analysis: facts_text(analysis.facts),
}


def run(request: Request) -> int:
    """Print the explanation; a name that the stage does not have is an error."""
    analysis = analyse_one(request)
    if isinstance(analysis, Unusable):
        return complain(analysis.problems, request.limits)
    texts = [_text(analysis, request, output.file) for output in request.outputs]
    unknown = tuple(text for text in texts if isinstance(text, Problem))
    if unknown:
        return complain((*analysis.problems, *unknown), request.limits)
    documents = [
        Document(text, output.file, request.step is None)
        for text, output in zip(texts, request.outputs, strict=True)
        if isinstance(text, str)
    ]
    return finish(documents, analysis.inputs, analysis.problems, limits=request.limits)


def _text(analysis: Analysis, request: Request, file: str | None) -> str | Problem:
    if request.step is not None:
        text = STEPS[request.step](analysis)
        return text if text.endswith("\n") else f"{text}\n"
    name = request.names[1]
    look = look_at(request, file)
    explanation = explain(name, analysis.stage, analysis.capabilities, analysis.demands, look)
    if explanation is None:
        return _no_such_name(name, analysis)
    return rendered(explanation, render, look)


def _no_such_name(name: str, analysis: Analysis) -> Problem:
    names = known_names(analysis.stage, analysis.demands)
    by_case = {known.lower(): known for known in names}
    close = difflib.get_close_matches(name.lower(), by_case, 1)
    remedy = (
        f"did you mean '{by_case[close[0]]}'?"
        if close
        else "`rulecheck quadrants` lists the positions"
    )
    what = f"no position, leg, part or port is called '{name}'"
    return error(Span(analysis.netlist, 1), what, remedy)
