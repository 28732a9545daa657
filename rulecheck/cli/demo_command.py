"""`rulecheck demo DIR`: write the demo stage there, ready to be checked and changed."""

import sys
from importlib.resources import files
from pathlib import Path

from rulecheck.cli.complaints import complain
from rulecheck.cli.output import write_whole
from rulecheck.cli.request import Request
from rulecheck.values import Problem, Span, error

_NEXT = """\
Wrote {count} files to {folder}: a battery leg, a pump inverter and a faulty twin of the leg.
Next:
  cd {folder}
  rulecheck lint
  rulecheck quadrants battery-bus.cir
  rulecheck explain battery-bus-faulty.cir Q1
"""


def run(request: Request) -> int:
    """Write each file of the demo; existing files are left alone and make it fail."""
    folder = Path(request.names[0])
    demo = {item.name: item.read_text(encoding="utf-8") for item in _demo_files()}
    present = tuple(_already_there(folder / name) for name in demo if (folder / name).exists())
    problems = present or _write(folder, demo)
    if problems:
        return complain(problems)
    if not request.quiet:
        sys.stdout.write(_NEXT.format(count=len(demo), folder=folder))
    return 0


def _demo_files() -> list[Path]:
    folder = Path(str(files("rulecheck") / "demo_data"))
    return sorted(path for path in folder.iterdir() if path.suffix in (".cir", ".yaml"))


def _already_there(path: Path) -> Problem:
    return error(Span(str(path), 1), "the file is there already", "name an empty or new folder")


def _write(folder: Path, demo: dict[str, str]) -> tuple[Problem, ...]:
    try:
        folder.mkdir(parents=True, exist_ok=True)
        for name, text in demo.items():
            write_whole(folder / name, text)
    except OSError as failure:
        what = f"cannot be written: {failure.strerror or type(failure).__name__}"
        return (error(Span(str(folder), 1), what, "choose a folder you may write to"),)
    return ()
