"""The quadrant table for a document or a merge request."""

from typing import TextIO

from rulecheck.demand import Bridge, Leg
from rulecheck.report.cautions import CAUTIONS
from rulecheck.report.figures import range_figure
from rulecheck.report.look import PLAIN, Look
from rulecheck.report.markdown_text import bullets, escaped, heading_rule, row
from rulecheck.report.open_points import open_sections
from rulecheck.report.quadrant_result import PositionResult, QuadrantResult
from rulecheck.report.standing import rated_current, rated_voltage, standing
from rulecheck.values import QuadrantSet, Unknown

_HEADER = (
    "position",
    "from, to",
    "needs",
    "has",
    "must block",
    "rated",
    "must carry",
    "rated",
    "result",
)


def render(result: QuadrantResult, stream: TextIO, look: Look = PLAIN) -> None:
    """Write a heading, the table, the legs and the open points."""
    stream.write(f"## Quadrants of {escaped(result.netlist)}\n\n")
    stream.write(row(*_HEADER) + heading_rule(len(_HEADER)))
    for position in result.positions:
        stream.write(row(*(escaped(cell) for cell in _cells(position, look))))
    stream.write("\n")
    stream.write(bullets(tuple(leg_line(leg) for leg in result.legs)))
    stream.write(bullets(tuple(bridge_line(bridge) for bridge in result.bridges)))
    for heading, lines in open_sections(result.undetermined, result.assumed, result.not_covered):
        stream.write(f"\n### {heading}\n\n{bullets(lines)}")
    stream.write(f"\n{' '.join(CAUTIONS)}\n")


def leg_line(leg: Leg) -> str:
    """One sentence on a leg: its rails, its positions by place, its levels."""
    groups = (("high", leg.high), ("low", leg.low), ("also", leg.others))
    places = "; ".join(f"{place} {', '.join(names)}" for place, names in groups if names)
    return f"{leg.name}: {leg.kind} on {', '.join(leg.rails)}; {places}; {leg.levels} levels"


def bridge_line(bridge: Bridge) -> str:
    return f"{bridge.name}: {bridge.kind} of legs {', '.join(bridge.legs)}"


def _cells(item: PositionResult, look: Look) -> tuple[str, ...]:
    return (
        item.position.name,
        f"{item.position.start}, {item.position.end}",
        _label(item.needs),
        item.capability.quadrants.label,
        range_figure(item.demand.off_voltage, "V", look),
        rated_voltage(item, look),
        range_figure(item.demand.on_current, "A", look),
        rated_current(item, look),
        ", ".join(standing(item)),
    )


def _label(quadrants: QuadrantSet | Unknown) -> str:
    return "unknown" if isinstance(quadrants, Unknown) else quadrants.label
