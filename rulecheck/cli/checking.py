"""Judge netlists, one after the other or several at once; the answers are the same."""

import concurrent.futures
import functools
import os
import signal
from collections.abc import Sequence
from concurrent.futures.process import BrokenProcessPool
from pathlib import Path

from rulecheck.cli.analysing import sources_for
from rulecheck.cli.packs import load_rulebook
from rulecheck.cli.progress import Progress
from rulecheck.cli.project import Project
from rulecheck.cli.request import Request
from rulecheck.pipeline import Analysis, Sources, Unusable, analyse
from rulecheck.report.changes import Changes, Version, find_changes
from rulecheck.report.lint_result import OpenPoints, open_points
from rulecheck.rulebook import Rulebook, Verdicts, judge
from rulecheck.values import Limits, Problem, Span, error
from rulecheck.values.record import Record, replace


class Task(Record):
    netlist: Path
    sources: Sources
    against: "Task | None" = None
    """An earlier netlist, where the changes since are asked for."""


class Checked(Record):
    """The verdicts on one netlist and what its analysis left open; None where it is unusable."""

    verdicts: Verdicts | None
    points: OpenPoints | None
    problems: tuple[Problem, ...]
    inputs: tuple[str, ...] = ()
    changes: Changes | None = None


def earlier_task(request: Request, project: Project) -> Task | None:
    """The netlist of `--against`; `--stage` is the sheet of the new one alone."""
    if request.against is None:
        return None
    old = Path(request.against)
    return Task(old, sources_for(old, replace(request, stage=None), project))


def check_all(
    tasks: Sequence[Task],
    rulebook: Rulebook,
    packs: tuple[str, ...],
    jobs: int,
    progress: Progress,
) -> list[Checked]:
    """One answer a task, in order; with several jobs each process loads the packs itself."""
    workers = min(jobs or os.cpu_count() or 1, len(tasks))
    if workers > 1:
        return _check_apart(tasks, packs, workers, progress)
    answers = []
    with progress:
        for task in tasks:
            answers.append(check_one(task, rulebook, progress))
            progress.netlist_done()
    return answers


def check_one(task: Task, rulebook: Rulebook, progress: Progress) -> Checked:
    analysis = analyse(task.netlist, task.sources, progress.step)
    if isinstance(analysis, Unusable):
        return Checked(None, None, analysis.problems)
    progress.step("rules")
    verdicts = judge(rulebook, analysis.facts, task.sources.access.limits)
    past = compared(task.against, rulebook, version_of(analysis, verdicts))
    return Checked(
        verdicts,
        open_points(analysis.stage, analysis.demands, analysis.problems),
        (*analysis.problems, *past.problems),
        (*analysis.inputs, *past.inputs),
        past.changes,
    )


class Past(Record):
    """The changes since an earlier netlist; none where none is asked for or it is unusable."""

    changes: Changes | None = None
    problems: tuple[Problem, ...] = ()
    inputs: tuple[str, ...] = ()


def compared(against: Task | None, rulebook: Rulebook, new: Version) -> Past:
    """Analyse and judge the earlier netlist by the same rules, and compare."""
    if against is None:
        return Past()
    old = analyse(against.netlist, against.sources)
    if isinstance(old, Unusable):
        return Past(problems=old.problems)
    changes = find_changes(
        version_of(old, judge(rulebook, old.facts, against.sources.access.limits)), new
    )
    return Past(changes, old.problems, old.inputs)


def version_of(analysis: Analysis, verdicts: Verdicts) -> Version:
    return Version(analysis.stage, analysis.capabilities, analysis.demands, verdicts)


def _check_apart(
    tasks: Sequence[Task], packs: tuple[str, ...], workers: int, progress: Progress
) -> list[Checked]:
    pool = concurrent.futures.ProcessPoolExecutor(workers, initializer=_die_on_interrupt)
    with pool:
        answers = [pool.submit(_check_in_worker, task, packs) for task in tasks]
        # the thread of the progress bar starts after the workers: a fork copies no other thread
        with progress:
            for _ in concurrent.futures.as_completed(answers):
                progress.netlist_done()
    return [_answer(answer, task) for answer, task in zip(answers, tasks, strict=True)]


def _answer(answer: "concurrent.futures.Future[Checked]", task: Task) -> Checked:
    try:
        return answer.result()
    except BrokenProcessPool:
        what = "the process that checked this netlist, or one beside it, was killed"
        remedy = "check it alone with --jobs 1; it may need more memory than there is"
        return Checked(None, None, (error(Span(str(task.netlist), 1), what, remedy),))


def _die_on_interrupt() -> None:
    """Ctrl-C reaches every process of a terminal: a worker ends without a word."""
    signal.signal(signal.SIGINT, signal.SIG_DFL)


def _check_in_worker(task: Task, packs: tuple[str, ...]) -> Checked:
    rulebook = _rulebook_of_worker(packs, task.sources.access.limits)
    return check_one(task, rulebook, Progress())


@functools.cache
def _rulebook_of_worker(packs: tuple[str, ...], limits: Limits) -> Rulebook:
    rulebook = load_rulebook(packs, limits=limits)
    if not isinstance(rulebook, Rulebook):
        raise RuntimeError("a pack changed while it was in use")
    return rulebook
