"""The bar that a long run shows on standard error, and wipes when it is done."""

import sys

from rich.console import Console
from rich.progress import BarColumn, Progress, TextColumn, TimeElapsedColumn

from rulecheck.cli.terminal import can_draw
from rulecheck.pipeline import STEPS

_STEPS = (*STEPS, "rules")


class ProgressBar:
    """Counts netlists, or the steps of the only one."""

    def __init__(self, netlists: int) -> None:
        plain = not can_draw(sys.stderr)
        console = Console(file=sys.stderr, no_color=True, legacy_windows=False)
        self._several = netlists > 1
        self._bar = Progress(
            TextColumn("{task.description}"),
            TextColumn("") if plain else BarColumn(24),
            TextColumn("{task.completed:.0f} of {task.total:.0f}"),
            TimeElapsedColumn(),
            console=console,
            transient=True,
            refresh_per_second=4,
        )
        total = netlists if self._several else len(_STEPS)
        self._task = self._bar.add_task("netlists" if self._several else _STEPS[0], total=total)
        self._bar.start()

    def show(self, step: str, done: int) -> None:
        """Move on: to so many netlists, or to this step of the one."""
        if self._several:
            self._bar.update(self._task, completed=done)
        elif step in _STEPS:
            self._bar.update(self._task, completed=_STEPS.index(step), description=step)

    def stop(self) -> None:
        self._bar.stop()


def open_bar(netlists: int) -> ProgressBar:
    """Show a bar for so many netlists at once."""
    return ProgressBar(netlists)
