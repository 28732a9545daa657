"""Draw the README's pictures from the demo: `python tests/pictures/make.py`.

Needs a `chromium` on the path; the table goes through rich's HTML, the review is opened as it is.
"""

import os
import shutil
import subprocess
import sys
import tempfile
from pathlib import Path

from rich.console import Console
from rich.text import Text

HERE = Path(__file__).resolve().parent
PROGRAM = [sys.executable, "-m", "rulecheck"]
COLUMNS = 84
ENVIRONMENT = {
    **os.environ,
    "COLUMNS": str(COLUMNS),
    "PYTHONUTF8": "1",
    "PYTHONPATH": str(HERE.parents[1]),
}
PAGE = """<!DOCTYPE html><meta charset="utf-8"><style>{stylesheet}
body {{ background: #fff; color: #111; margin: 18px }}
pre {{ font: 15px/1.25 "DejaVu Sans Mono", monospace }}</style><pre>{code}</pre>"""


def main() -> None:
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        run("demo", "hut", "--quiet", folder=folder)
        hut = folder / "hut"
        table = run(
            "quadrants", "battery-bus-faulty.cir", "--quiet", "--color", "always", folder=hut
        )
        (hut / "table.html").write_text(as_page(table), encoding="utf-8")
        run("report", "battery-bus-faulty.cir", "-o", "review.html", folder=hut)
        shoot(hut / "table.html", HERE / "table.png", 740, 240)
        shoot(hut / "review.html", HERE / "review.png", 1000, 1000)


def run(*arguments: str, folder: Path) -> str:
    done = subprocess.run(
        [*PROGRAM, *arguments], cwd=folder, env=ENVIRONMENT,
        stdout=subprocess.PIPE, encoding="utf-8", check=True,
    )  # fmt: skip
    return done.stdout


def as_page(terminal: str) -> str:
    console = Console(record=True, width=COLUMNS, file=open("/dev/null", "w"))  # noqa: SIM115
    console.print(Text.from_ansi(terminal))
    return console.export_html(code_format=PAGE)


def shoot(page: Path, picture: Path, width: int, height: int) -> None:
    chromium = shutil.which("chromium")
    if chromium is None:
        sys.exit("no chromium on the path")
    subprocess.run(
        [
            chromium, "--headless=new", "--no-sandbox", "--disable-gpu", "--disable-quic",
            "--no-first-run", "--disable-background-networking", "--disable-component-update",
            "--disable-sync", "--hide-scrollbars", f"--user-data-dir={page.parent / 'browser'}",
            f"--window-size={width},{height}", f"--screenshot={picture}", page.as_uri(),
        ],
        check=True,
        stderr=subprocess.DEVNULL,
    )  # fmt: skip


if __name__ == "__main__":
    main()
