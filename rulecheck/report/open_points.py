"""The lists that stand under every human report: what is open, assumed, not covered."""

import re

from rulecheck.demand import Undetermined

_NAME_AND_REST = re.compile(r"(\S+?)((?: read as |: ).*)", re.DOTALL)


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
        ("Assumed; the stage sheet can overrule it", merged(assumed)),
    )
    return tuple((heading, lines) for heading, lines in sections if lines)


def merged(lines: tuple[str, ...]) -> tuple[str, ...]:
    """Lines that say the same of several names become one: `C5, R1 read as a snubber of SW`."""
    names: dict[str, list[str]] = {}
    for line in lines:
        match = _NAME_AND_REST.fullmatch(line)
        name, rest = (match[1], match[2]) if match else ("", line)
        names.setdefault(rest, []).append(name)
    return tuple(", ".join(filter(None, found)) + rest for rest, found in names.items())
