"""How much a run takes in before it says that this is more than can be analysed.

Every limit has a name, so that `--limit NAME=N` raises it, and a message that says so.
"""

from collections.abc import Mapping
from types import MappingProxyType

from rulecheck.values.record import Record


class Bound(Record):
    """A limit as it is without an option, the most that it may be raised to, and what it counts."""

    usual: int
    most: int
    counts: str


_ANY = 10**12

BOUNDS: Mapping[str, Bound] = MappingProxyType(
    {
        "file-bytes": Bound(64_000_000, _ANY, "bytes of one file, or of a netlist with its files"),
        "include-depth": Bound(20, 100, "files that include each other"),
        "includes": Bound(1_000, _ANY, "files that a netlist includes"),
        "card-characters": Bound(250_000, _ANY, "characters of one card with its continuations"),
        "subcircuit-depth": Bound(50, 200, "subcircuits within each other"),
        "elements": Bound(250_000, _ANY, "elements, those of expanded subcircuits included"),
        "condition-steps": Bound(5_000_000, _ANY, "steps of one rule on one netlist"),
        "netlists": Bound(10_000, _ANY, "netlists that a project's patterns match"),
        "errors": Bound(50, _ANY, "errors that are printed; the others are counted"),
    }
)


class Limits(Record):
    """The limits in force: the usual ones but for those named in `changed`."""

    changed: tuple[tuple[str, int], ...] = ()

    def __getitem__(self, name: str) -> int:
        return dict(self.changed).get(name, BOUNDS[name].usual)


USUAL = Limits()


def raise_limit(name: str) -> str:
    """What to do about a file that goes beyond a limit on purpose."""
    return f"if it is meant to be so large, raise the limit with --limit {name}=N"
