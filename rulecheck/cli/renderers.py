"""Fetch a renderer by its format and let it write into text."""

import importlib
import io
import sys
from collections.abc import Mapping
from pathlib import PurePath
from typing import Protocol, TextIO, TypeVar

from rulecheck.cli.formats import BY_SUFFIX
from rulecheck.cli.output import Document
from rulecheck.cli.request import Output, Request
from rulecheck.cli.terminal import look_for
from rulecheck.report import Look
from rulecheck.values import harmless

Result = TypeVar("Result")
Shown = TypeVar("Shown", contravariant=True)


class Renderer(Protocol[Shown]):
    """What each report module offers."""

    def __call__(self, result: Shown, stream: TextIO, look: Look, /) -> None: ...


def documents(
    result: Result, request: Request, modules: Mapping[str, str], default: str
) -> list[Document]:
    """Every report that was asked for, rendered; nothing is written yet."""
    reports = []
    for output in request.outputs:
        module = modules[_format(output, modules, default)]
        renderer: Renderer[Result] = importlib.import_module(module).render
        reports.append(
            Document(rendered(result, renderer, look_at(request, output.file)), output.file, True)
        )
    return reports


def rendered(result: Result, renderer: Renderer[Result], look: Look) -> str:
    """The report as text."""
    stream = io.StringIO()
    renderer(result, stream, look)
    return harmless(stream.getvalue(), look.color)


def look_at(request: Request, file: str | None) -> Look:
    """How a report may look at its destination: a file is UTF-8 and no terminal."""
    look = look_for(sys.stdout, request)
    if file is None or file == "-":
        return look
    return Look(look.width, request.ascii, request.color == "always", request.quiet)


def _format(output: Output, modules: Mapping[str, str], default: str) -> str:
    """The format asked for, else what the file's suffix says, else the default."""
    if output.format is not None:
        return output.format
    by_suffix = BY_SUFFIX.get(PurePath(output.file or "").suffix.lower(), default)
    return by_suffix if by_suffix in modules else default
