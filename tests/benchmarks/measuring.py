"""What a whole process costs, by the operating system's own account of the finished child."""

import os
import subprocess
import sys
from dataclasses import dataclass
from pathlib import Path
from statistics import median

BARE_LOOP = "import sys\nfor line in open(sys.argv[1]):\n    line.split()"
LIBRARIES = "import lark, networkx, yaml, rich, numpy"
RULECHECK = ("-m", "rulecheck", "lint")


@dataclass(frozen=True)
class Cost:
    """Processor seconds, which other work on the machine hardly changes, and peak megabytes."""

    seconds: float
    megabytes: float


def cost_of(*arguments: str, folder: Path) -> Cost:
    """One run of this interpreter with these arguments."""
    child = subprocess.Popen(
        [sys.executable, *arguments],
        cwd=folder,
        stdout=subprocess.DEVNULL,
        stderr=subprocess.DEVNULL,
    )
    _, status, usage = os.wait4(child.pid, 0)
    child.returncode = os.waitstatus_to_exitcode(status)
    if child.returncode not in (0, 1):
        raise RuntimeError(f"{' '.join(arguments)} ended with {child.returncode}")
    return Cost(usage.ru_utime + usage.ru_stime, usage.ru_maxrss / 1024)


def cost_of_lint(netlist: Path) -> Cost:
    return cost_of(*RULECHECK, netlist.name, folder=netlist.parent)


def ratio_in_turn(times: int, first: tuple[str, ...], second: tuple[str, ...], at: Path) -> float:
    """The median of the ratios of pairs, each pair run one after the other."""
    ratios = []
    for _ in range(times):
        one, two = cost_of(*first, folder=at), cost_of(*second, folder=at)
        ratios.append(one.seconds / two.seconds)
    return median(ratios)
