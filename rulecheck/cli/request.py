"""What the user asked for, read from the arguments; light, so that `--version` costs nothing."""

from rulecheck.values import Limits
from rulecheck.values.record import Record


class Output(Record):
    """One report: its format (None: the default) and its file (None: standard output)."""

    format: str | None
    file: str | None


class Request(Record):
    command: str
    names: tuple[str, ...] = ()
    """The positional arguments of the command."""
    outputs: tuple[Output, ...] = (Output(None, None),)
    stage: str | None = None
    parts: tuple[str, ...] = ()
    rules: tuple[str, ...] = ()
    include_dirs: tuple[str, ...] = ()
    changed_limits: tuple[tuple[str, int], ...] = ()
    project: str | None = None
    fail_at: str | None = None
    undecided: str | None = None
    jobs: int = 1
    color: str = "auto"
    ascii: bool = False
    quiet: bool = False
    step: str | None = None
    record: str | None = None
    since: str | None = None
    against: str | None = None
    try_packs: bool = False
    facts: bool = False
    watch: bool = False
    install: bool = False

    @property
    def limits(self) -> Limits:
        return Limits(self.changed_limits)
