"""Numbers as text: the same figure reads the same in every human report."""

import math

from rulecheck.report.look import PLAIN, Look
from rulecheck.values import Interval, Unknown

# from this size on: factor, SI prefix; volts and amperes stay plain from 0.1 to 10,000
_SCALES = (
    (1e7, 1e-6, "M"),
    (1e4, 1e-3, "k"),
    (0.1, 1.0, ""),
    (1e-3, 1e3, "m"),
    (1e-6, 1e6, "u"),
    (1e-9, 1e9, "n"),
)
_TINY = (1e12, "p")
_SAME = 1e-9
_JSON_DIGITS = 9


def plain_number(value: float) -> str:
    """Four significant digits, whole units never rounded away, no exponent below a million."""
    if math.isinf(value):
        return "?"
    digits = max(4, len(f"{abs(value):.0f}"))
    text = f"{value:.{digits}g}"
    return "0" if text == "-0" else text


def figure(value: float | Unknown | None, unit: str) -> str:
    """`figure(58.0, "V")` is `58 V`; what is not known is `unknown`."""
    if value is None or isinstance(value, Unknown) or math.isinf(value):
        return "unknown"
    factor, prefix = _scale(abs(value))
    return f"{plain_number(value * factor)} {prefix}{unit}"


def range_figure(value: Interval | Unknown, unit: str, look: Look = PLAIN) -> str:
    """`36 … 58 V`, `±86 A`, `48 V`; an end nobody knows is `?`."""
    if isinstance(value, Unknown):
        return "unknown"
    if abs(value.high - value.low) <= _SAME * max(1.0, value.magnitude):
        return figure(value.high, unit)
    factor, prefix = _scale(value.magnitude)
    if value.bounded and abs(value.high + value.low) <= _SAME * value.magnitude:
        return f"{look.plus_minus}{plain_number(value.high * factor)} {prefix}{unit}"
    ends = f"{plain_number(value.low * factor)}{look.dots}{plain_number(value.high * factor)}"
    return f"{ends} {prefix}{unit}"


def _scale(size: float) -> tuple[float, str]:
    if not math.isfinite(size) or size == 0.0:
        return 1.0, ""
    return next(((factor, prefix) for least, factor, prefix in _SCALES if size >= least), _TINY)


def share(used: float, rating: float) -> str:
    """How much of a rating is used: `58 %`."""
    return f"{100.0 * used / rating:.0f} %"


def json_number(value: float | Unknown | None) -> float | None:
    """A finite float without the noise of the last digits; null for what is not known."""
    if value is None or isinstance(value, Unknown) or not math.isfinite(value):
        return None
    return float(f"{value:.{_JSON_DIGITS}g}") + 0.0


def json_range(value: Interval | Unknown) -> list[float | None] | None:
    if isinstance(value, Unknown):
        return None
    return [json_number(value.low), json_number(value.high)]
