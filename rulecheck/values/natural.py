"""Natural order of names: Q2 before Q10, letters without regard to case."""

import re
from functools import lru_cache

_MOST_NAMES = 1 << 16
"""Each step sorts the same names again; beyond so many, memory counts for more."""
_RUN = re.compile(r"\d+|\D+")


@lru_cache(_MOST_NAMES)
def natural_key(name: str) -> tuple[tuple[int, int, str, str], ...]:
    """A sort key under which digits compare as numbers, by their count and then one by one."""
    return tuple(
        _number_key(run) if run.isdigit() and run.isascii() else (1, 0, run.lower(), "")
        for run in _RUN.findall(name)
    )


def _number_key(run: str) -> tuple[int, int, str, str]:
    """Without a conversion to int, which refuses thousands of digits."""
    digits = run.lstrip("0")
    return 0, len(digits), digits, run
