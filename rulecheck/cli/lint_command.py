"""`rulecheck lint`: judge every netlist, excuse what is accepted, report, answer with a status."""

import datetime
import sys
from collections.abc import Sequence
from pathlib import Path

from rulecheck.cli.analysing import Answer, finish, sources_for
from rulecheck.cli.checking import Checked, Task, check_all, earlier_task
from rulecheck.cli.complaints import complain
from rulecheck.cli.formats import LINT
from rulecheck.cli.output import Document
from rulecheck.cli.packs import load_rulebook
from rulecheck.cli.progress import progress_for
from rulecheck.cli.project import PROJECT_NAME, Project, find_project
from rulecheck.cli.renderers import documents
from rulecheck.cli.request import Request
from rulecheck.reading import read_text
from rulecheck.report.lint_result import LintReport, LintRun, OpenPoints, lint_report
from rulecheck.rulebook import (
    Deviation,
    Rulebook,
    Verdicts,
    apply_deviations,
    new_since,
    read_deviations,
    read_record,
    record_text,
    unused_deviations,
)
from rulecheck.rulebook.record import Known
from rulecheck.rulebook.waiting import tally_of
from rulecheck.values import Problem, Span, error, errors_of
from rulecheck.values.record import Record, replace

NOTHING_OPEN = OpenPoints((), (), (), ())
_NO_NETLIST = error(
    Span(PROJECT_NAME, 1),
    "no netlist is named, here or on the command line",
    "name one, or list the repository's netlists in this file",
)


class _Basis(Record):
    """What all netlists of the run are judged by."""

    project: Project
    packs: tuple[str, ...]
    rulebook: Rulebook
    deviations: tuple[Deviation, ...]
    known: Known | None
    tasks: tuple[Task, ...]


def run(request: Request) -> int:
    """0: nothing broken at or above the level asked; 1: something broken; 2: input unusable."""
    return answer(request).status


def answer(request: Request) -> Answer:
    """The same, with the files that were read."""
    basis = _prepare(request)
    if not isinstance(basis, _Basis):
        return Answer(complain(basis, request.limits))
    progress = progress_for(request, len(basis.tasks))
    answers = check_all(basis.tasks, basis.rulebook, basis.packs, request.jobs, progress)
    today = datetime.datetime.now(datetime.UTC).date()
    judged = [_excused(answer, basis.deviations, today) for answer in answers]
    result = _lint_run(request, basis, judged, today)
    default = "table" if sys.stdout.isatty() else "lines"
    reports = documents(result, request, LINT, default) if result.reports else []
    # a record with a netlist missing would make its old findings look new
    if request.record is not None and not result.unusable:
        runs = [answer.verdicts for answer in judged if answer.verdicts is not None]
        reports.append(Document(record_text(runs), request.record))
    problems = tuple(problem for answer in answers for problem in answer.problems)
    inputs = _inputs(request, basis, answers)
    status = finish(reports, inputs, problems, int(result.failed), request.limits)
    return Answer(status, inputs)


def _prepare(request: Request) -> _Basis | tuple[Problem, ...]:
    project = find_project(request.project, request.limits)
    netlists = tuple(Path(name) for name in request.names) or project.netlists
    if errors_of(project.problems):
        return project.problems
    packs = tuple(dict.fromkeys((*project.packs, *request.rules)))
    rulebook = load_rulebook(packs, limits=request.limits)
    if not isinstance(rulebook, Rulebook):
        return rulebook
    reading = read_deviations(project.deviations, project.deviation_spans, rulebook)
    known = _record(request)
    problems = (*reading.problems, *((known,) if isinstance(known, Problem) else ()))
    if not netlists:
        problems = (*problems, _NO_NETLIST)
    if problems or isinstance(known, Problem):
        return problems
    earlier = earlier_task(request, project)
    tasks = tuple(Task(path, sources_for(path, request, project), earlier) for path in netlists)
    return _Basis(project, packs, rulebook, reading.deviations, known, tasks)


def _record(request: Request) -> Known | Problem | None:
    if request.since is None:
        return None
    source = read_text(Path(request.since), request.limits)
    return source if isinstance(source, Problem) else read_record(source)


def _excused(answer: Checked, deviations: Sequence[Deviation], today: datetime.date) -> Checked:
    if answer.verdicts is None:
        return answer
    return replace(answer, verdicts=apply_deviations(answer.verdicts, deviations, today))


def _lint_run(
    request: Request, basis: _Basis, answers: Sequence[Checked], today: datetime.date
) -> LintRun:
    reports = tuple(
        replace(
            lint_report(answer.verdicts, answer.points, _recorded(answer.verdicts, basis.known)),
            changes=answer.changes,
        )
        for answer in answers
        if answer.verdicts is not None and answer.points is not None
    )
    unusable = tuple(
        str(task.netlist)
        for task, answer in zip(basis.tasks, answers, strict=True)
        if answer.verdicts is None
    )
    whole = not request.names and not unusable
    undecided_fails = basis.project.undecided_fails
    return LintRun(
        (*reports, *(_on_deviations(basis, answers, today) if whole else ())),
        basis.rulebook.rules,
        request.fail_at or basis.project.fail_at,
        undecided_fails if request.undecided is None else request.undecided == "fail",
        basis.rulebook.switched_off,
        {rule.id: rule.remedy for rule in basis.rulebook.rules},
        unusable,
    )


def _recorded(verdicts: Verdicts, known: Known | None) -> frozenset[str] | None:
    if known is None:
        return None
    new = {verdict.fingerprint for verdict in new_since(known, verdicts.netlist, verdicts.verdicts)}
    return frozenset(v.fingerprint for v in verdicts.verdicts if v.fingerprint not in new)


def _on_deviations(
    basis: _Basis, answers: Sequence[Checked], today: datetime.date
) -> tuple[LintReport, ...]:
    """Deviations that excuse nothing in the whole project; a part of it could not tell."""
    runs = [answer.verdicts for answer in answers if answer.verdicts is not None]
    unused = unused_deviations(runs, basis.deviations, today)
    if not unused:
        return ()
    verdicts = Verdicts(basis.project.file, unused, (), tally_of(unused))
    return (lint_report(verdicts, NOTHING_OPEN),)


def _inputs(request: Request, basis: _Basis, answers: Sequence[Checked]) -> tuple[str, ...]:
    read = tuple(file for answer in answers for file in answer.inputs)
    named = tuple(str(task.netlist) for task in basis.tasks)
    # the record may be written anew over the one that it is compared with
    since = (request.since,) if request.since not in (None, request.record) else ()
    files = (*read, *named, *basis.packs, basis.project.file, *(file for file in since if file))
    return tuple(dict.fromkeys(file for file in files if file))
