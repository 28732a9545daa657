"""`rulecheck report NETLIST -o FILE`: the review document, one self-contained HTML file."""

import datetime
from pathlib import Path

from rulecheck import __version__
from rulecheck.cli.analysing import finish, sources_for
from rulecheck.cli.checking import Past, Task, compared, earlier_task, version_of
from rulecheck.cli.complaints import complain
from rulecheck.cli.inputs_read import inputs_read
from rulecheck.cli.moment import Moment, asked_moment, moment_of
from rulecheck.cli.output import Document
from rulecheck.cli.packs import load_rulebook
from rulecheck.cli.progress import progress_for
from rulecheck.cli.project import Project, find_project
from rulecheck.cli.renderers import look_at, rendered
from rulecheck.cli.request import Request
from rulecheck.pipeline import Analysis, Unusable, analyse
from rulecheck.report.lint_result import lint_report, open_points
from rulecheck.report.review import Findings, Occasion, Review, Studied, make_review
from rulecheck.report.review.page import render
from rulecheck.rulebook import Deviation, Rulebook, apply_deviations, judge, read_deviations
from rulecheck.values import Limits, Problem, errors_of
from rulecheck.values.record import Record, replace


class _Basis(Record):
    """What the netlist is judged by."""

    project: Project
    rulebook: Rulebook
    deviations: tuple[Deviation, ...]
    asked: Moment | None
    limits: Limits


def run(request: Request) -> int:
    """Write the document; findings are what it is for, so they are no failure here."""
    basis = _prepare(request)
    if not isinstance(basis, _Basis):
        return complain(basis, request.limits)
    netlist = Path(request.names[0])
    with progress_for(request, 1) as progress:
        analysis = analyse(netlist, sources_for(netlist, request, basis.project), progress.step)
    if isinstance(analysis, Unusable):
        return complain(analysis.problems, request.limits)
    review, past = _review(analysis, basis, earlier_task(request, basis.project))
    documents = [
        Document(rendered(review, render, look_at(request, output.file)), output.file, True)
        for output in request.outputs
    ]
    inputs = (*analysis.inputs, *past.inputs, basis.project.file)
    return finish(documents, inputs, (*analysis.problems, *past.problems), limits=request.limits)


def _prepare(request: Request) -> _Basis | tuple[Problem, ...]:
    project = find_project(request.project, request.limits)
    if errors_of(project.problems):
        return project.problems
    rulebook = load_rulebook((*project.packs, *request.rules), limits=request.limits)
    if not isinstance(rulebook, Rulebook):
        return rulebook
    reading = read_deviations(project.deviations, project.deviation_spans, rulebook)
    asked = asked_moment()
    if reading.problems or isinstance(asked, Problem):
        return (*reading.problems, *((asked,) if isinstance(asked, Problem) else ()))
    return _Basis(project, rulebook, reading.deviations, asked, request.limits)


def _review(analysis: Analysis, basis: _Basis, earlier: Task | None) -> tuple[Review, Past]:
    moment = basis.asked or moment_of(Path(analysis.netlist))
    # a deviation ends on its day, whatever the date of the netlist's file
    today = basis.asked.day if basis.asked else datetime.datetime.now(datetime.UTC).date()
    judged = judge(basis.rulebook, analysis.facts, basis.limits)
    past = compared(earlier, basis.rulebook, version_of(analysis, judged))
    verdicts = apply_deviations(judged, basis.deviations, today)
    points = open_points(analysis.stage, analysis.demands, analysis.problems)
    review = make_review(
        Studied(analysis.stage, analysis.capabilities, analysis.demands, analysis.problems),
        Findings(lint_report(verdicts, points), basis.rulebook, basis.deviations),
        inputs_read(analysis, basis.project.file),
        Occasion(moment.day.isoformat(), moment.whose, __version__),
    )
    return replace(review, changes=past.changes), past
