"""What the undecided verdicts wait for, merged into one list, the most valuable datum first."""

from collections.abc import Iterable

from rulecheck.rulebook.verdicts import BROKEN, HOLDS, UNDECIDED, Tally, Verdict, Waiting
from rulecheck.values import Unknown, natural_key


def waiting_for(verdicts: Iterable[Verdict]) -> tuple[Waiting, ...]:
    """One entry for each thing to write, whatever it settles; by how many verdicts wait for it.

    A datum that alone decides a verdict is worth more than one of several.
    """
    checks: dict[str, int] = {}
    alone: dict[str, int] = {}
    first: dict[str, Unknown] = {}
    for verdict in verdicts:
        if verdict.verdict != UNDECIDED:
            continue
        settles = {item.settle: item for item in reversed(verdict.missing)}
        for settle, item in settles.items():
            first.setdefault(settle, item)
            checks[settle] = checks.get(settle, 0) + 1
            alone[settle] = alone.get(settle, 0) + (len(settles) == 1)
    entries = [Waiting(first[s], checks[s], alone[s]) for s in checks]
    return tuple(sorted(entries, key=_rank))


def _rank(entry: Waiting) -> tuple[object, ...]:
    return (-entry.checks, -entry.alone, natural_key(entry.datum.settle))


def tally_of(verdicts: Iterable[Verdict]) -> Tally:
    """How many hold, are broken and not excused, are undecided, are excused."""
    counts = {HOLDS: 0, BROKEN: 0, UNDECIDED: 0}
    excused = 0
    for verdict in verdicts:
        if verdict.excuse is not None:
            excused += 1
        else:
            counts[verdict.verdict] += 1
    return Tally(counts[HOLDS], counts[BROKEN], counts[UNDECIDED], excused)
