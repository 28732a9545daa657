"""Put the review together from what the steps found; everything in it is words and figures."""

from collections.abc import Iterable

from rulecheck.capability import Capabilities
from rulecheck.demand import Demands
from rulecheck.report.cautions import CAUTIONS
from rulecheck.report.explain import explain
from rulecheck.report.explanation import Explanation
from rulecheck.report.figures import range_figure
from rulecheck.report.lint_result import LintReport, off_line, undecided_lines
from rulecheck.report.open_points import merged
from rulecheck.report.quadrant_result import QuadrantResult, quadrant_result
from rulecheck.report.review.derating import factors_in_force
from rulecheck.report.review.drawn_legs import Marks, draw_legs
from rulecheck.report.review.finding_cards import (
    WITH_PAGES,
    Derivations,
    finding_cards,
    legs_marked,
    marks_by,
    parts_marked,
    undecided_checks,
)
from rulecheck.report.review.position_pages import position_anchors, position_pages
from rulecheck.report.review.review import InputFile, Occasion, OpenList, Review, Row
from rulecheck.report.review.stage_blocks import block_view
from rulecheck.report.review.stress import stress_sheet
from rulecheck.report.review.timing import stated_timing, timing_diagrams
from rulecheck.rulebook import Deviation, Rulebook, Verdict
from rulecheck.stage import Port, Stage
from rulecheck.values import Gravity, Interval, Problem
from rulecheck.values.record import Record

_NO_PROFILE = "none; each pack's own factors hold"


class Studied(Record):
    """What the steps found of one netlist."""

    stage: Stage
    capabilities: Capabilities
    demands: Demands
    problems: tuple[Problem, ...]


class Findings(Record):
    """What the rules said of the stage, and by which rules and deviations."""

    report: LintReport
    rulebook: Rulebook
    deviations: tuple[Deviation, ...] = ()


def make_review(
    studied: Studied, found: Findings, inputs: tuple[InputFile, ...], occasion: Occasion
) -> Review:
    """The whole document on one netlist."""
    stage, demands = studied.stage, studied.demands
    result = quadrant_result(stage, studied.capabilities, demands)
    report, rulebook = found.report, found.rulebook
    subjects = (*report.broken, *report.excused)
    derivations = Derivations(_anchors(result), _told(subjects, studied))
    cards = finding_cards(subjects, rulebook.rules, inputs, derivations)
    marks = Marks(marks_by(cards, parts_marked), marks_by(cards, legs_marked))
    return Review(
        stage.netlist,
        stage.sheet,
        occasion,
        inputs,
        rulebook.packs,
        _profile(rulebook),
        factors_in_force(rulebook),
        rulebook.changes,
        report.tally,
        len(rulebook.rules),
        block_view(stage, demands, result, marks),
        draw_legs(stage, demands, result, marks),
        position_pages(result, stage, demands, rulebook, marks.parts),
        tuple(card for card in cards if not card.deviation),
        tuple(card for card in cards if card.deviation),
        undecided_checks(report),
        _not_checked(report, rulebook, studied.problems),
        _on_trust(report),
        stress_sheet(stage, demands, result),
        timing_diagrams(stage, demands),
        stated_timing(stage, demands),
        _legs(demands),
        tuple(_port(port) for port in stage.ports),
        _quantities(demands),
        CAUTIONS,
        _deviations(found),
    )


def _anchors(result: QuadrantResult) -> dict[str, str]:
    """By position and by each part of one: the anchor of the page that derives its numbers."""
    pages = position_anchors(result)
    parts = {
        part: pages[row.position.name] for row in result.positions for part in row.position.parts
    }
    return {**parts, **pages}


def _told(verdicts: Iterable[Verdict], studied: Studied) -> dict[str, Explanation]:
    """The explanations of the subjects that have no page of their own."""
    names = {verdict.subject for verdict in verdicts if verdict.kind not in WITH_PAGES}
    told = {
        name: explain(name, studied.stage, studied.capabilities, studied.demands)
        for name in sorted(names)
    }
    return {name: text for name, text in told.items() if text is not None}


def _profile(rulebook: Rulebook) -> str:
    names = [pack.name for pack in rulebook.packs if pack.name.startswith("derating/")]
    return ", ".join(names) or _NO_PROFILE


def _not_checked(
    report: LintReport, rulebook: Rulebook, problems: tuple[Problem, ...]
) -> tuple[OpenList, ...]:
    unread = tuple(p.line() for p in problems if p.gravity is Gravity.ERROR)
    lists = (
        OpenList(
            "Cards that could not be read",
            "Their elements are missing from the analysis; everything that hangs on them is open.",
            unread,
        ),
        OpenList(
            "Checks that wait for data",
            "Neither held nor broken. The datum that decides most checks comes first.",
            undecided_lines(report),
        ),
        OpenList(
            "Quantities that nobody stated and nothing derives",
            "Each with the line that settles it.",
            tuple(f"{item.what}: {item.settle_with}" for item in report.undetermined),
        ),
        OpenList(
            "Beyond this analysis",
            "Stresses that are there and that ideal switching states do not show.",
            report.not_covered,
        ),
        OpenList(
            "Rules switched off",
            "By a pack, for the reason that it states.",
            tuple(off_line(off) for off in rulebook.switched_off),
        ),
    )
    return tuple(entry for entry in lists if entry.lines)


def _on_trust(report: LintReport) -> tuple[OpenList, ...]:
    lists = (
        OpenList(
            "Readings that the stage sheet can overrule",
            "",
            merged(report.assumed),
        ),
        OpenList(
            "Remarks on single cards",
            "",
            tuple(f"{p.span}: {p.what}" for p in report.remarks),
        ),
    )
    return tuple(entry for entry in lists if entry.lines)


def _legs(demands: Demands) -> tuple[Row, ...]:
    legs = (
        Row((leg.name, leg.kind, ", ".join(leg.rails), _members(leg.high), _members(leg.low),
             _members(leg.others), str(leg.levels)))
        for leg in demands.legs
    )  # fmt: skip
    return tuple(legs)


def _members(names: tuple[str, ...]) -> str:
    return ", ".join(names) or "-"


def _port(port: Port) -> Row:
    figures = ((port.voltage, "V"), (port.current, "A"), (port.power, "W"), (port.frequency, "Hz"))
    return Row((
        port.name,
        {"dc": "DC", "ac": "AC", "phases": "symmetrical phases"}[port.kind.value],
        ", ".join(port.nets),
        *(_stated(value, unit) for value, unit in figures),
        f"{port.span}",
    ))  # fmt: skip


def _stated(value: Interval | None, unit: str) -> str:
    return range_figure(value, unit) if value is not None else "left open"


def _quantities(demands: Demands) -> tuple[Row, ...]:
    return tuple(
        Row((variable.name, range_figure(variable.range, variable.unit), variable.origin))
        for variable in demands.variables
    )


def _deviations(found: Findings) -> tuple[Row, ...]:
    """Those that name this netlist, with what has become of each here."""
    used = {(v.rule, v.excuse.reason) for v in found.report.excused if v.excuse is not None}
    late = {f.subject for f in found.report.broken if f.rule == "deviation-expired"}
    rows = []
    for deviation in found.deviations:
        if not deviation.belongs_to(found.report.netlist):
            continue
        name = f"{deviation.rule} on {deviation.subject}"
        standing = (
            "ended: its findings count again" if name in late
            else "in force" if (deviation.rule, deviation.reason) in used
            else "excuses nothing here"
        )  # fmt: skip
        until = deviation.until.isoformat() if deviation.until else "no end stated"
        rows.append(
            Row((deviation.rule, deviation.subject, deviation.reason, deviation.accepted_by,
                 until, standing, str(deviation.span)))
        )  # fmt: skip
    return tuple(rows)
