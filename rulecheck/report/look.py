"""How a human report may look: how wide, in which characters, with or without colour."""

from rulecheck.values.record import Record


class Look(Record):
    """`width` in columns; `ascii` keeps to seven-bit signs; `color` allows colour codes;
    `quiet` leaves out assumptions, remarks and cautions, never what is broken or open.
    """

    width: int = 100
    ascii: bool = False
    color: bool = False
    quiet: bool = False

    @property
    def dots(self) -> str:
        return " .. " if self.ascii else " … "

    @property
    def plus_minus(self) -> str:
        return "+-" if self.ascii else "±"

    @property
    def arrow(self) -> str:
        return "->" if self.ascii else "→"


PLAIN = Look()
