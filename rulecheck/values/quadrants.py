"""The four quadrants of the V-I plane: off-state voltage across, on-state current up."""

from collections.abc import Iterable
from enum import IntEnum

from rulecheck.values.record import Record


class Quadrant(IntEnum):
    I = 1  # noqa: E741 - the trade's name
    II = 2
    III = 3
    IV = 4


# (voltage positive, current positive) -> quadrant
_BY_SIGN = {
    (True, True): Quadrant.I,
    (False, True): Quadrant.II,
    (False, False): Quadrant.III,
    (True, False): Quadrant.IV,
}

_BLOCKS = {
    (1,): "▝", (2,): "▘", (3,): "▖", (4,): "▗",
    (1, 4): "▐", (2, 3): "▌", (1, 2): "▀", (3, 4): "▄",
    (1, 3): "▞", (2, 4): "▚",
    (1, 2, 3): "▛", (1, 2, 4): "▜", (1, 3, 4): "▟", (2, 3, 4): "▙",
    (1, 2, 3, 4): "█", (): "·",
}  # fmt: skip

_CLASSES = {
    (1, 4): "current-bidirectional",
    (2, 3): "current-bidirectional",
    (1, 2): "voltage-bidirectional",
    (3, 4): "voltage-bidirectional",
    (1, 2, 3, 4): "four-quadrant",
    (): "none",
}


class QuadrantSet(Record):
    """A set of quadrants, kept sorted."""

    members: tuple[Quadrant, ...] = ()

    @staticmethod
    def of(quadrants: Iterable[Quadrant]) -> "QuadrantSet":
        return QuadrantSet(tuple(sorted(set(quadrants))))

    @staticmethod
    def product(voltage_signs: Iterable[bool], current_signs: Iterable[bool]) -> "QuadrantSet":
        """All quadrants of the given signs; True is positive."""
        currents = tuple(current_signs)
        return QuadrantSet.of(_BY_SIGN[v, i] for v in voltage_signs for i in currents)

    def __contains__(self, quadrant: Quadrant) -> bool:
        return quadrant in self.members

    def __or__(self, other: "QuadrantSet") -> "QuadrantSet":
        return QuadrantSet.of(self.members + other.members)

    def without(self, other: "QuadrantSet") -> "QuadrantSet":
        return QuadrantSet.of(q for q in self.members if q not in other.members)

    def within(self, other: "QuadrantSet") -> bool:
        return not self.without(other).members

    @property
    def numerals(self) -> tuple[str, ...]:
        return tuple(q.name for q in self.members)

    @property
    def label(self) -> str:
        return "+".join(self.numerals) or "-"

    @property
    def block(self) -> str:
        """The set as one Unicode quadrant block, itself a small V-I plane."""
        return _BLOCKS[tuple(int(q) for q in self.members)]

    @property
    def class_name(self) -> str:
        """The trade's word for the set; a lone quadrant is single-quadrant."""
        key = tuple(int(q) for q in self.members)
        return _CLASSES.get(key, "single-quadrant" if len(key) == 1 else "three-quadrant")
