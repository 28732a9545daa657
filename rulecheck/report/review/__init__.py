"""The review document: one self-contained HTML file that five people read in a room."""

from rulecheck.report.review.making import Findings, Studied, make_review
from rulecheck.report.review.review import InputFile, Occasion, Review

__all__ = ["Findings", "InputFile", "Occasion", "Review", "Studied", "make_review"]
