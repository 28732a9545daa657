"""Run the command as a user does, in a process of its own."""

import os
import subprocess
import sys
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]


def run(
    *arguments: object, folder: Path, environment: dict[str, str] | None = None
) -> subprocess.CompletedProcess[str]:
    """`rulecheck ARGUMENTS` in that folder, without colour and at 100 columns."""
    return subprocess.run(
        [sys.executable, "-m", "rulecheck", *map(str, arguments)],
        cwd=folder,
        env=clean_environment() | (environment or {}),
        capture_output=True,
        encoding="utf-8",
        check=False,
    )


def clean_environment() -> dict[str, str]:
    kept = {k: v for k, v in os.environ.items() if k not in ("NO_COLOR", "RULECHECK_TRACEBACK")}
    return kept | {"PYTHONPATH": str(ROOT), "COLUMNS": "100", "PYTHONUTF8": "1"}
