"""The date that a document bears: one that was asked for, or that of the netlist's file.

SOURCE_DATE_EPOCH is the convention of reproducible builds: seconds since 1970-01-01 UTC.
"""

import datetime
import os
from pathlib import Path

from rulecheck.values import Problem, Span, error
from rulecheck.values.record import Record

VARIABLE = "SOURCE_DATE_EPOCH"


class Moment(Record):
    day: datetime.date
    whose: str


def asked_moment() -> Moment | Problem | None:
    """The day of SOURCE_DATE_EPOCH; a problem where it is no number of seconds, None if unset."""
    text = os.environ.get(VARIABLE, "").strip()
    if not text:
        return None
    try:
        return Moment(_day(float(int(text))), f"from {VARIABLE}")
    except (ValueError, OverflowError, OSError):
        what = f"'{text}' is no number of seconds since 1970"
        return error(Span(VARIABLE, 1), what, "write digits only, or unset the variable")


def moment_of(file: Path) -> Moment:
    """The day on which the file was last changed, in UTC. Raises OSError where it is gone."""
    return Moment(_day(file.stat().st_mtime), f"of the file {file.name}")


def _day(seconds: float) -> datetime.date:
    return datetime.datetime.fromtimestamp(seconds, datetime.UTC).date()
