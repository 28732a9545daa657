"""A datum that nobody stated, as a value of its own."""

from rulecheck.values.record import Record


class Unknown(Record, order=True):
    """What is not known, and what the user would write, and where, to settle it.

    >>> Unknown("blocking rating of Q1", "ratings.blocking of part SW-N100 (in hut.parts.yaml)")
    ... # doctest: +ELLIPSIS
    Unknown(what='blocking rating of Q1', ...)
    """

    what: str
    settle: str
