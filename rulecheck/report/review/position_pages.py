"""The page of each position: its plane, what is asked and what is rated, and the derivation."""

from collections.abc import Mapping

from rulecheck.demand import Demands, Witness
from rulecheck.report.explain_position import explain_row
from rulecheck.report.figures import figure, range_figure
from rulecheck.report.quadrant_result import PositionResult, QuadrantResult
from rulecheck.report.review.derating import limits_of
from rulecheck.report.review.drawing import Mark
from rulecheck.report.review.plane import draw_plane
from rulecheck.report.review.review import Extreme, PositionPage
from rulecheck.report.standing import rated_current, rated_voltage, standing
from rulecheck.rulebook import Rulebook
from rulecheck.stage import Stage
from rulecheck.values import QuadrantSet, Unknown

_STANDINGS = {
    "rating short": "short",
    "rating unknown": "unknown",
    "demand unknown": "unknown",
}


def position_anchors(result: QuadrantResult) -> dict[str, str]:
    """By position: where its page starts; numbered, since a name may hold any sign."""
    return {row.position.name: f"position-{k}" for k, row in enumerate(result.positions, 1)}


def position_pages(
    result: QuadrantResult,
    stage: Stage,
    demands: Demands,
    rulebook: Rulebook,
    marks: Mapping[str, tuple[Mark, ...]],
) -> tuple[PositionPage, ...]:
    """One page a position, in the order of the result."""
    anchors = position_anchors(result)
    units = {variable.name: variable.unit for variable in demands.variables}
    return tuple(
        PositionPage(
            anchors[row.position.name],
            row.position.name,
            f"{row.position.start} to {row.position.end}",
            _drawn_as(row, stage),
            _quadrants(row.needs),
            _quadrants(row.capability.quadrants),
            range_figure(row.demand.off_voltage, "V"),
            rated_voltage(row),
            range_figure(row.demand.on_current, "A"),
            rated_current(row),
            ", ".join(standing(row)),
            standing_of(row),
            draw_plane(row, limits_of(row.capability, stage, rulebook)),
            _extremes(row, units),
            explain_row(row, stage, demands).entries,
            marks.get(row.position.name, ()),
        )
        for row in result.positions
    )


def standing_of(row: PositionResult) -> str:
    """The gravest word that the position's standing has."""
    words = standing(row)
    if words[0].startswith("lacks"):
        return "lacking"
    return next((_STANDINGS[word] for word in reversed(words) if word in _STANDINGS), "covered")


def _drawn_as(row: PositionResult, stage: Stage) -> str:
    parts = (stage.parts.by_name.get(name) for name in row.position.parts)
    return ", ".join(f"{part.name} {part.text}".rstrip() for part in parts if part)


def _quadrants(quadrants: QuadrantSet | Unknown) -> str:
    return "unknown" if isinstance(quadrants, Unknown) else quadrants.label


def _extremes(row: PositionResult, units: Mapping[str, str]) -> tuple[Extreme, ...]:
    demand = row.demand
    ends = (
        ("least voltage while off", "V", demand.off_low),
        ("largest voltage while off", "V", demand.off_high),
        ("least current while on", "A", demand.on_low),
        ("largest current while on", "A", demand.on_high),
    )
    return tuple(
        _extreme(what, unit, witness, units) for what, unit, witness in ends if witness is not None
    )


def _extreme(what: str, unit: str, witness: Witness, units: Mapping[str, str]) -> Extreme:
    return Extreme(
        what,
        figure(witness.value, unit),
        f"{', '.join(witness.on)} on" if witness.on else "none on",
        witness.form.text(),
        ", ".join(
            f"{name} = {figure(value, units.get(name, ''))}" for name, value in witness.corner
        ),
    )
