"""Every floor of speed and memory, measured in one run; `python -m tests.benchmarks [CELLS]`.

Exit status 1 where a floor is missed.
"""

import math
import sys
import tempfile
from collections.abc import Callable
from pathlib import Path

from rulecheck.cli import main as rulecheck
from tests.benchmarks.chains import (
    ELEMENTS_OF_A_CELL,
    write_flat_chain,
    write_hierarchical_chain,
    write_selector,
)
from tests.benchmarks.measuring import (
    BARE_LOOP,
    LIBRARIES,
    cost_of,
    cost_of_lint,
    ratio_in_turn,
)
from tests.benchmarks.steps import seconds_by_step

CELLS = 6000
MOST_MEGABYTES = 1500.0
MOST_EXPONENT = 1.1
MOST_OF_BARE_LOOP = 25.0
MOST_OF_LIBRARIES = 1.3
MOST_SECONDS_OF_A_GROUP = 2.0
TAPS = 16
LEAST_SECONDS = 0.01
"""Below this the clock of the process tells nothing: give more cells."""

Row = tuple[str, float, float]


def main() -> int:
    cells = int(sys.argv[1]) if len(sys.argv) > 1 else CELLS
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        rows = [_cold_start(folder), _group(folder)]
        flat = write_flat_chain(folder / "flat", cells)
        bare = cost_of("-c", BARE_LOOP, flat.name, folder=flat.parent).seconds
        rows += _chain("flat", folder, cells, write_flat_chain, bare)
        rows += _chain("hierarchical", folder, cells, write_hierarchical_chain, bare)
        print(f"{'measured':<44}{'found':>9}{'floor':>9}")
        for what, found, floor in rows:
            print(f"{what:<44}{found:>9.2f}{floor:>9.2f}{'' if found <= floor else '  missed'}")
        print(f"\n{'step, flat chain':<44}{'s':>9}")
        for step, seconds in seconds_by_step(flat).items():
            print(f"{step:<44}{seconds:>9.2f}")
    return int(any(found > floor for _, found, floor in rows))


def _cold_start(folder: Path) -> Row:
    rulecheck(["demo", str(folder / "hut"), "--quiet"])
    lint = ("-m", "rulecheck", "lint", "battery-bus.cir")
    ratio = ratio_in_turn(7, lint, ("-c", LIBRARIES), folder / "hut")
    return "lint of the demo over import of libraries", ratio, MOST_OF_LIBRARIES


def _group(folder: Path) -> Row:
    cost = cost_of_lint(write_selector(folder / "selector", TAPS))
    return f"seconds for a group of {TAPS} positions", cost.seconds, MOST_SECONDS_OF_A_GROUP


def _chain(
    what: str, folder: Path, cells: int, write: Callable[[Path, int], Path], bare: float
) -> list[Row]:
    """`bare` is the bare loop's time on the flat form: the same elements, written out."""
    small = cost_of_lint(write(folder / f"{what}-small", cells // 10))
    large = cost_of_lint(write(folder / f"{what}-large", cells))
    start = cost_of_lint(write(folder / f"{what}-start", 1)).seconds
    growth = (large.seconds - start) / max(small.seconds - start, LEAST_SECONDS)
    exponent = math.log10(max(growth, 1.0))
    name = f"{what}, {cells * ELEMENTS_OF_A_CELL} elements"
    return [
        (f"{name}: megabytes", large.megabytes, MOST_MEGABYTES),
        (f"{name}: exponent", exponent, MOST_EXPONENT),
        (f"{name}: over a bare loop", large.seconds / bare, MOST_OF_BARE_LOOP),
    ]


if __name__ == "__main__":
    sys.exit(main())
