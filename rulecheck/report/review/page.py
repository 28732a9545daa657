"""Write a review as one HTML file: no script, no network, every name escaped."""

from typing import TextIO

from jinja2 import Environment, PackageLoader, StrictUndefined

from rulecheck.report.figures import plain_number
from rulecheck.report.look import PLAIN, Look
from rulecheck.report.one_line import visible
from rulecheck.report.review.review import Review

CONTENTS = (
    ("summary", "Summary"),
    ("changes", "Changes"),
    ("stage", "Stage"),
    ("wall", "V-I planes"),
    ("findings", "Findings"),
    ("deviations", "Deviations"),
    ("not-checked", "Not checked"),
    ("trust", "Assumptions"),
    ("positions", "Positions"),
    ("stress", "Stress sheet"),
    ("timing", "Timing"),
    ("basis", "Basis"),
)

_LONGEST_WORD = 16
_TEMPLATES = PackageLoader("rulecheck.report.review")


def render(review: Review, stream: TextIO, look: Look = PLAIN) -> None:
    """Write the whole document; the same review gives the same bytes."""
    del look
    template = _environment().get_template("page.html.j2")
    stream.write(
        template.render(
            review=review, contents=CONTENTS, plain_number=plain_number, has_long_word=has_long_word
        )
    )


def has_long_word(text: str) -> bool:
    """Whether a cell must be broken within words, lest it make its table too wide for paper."""
    return any(len(word) > _LONGEST_WORD for word in text.split())


def _environment() -> Environment:
    return Environment(
        loader=_TEMPLATES,
        autoescape=True,
        undefined=StrictUndefined,
        finalize=_without_control_signs,
        trim_blocks=True,
        lstrip_blocks=True,
    )


def _without_control_signs(value: object) -> object:
    """Text from a file must not turn the reading direction or hide a sign."""
    if isinstance(value, str) and not hasattr(value, "__html__"):
        return visible(value, PLAIN)
    return value
