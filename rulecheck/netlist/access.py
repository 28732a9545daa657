"""What a netlist may take in: how much of it, and included files from where."""

from pathlib import Path

from rulecheck.values import USUAL, Limits
from rulecheck.values.record import Record


class Access(Record):
    """The limits, and the folders whose files may be included besides the netlist's own."""

    limits: Limits = USUAL
    folders: tuple[Path, ...] = ()
    beside: bool = True
    """Whether the netlist's own folder counts; a text that is no file has none."""

    def folders_for(self, netlist: Path) -> tuple[Path, ...]:
        return (netlist.parent, *self.folders) if self.beside else self.folders


ORDINARY = Access()
