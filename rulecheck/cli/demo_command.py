"""`rulecheck demo DIR`: write the demo's stages there, ready to be checked and changed."""

import os
import sys
from importlib.resources import files
from pathlib import Path

from rulecheck.cli.complaints import complain
from rulecheck.cli.output import write_whole
from rulecheck.cli.request import Request
from rulecheck.values import Problem, Span, error

_NEXT = """\
Wrote {count} files to {folder}: four stages of a mountain hut, and of each a twin with one fault.
Next:
  cd {folder}
  rulecheck lint
  rulecheck quadrants battery-bus.cir
  rulecheck explain battery-bus-faulty.cir Q1
"""
_COMPILED = "__pycache__"


def run(request: Request) -> int:
    """Write each file of the demo; existing files are left alone and make it fail."""
    folder = Path(request.names[0])
    demo = _demo_files()
    present = tuple(_already_there(folder / name) for name in demo if (folder / name).exists())
    problems = present or _write(folder, demo)
    if problems:
        return complain(problems)
    if not request.quiet:
        sys.stdout.write(_NEXT.format(count=len(demo), folder=folder))
    return 0


def _demo_files() -> dict[str, Path]:
    """By the path below the demo's folder, those in dot folders too."""
    folder = Path(str(files("rulecheck") / "demo_data"))
    found = sorted(path for path in folder.rglob("*") if path.is_file())
    return {str(p.relative_to(folder)): p for p in found if _COMPILED not in p.parts}


def _already_there(path: Path) -> Problem:
    return error(Span(str(path), 1), "the file is there already", "name an empty or new folder")


def _write(folder: Path, demo: dict[str, Path]) -> tuple[Problem, ...]:
    try:
        for name, source in demo.items():
            target = folder / name
            target.parent.mkdir(parents=True, exist_ok=True)
            write_whole(target, source.read_text(encoding="utf-8"))
            if name.startswith(".ci"):
                os.chmod(target, 0o755)
    except OSError as failure:
        what = f"cannot be written: {failure.strerror or type(failure).__name__}"
        return (error(Span(str(folder), 1), what, "choose a folder you may write to"),)
    return ()
