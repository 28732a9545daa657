"""The review document as data: what a template shows, already in words and figures."""

from rulecheck.report.changes import Changes
from rulecheck.report.explanation import Entry
from rulecheck.report.review.derating import Factor
from rulecheck.report.review.drawing import BlockView, Mark, Schematics
from rulecheck.report.review.plane import Plane
from rulecheck.rulebook import PackInForce, Tally
from rulecheck.values.record import Record


class InputFile(Record):
    """A file that was read, as it was then."""

    file: str
    role: str
    """`netlist`, `stage sheet`, `part data`, `include`, `project file`."""
    digest: str
    """SHA-256 of its bytes, hexadecimal."""
    lines: tuple[str, ...]


class Occasion(Record):
    """When and with what the review was made."""

    date: str
    date_from: str
    """Whose date it is: the netlist file's, or the one that was asked for."""
    version: str


class Card(Record):
    """A place in an input file and the line that stands there."""

    file: str
    line: int
    text: str


class FindingCard(Record):
    number: int
    anchor: str
    level: str
    """`error`, `warning`, `note`."""
    rule: str
    kind: str
    """The subject's kind."""
    subject: str
    parts: tuple[str, ...]
    message: str
    why: str
    remedy: str
    source: str
    pack: str
    cards: tuple[Card, ...]
    derivation: tuple[Entry, ...]
    position: str
    """The anchor of the position that it is about; empty for any other subject."""
    deviation: str
    """Who accepted it, why and until when; empty where nobody did."""


class UndecidedCheck(Record):
    rule: str
    subjects: tuple[str, ...]
    settle: tuple[str, ...]
    """What would decide it, or why it cannot be said."""


class Extreme(Record):
    """One end of a demand, the state that leads to it and what it is made of."""

    what: str
    value: str
    state: str
    form: str
    corner: str


class PositionPage(Record):
    anchor: str
    name: str
    ends: str
    drawn_as: str
    needs: str
    has: str
    blocks: str
    blocks_of: str
    carries: str
    carries_of: str
    result: str
    standing: str
    """`covered`, `short`, `lacking` or `unknown`: how it is marked."""
    plane: Plane
    extremes: tuple[Extreme, ...]
    derivation: tuple[Entry, ...]
    marks: tuple[Mark, ...]


class OpenList(Record):
    """One sort of what was not checked or taken on trust."""

    heading: str
    meaning: str
    lines: tuple[str, ...]


class Row(Record):
    """A line of a plain table."""

    cells: tuple[str, ...]


class Table(Record):
    caption: str
    heads: tuple[str, ...]
    rows: tuple[Row, ...]


class Trace(Record):
    """A gate's command over the window, as an SVG path of height 18, and in words."""

    name: str
    path: str
    told: str


class Timing(Record):
    leg: str
    window: str
    traces: tuple[Trace, ...]
    width: float


class Review(Record):
    netlist: str
    sheet: str
    occasion: Occasion
    inputs: tuple[InputFile, ...]
    packs: tuple[PackInForce, ...]
    profile: str
    factors: tuple[Factor, ...]
    pack_changes: tuple[str, ...]
    tally: Tally
    rules_in_force: int
    blocks: BlockView | None
    schematics: Schematics
    positions: tuple[PositionPage, ...]
    findings: tuple[FindingCard, ...]
    accepted: tuple[FindingCard, ...]
    undecided: tuple[UndecidedCheck, ...]
    open_lists: tuple[OpenList, ...]
    taken_on_trust: tuple[OpenList, ...]
    stress: tuple[Table, ...]
    timing: tuple[Timing, ...]
    stated_timing: Table
    legs: tuple[Row, ...]
    ports: tuple[Row, ...]
    quantities: tuple[Row, ...]
    cautions: tuple[str, ...]
    deviations: tuple[Row, ...] = ()
    changes: Changes | None = None
    """Since an earlier netlist, where one was named."""
