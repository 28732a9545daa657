"""Judge netlists, one after the other or several at once; the answers are the same."""

import concurrent.futures
import os
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

from rulecheck.cli.packs import load_rulebook
from rulecheck.pipeline import Sources, Unusable, analyse
from rulecheck.report.lint_result import OpenPoints, open_points
from rulecheck.rulebook import Rulebook, Verdicts, judge
from rulecheck.values import Problem


@dataclass(frozen=True, slots=True)
class Task:
    netlist: Path
    sources: Sources


@dataclass(frozen=True, slots=True)
class Checked:
    """The verdicts on one netlist and what its analysis left open; None where it is unusable."""

    verdicts: Verdicts | None
    points: OpenPoints | None
    problems: tuple[Problem, ...]
    inputs: tuple[str, ...] = ()


def check_all(
    tasks: Sequence[Task], rulebook: Rulebook, packs: tuple[str, ...], jobs: int
) -> list[Checked]:
    """One answer a task, in order; with several jobs each process loads the packs itself."""
    workers = min(jobs or os.cpu_count() or 1, len(tasks))
    if workers <= 1:
        return [check_one(task, rulebook) for task in tasks]
    shares = [tasks[first::workers] for first in range(workers)]
    with concurrent.futures.ProcessPoolExecutor(workers) as pool:
        answers = list(pool.map(_check_share, shares, [packs] * workers))
    return [answers[number % workers][number // workers] for number in range(len(tasks))]


def check_one(task: Task, rulebook: Rulebook) -> Checked:
    analysis = analyse(task.netlist, task.sources)
    if isinstance(analysis, Unusable):
        return Checked(None, None, analysis.problems)
    return Checked(
        judge(rulebook, analysis.facts),
        open_points(analysis.stage, analysis.demands, analysis.problems),
        analysis.problems,
        analysis.inputs,
    )


def _check_share(tasks: Sequence[Task], packs: tuple[str, ...]) -> list[Checked]:
    rulebook = load_rulebook(packs)
    if not isinstance(rulebook, Rulebook):
        raise RuntimeError("a pack changed while it was in use")
    return [check_one(task, rulebook) for task in tasks]
