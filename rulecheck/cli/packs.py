"""Which packs are in force: those that travel along, then the project's, then the arguments'.

A shipped rule leaves force only where a later pack switches it off with a reason.
"""

import difflib
import os
from collections.abc import Iterable
from pathlib import Path

from rulecheck.reading import SourceText, read_text
from rulecheck.rulebook import (
    BY_NAME,
    DISCHARGE_LIMITS,
    IN_FORCE,
    PROFILES,
    SUFFIX,
    Rulebook,
    load_packs,
    packs_in_force,
    shipped_pack,
)
from rulecheck.values import USUAL, Limits, Problem, Span, error, errors_of


def load_rulebook(
    names: Iterable[str], instead_of: Iterable[str] = (), limits: Limits = USUAL
) -> Rulebook | tuple[Problem, ...]:
    """The rules in force, or every mistake in the packs.

    `instead_of` names shipped packs that are left out, because a file at hand is to be tried in
    their place.
    """
    added = [find_pack(name, limits) for name in dict.fromkeys(names) if name not in IN_FORCE]
    failed = tuple(pack for pack in added if isinstance(pack, Problem))
    left_out = {name + SUFFIX for name in instead_of}
    shipped = [pack for pack in packs_in_force() if pack.file not in left_out]
    packs = [*shipped, *(pack for pack in added if isinstance(pack, SourceText))]
    rulebook = load_packs(packs)
    errors = (*failed, *errors_of(rulebook.problems))
    return errors or rulebook


def find_pack(name: str, limits: Limits = USUAL) -> SourceText | Problem:
    """A pack that travels with the program, by its name, or a file."""
    shipped = shipped_pack(name)
    if shipped is not None:
        return shipped
    if Path(name).suffix or os.path.lexists(name):
        return read_text(Path(name), limits)
    close = difflib.get_close_matches(name, [*IN_FORCE, *BY_NAME, *PROFILES, *DISCHARGE_LIMITS], 1)
    remedy = f"did you mean '{close[0]}'?" if close else "name a file, or one of the shipped packs"
    return error(Span(name, 1), f"no pack is called '{name}'", remedy)
