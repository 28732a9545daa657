"""Renderers: each report is one file with `render(result, stream, look)`.

A renderer is imported when its format is asked for; this file names none of them, so that a
plain format never pays for the terminal library.
"""

from rulecheck.report.look import PLAIN, Look
from rulecheck.report.quadrant_result import PositionResult, QuadrantResult, quadrant_result

__all__ = ["PLAIN", "Look", "PositionResult", "QuadrantResult", "quadrant_result"]
