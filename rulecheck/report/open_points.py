"""The lists that stand under every human report: what is open, assumed, not covered."""

from rulecheck.demand import Undetermined


def open_sections(
    undetermined: tuple[Undetermined, ...], assumed: tuple[str, ...], not_covered: tuple[str, ...]
) -> tuple[tuple[str, tuple[str, ...]], ...]:
    """Pairs of heading and lines; a section with nothing in it is left out."""
    sections = (
        (
            "Undetermined, and what settles it",
            tuple(f"{item.what}: {item.settle_with}" for item in undetermined),
        ),
        ("Not covered by this analysis", not_covered),
        ("Assumed; the stage sheet can overrule it", assumed),
    )
    return tuple((heading, lines) for heading, lines in sections if lines)
