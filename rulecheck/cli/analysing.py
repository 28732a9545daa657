"""What the commands on netlists share: find the companions, analyse, answer with a status."""

import os
from pathlib import Path

from rulecheck.cli.complaints import complain
from rulecheck.cli.output import Document, refused, write_documents
from rulecheck.cli.progress import progress_for
from rulecheck.cli.project import Project, find_project
from rulecheck.cli.request import Request
from rulecheck.netlist import Access
from rulecheck.pipeline import Analysis, Sources, Unusable, analyse
from rulecheck.values import USUAL, Limits, Problem, errors_of
from rulecheck.values.record import Record


class Answer(Record):
    """A command's exit status, and every file that it read; none where it stopped early."""

    status: int
    inputs: tuple[str, ...] = ()


def sources_for(netlist: Path, request: Request, project: Project) -> Sources:
    """The sheet and the part data of a netlist, from the arguments and the project file."""
    sheet = Path(request.stage) if request.stage else _project_sheet(netlist, project)
    folders = (*project.include_dirs, *(Path(name) for name in request.include_dirs))
    parts = (*project.parts, *(Path(name) for name in request.parts))
    return Sources(sheet, parts, Access(request.limits, folders))


def analyse_one(request: Request) -> Analysis | Unusable:
    """The netlist that the command names first."""
    project = find_project(request.project, request.limits)
    if errors_of(project.problems):
        return Unusable(project.problems)
    netlist = Path(request.names[0])
    with progress_for(request, 1) as progress:
        return analyse(netlist, sources_for(netlist, request, project), progress.step)


def finish(
    documents: list[Document],
    inputs: tuple[str, ...],
    problems: tuple[Problem, ...],
    status: int = 0,
    limits: Limits = USUAL,
) -> int:
    """Write the reports, print every error, and return 2 where there is one."""
    files = [document.file for document in documents if document.file not in (None, "-")]
    blocked = refused([file for file in files if file is not None], inputs)
    written = () if blocked else write_documents(documents)
    errors = errors_of((*problems, *blocked, *written))
    return complain(errors, limits) if errors else status


def _project_sheet(netlist: Path, project: Project) -> Path | None:
    wanted = os.path.realpath(netlist)
    return next(
        (sheet for named, sheet in project.sheets.items() if os.path.realpath(named) == wanted),
        None,
    )
