"""Findings as cards: message, reason, remedy, source, the lines of the netlist, the derivation."""

from collections.abc import Callable, Iterable, Mapping, Sequence

from rulecheck.report.explanation import Entry, Explanation
from rulecheck.report.lint_result import LintReport, excuse_text
from rulecheck.report.review.drawing import Mark
from rulecheck.report.review.review import Card, FindingCard, InputFile, UndecidedCheck
from rulecheck.rulebook import Rule, Verdict
from rulecheck.values import Span
from rulecheck.values.record import Record

WITH_PAGES = ("position", "part")
"""Kinds of subject whose numbers a position's page derives, where they are in one."""
_OF_LEGS = ("leg", "bridge")
_MOST_CARDS = 12


class Derivations(Record):
    """Where the reason of a number stands: in a position's own page, or told here."""

    anchors: Mapping[str, str]
    """By position and by part of one: the anchor of its page."""
    told: Mapping[str, Explanation]
    """By name of any other subject of a finding."""


def finding_cards(
    verdicts: Sequence[Verdict],
    rules: Iterable[Rule],
    inputs: Sequence[InputFile],
    derivations: Derivations,
    first: int = 1,
) -> tuple[FindingCard, ...]:
    """One card a finding, numbered from `first` in the order given."""
    by_id = {rule.id: rule for rule in rules}
    lines = {source.file: source.lines for source in inputs}
    return tuple(
        _card(number, verdict, by_id.get(verdict.rule), lines, derivations)
        for number, verdict in enumerate(verdicts, first)
    )


def _card(
    number: int,
    verdict: Verdict,
    rule: Rule | None,
    lines: Mapping[str, Sequence[str]],
    derivations: Derivations,
) -> FindingCard:
    position = derivations.anchors.get(verdict.subject, "") if verdict.kind in WITH_PAGES else ""
    return FindingCard(
        number,
        f"finding-{number}",
        verdict.level,
        verdict.rule,
        verdict.kind,
        verdict.subject,
        verdict.parts,
        verdict.message,
        rule.why if rule else "",
        rule.remedy if rule else "",
        rule.source if rule else "",
        rule.pack if rule else "",
        cards_at((verdict.span, *verdict.related), lines),
        () if position else _told(verdict.subject, derivations),
        position,
        excuse_text(verdict),
    )


def _told(subject: str, derivations: Derivations) -> tuple[Entry, ...]:
    explanation = derivations.told.get(subject)
    return explanation.entries if explanation is not None else ()


def cards_at(spans: Iterable[Span], lines: Mapping[str, Sequence[str]]) -> tuple[Card, ...]:
    """The lines at these places, each with the lines that continue it; none twice."""
    cards = (_card_at(span, lines.get(span.file, ())) for span in spans)
    return tuple(dict.fromkeys(cards))[:_MOST_CARDS]


def _card_at(span: Span, lines: Sequence[str]) -> Card:
    if not 1 <= span.line <= len(lines):
        return Card(span.file, span.line, "")
    text = [lines[span.line - 1].strip()]
    for line in lines[span.line :]:
        if not line.lstrip().startswith("+"):
            break
        text.append(line.strip())
    return Card(span.file, span.line, "\n".join(text))


def marks_by(
    cards: Iterable[FindingCard], names: Callable[[FindingCard], Iterable[str]]
) -> dict[str, tuple[Mark, ...]]:
    """The marks of the findings by each of the names that `names` gives them, in order."""
    found: dict[str, list[Mark]] = {}
    for card in cards:
        for name in dict.fromkeys(names(card)):
            found.setdefault(name, []).append(Mark(card.number, card.anchor, card.level))
    return {name: tuple(marks) for name, marks in found.items()}


def parts_marked(card: FindingCard) -> tuple[str, ...]:
    """A finding on a leg as a whole stands at the leg; any other at the parts that it names."""
    return () if card.kind in _OF_LEGS else (card.subject, *card.parts)


def legs_marked(card: FindingCard) -> tuple[str, ...]:
    return (card.subject,) if card.kind in _OF_LEGS else ()


def undecided_checks(report: LintReport) -> tuple[UndecidedCheck, ...]:
    """Undecided verdicts; those of one rule that wait for the same data are one, with all names."""
    subjects: dict[tuple[str, tuple[str, ...]], list[str]] = {}
    for finding in report.undecided:
        settle = tuple(dict.fromkeys(item.settle for item in finding.missing))
        subjects.setdefault((finding.rule, settle or (finding.message,)), []).append(
            finding.subject
        )
    return tuple(
        UndecidedCheck(rule, tuple(names), settle) for (rule, settle), names in subjects.items()
    )
