"""The quadrant table on a terminal: needed and available side by side, one row a position."""

from collections.abc import Sequence
from typing import TextIO

from rich import box
from rich.cells import cell_len
from rich.console import Console
from rich.table import Table
from rich.text import Text

from rulecheck.report.figures import range_figure
from rulecheck.report.look import PLAIN, Look
from rulecheck.report.one_line import visible
from rulecheck.report.open_points import open_sections
from rulecheck.report.quadrant_markdown import bridge_line, leg_line
from rulecheck.report.quadrant_result import PositionResult, QuadrantResult
from rulecheck.report.standing import rated_current, rated_voltage, standing
from rulecheck.report.styles import console_for, hanging
from rulecheck.report.terminal_sections import print_cautions, print_sections
from rulecheck.values import QuadrantSet, Unknown

_WIDE = 110
_ALL = 4
_BETWEEN = 2
"""Columns that a border and its blank take."""
_FIGURES = ("must block", "must carry")
_UNBROKEN = (*_FIGURES, "result")
_WIDE_HEADER = ("position", "from", "to", "needs", "has", *_FIGURES, "result")
_HEADER = ("position", "from, to", "needs", "has", *_FIGURES, "result")


def render(result: QuadrantResult, stream: TextIO, look: Look = PLAIN) -> None:
    """Draw the table at `look.width`; a missing quadrant is the only thing in colour."""
    console = console_for(stream, look)
    hanging(console, "", f"{result.netlist}: what each switch position must do and can do", look)
    if result.positions:
        _print_table(console, _table(result, look))
    else:
        console.print("no switch position was found in this netlist")
    assumed = () if look.quiet else result.assumed
    legs = tuple(leg_line(leg) for leg in result.legs)
    print_sections(console, (("Legs", legs), ("Bridges", _bridges(result))), look)
    print_sections(console, open_sections(result.undetermined, assumed, result.not_covered), look)
    if not look.quiet:
        print_cautions(console, look)


def _print_table(console: Console, table: Table) -> None:
    """Print the table without the blanks that would pad its lines."""
    with console.capture() as captured:
        console.print(table)
    lines = [line.rstrip() for line in captured.get().splitlines()]
    console.file.write("\n".join(lines).strip("\n") + "\n")


def _bridges(result: QuadrantResult) -> tuple[str, ...]:
    return tuple(bridge_line(bridge) for bridge in result.bridges)


def _table(result: QuadrantResult, look: Look) -> Table:
    """On a wide terminal one line a position; on a narrow one two, so that no figure is broken."""
    wide = look.width >= _WIDE
    header = _WIDE_HEADER if wide else _HEADER
    rows = [_cells(row, look, wide) for row in result.positions]
    least = _least_widths(header, rows)
    # where even whole figures do not fit, a broken figure is better than a cut one
    fits = sum(least.values()) + _BETWEEN * len(header) <= look.width
    table = Table(
        box=box.ASCII2 if look.ascii else box.SIMPLE_HEAD,
        show_edge=not look.ascii,
        padding=(0, 1, 0, 0),
    )
    for name in header:
        kept = fits and name in _UNBROKEN
        table.add_column(name, overflow="fold", min_width=least[name] if kept else None)
    for cells in rows:
        table.add_row(*cells)
    return table


def _least_widths(header: Sequence[str], rows: list[list[Text]]) -> dict[str, int]:
    """By column: what its figures or its longest words take."""
    return {
        name: max(len(name.split()[0]), *(_least_width(c[n], name in _FIGURES) for c in rows))
        for n, name in enumerate(header)
    }


def _cells(row: PositionResult, look: Look, wide: bool) -> list[Text]:
    between = " " if wide else "\n"
    ends = [Text(visible(net, look)) for net in (row.position.start, row.position.end)]
    blocks = f"of {rated_voltage(row, look)}"
    carries = f"of {rated_current(row, look)}"
    return [
        Text(visible(row.position.name, look)),
        *(ends if wide else [Text("\n").join(ends)]),
        _needed(row, look),
        Text(_drawn(row.capability.quadrants, look)),
        Text(f"{range_figure(row.demand.off_voltage, 'V', look)}{between}{blocks}"),
        Text(f"{range_figure(row.demand.on_current, 'A', look)}{between}{carries}"),
        Text("\n".join(standing(row))),
    ]


def _least_width(cell: Text, whole_lines: bool) -> int:
    """The widest line of a figure, or the widest word of a text."""
    pieces = cell.plain.splitlines() if whole_lines else cell.plain.split()
    return max(map(cell_len, pieces), default=0)


def _needed(row: PositionResult, look: Look) -> Text:
    """The needed quadrants, those that the devices lack in colour; the result column says which."""
    if isinstance(row.needs, Unknown):
        return Text("unknown")
    if not row.missing.members:
        return Text(_drawn(row.needs, look))
    text = Text("" if look.ascii else f"{row.needs.block} ")
    for number, quadrant in enumerate(row.needs.members):
        style = "quadrant.missing" if quadrant in row.missing else ""
        text.append("+" if number else "")
        text.append(quadrant.name, style=style)
    return text


def _drawn(quadrants: QuadrantSet, look: Look) -> str:
    names = quadrants.numerals
    label = {0: "none", _ALL: "I-IV"}.get(len(names), quadrants.label)
    return label if look.ascii else f"{quadrants.block} {label}"
