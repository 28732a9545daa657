"""Natural order of names: Q2 before Q10, letters without regard to case."""

import re

_RUN = re.compile(r"\d+|\D+")


def natural_key(name: str) -> tuple[tuple[int, int, str], ...]:
    """A sort key under which digits compare as numbers."""
    return tuple(
        (0, int(run), run) if run.isdigit() and run.isascii() else (1, 0, run.lower())
        for run in _RUN.findall(name)
    )
