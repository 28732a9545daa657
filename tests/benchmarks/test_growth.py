"""Time against size: twice the cells may take little more than twice the time.

Not part of the default run, because a shared machine makes it waver:
`python -m pytest tests/benchmarks -s`.
"""

import subprocess
import sys
import time

from rulecheck.pipeline import analyse_text
from rulecheck.reading import SourceText

MOST_GROWTH = 3.0
CELLS = 1000


def chain_of_cells(count: int) -> tuple[SourceText, SourceText]:
    """Half-bridge cells in series, each with its own capacitor, and one arm inductor."""
    cards = ["* chain", "L1 IN n0 1m"]
    lines = ["ports:", "  arm: {between: [IN, '0'], supplies: [-100 A, 100 A]}", "set:"]
    for cell in range(count):
        top, bottom = f"n{cell}", f"n{cell + 1}" if cell + 1 < count else "0"
        cards += [
            f"Q{cell}a p{cell} ga{cell} {top} SW",
            f"Q{cell}b {top} gb{cell} {bottom} SW",
            f"C{cell} p{cell} {bottom} 4m",
        ]
        lines.append(f"  C{cell}: {{voltage: [900 V, 1100 V]}}")
    return SourceText("chain.cir", "\n".join(cards)), SourceText(
        "chain.stage.yaml", "\n".join(lines)
    )


PARTS = SourceText(
    "chain.parts.yaml",
    "parts:\n  SW: {kind: igbt-with-diode, pins: [collector, gate, emitter],"
    " ratings: {blocking: 1700 V, current: 200 A}}\n",
)


def seconds_for(count: int) -> float:
    netlist, sheet = chain_of_cells(count)
    start = time.perf_counter()
    analysis = analyse_text(netlist, sheet, [PARTS])
    spent = time.perf_counter() - start
    assert len(analysis.demands.positions) == 2 * count
    assert len(analysis.demands.groups) == count
    assert all(len(d.quadrants.members) == 2 for d in analysis.demands.positions.values())
    return spent


def test_time_grows_linearly_with_the_cells():
    seconds_for(10)
    one, two = seconds_for(CELLS), seconds_for(2 * CELLS)
    print(f"\n{CELLS} cells {one:.2f} s, {2 * CELLS} cells {two:.2f} s")
    assert two < MOST_GROWTH * one


def test_cold_start_of_the_version_is_a_small_multiple_of_an_empty_interpreter():
    empty = best_of(5, "-c", "pass")
    version = best_of(5, "-m", "rulecheck", "--version")
    print(f"\nempty {1000 * empty:.0f} ms, --version {1000 * version:.0f} ms")
    assert version < 4 * empty


def best_of(times: int, *arguments: str) -> float:
    spent = []
    for _ in range(times):
        start = time.perf_counter()
        subprocess.run([sys.executable, *arguments], check=True, capture_output=True)
        spent.append(time.perf_counter() - start)
    return min(spent)
