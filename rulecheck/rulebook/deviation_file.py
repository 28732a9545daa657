"""A deviation as it stands in a project file: the shape that its entries are validated against.

deviations:
  - {rule: blocking-rating, subject: Q7, reason: "clamped, see note 12",
     accepted-by: head of power, until: 2027-06-30}
"""

import msgspec


class DeviationEntry(
    msgspec.Struct, frozen=True, kw_only=True, forbid_unknown_fields=True, rename="kebab"
):
    """A broken rule accepted: on which subjects, why, by whom, and until when."""

    rule: str
    """A rule's id."""
    subject: str
    """A subject's name, or a pattern with `*` and `?`."""
    reason: str
    accepted_by: str
    until: str | None = None
    """The last day on which it holds, as YYYY-MM-DD."""
    netlist: str | None = None
    """A netlist's name or pattern; all netlists where it is left out."""
