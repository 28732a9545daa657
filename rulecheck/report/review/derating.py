"""What the derating factors in force leave of a position's ratings."""

from collections.abc import Iterable

from rulecheck.capability import Capability
from rulecheck.rulebook import Rulebook
from rulecheck.stage import Stage
from rulecheck.values import Unknown
from rulecheck.values.record import Record

_BLOCKING, _CURRENT = "derate.blocking", "derate.current"


class Limits(Record):
    """Volts and amperes that may be used, by direction; None where a rating is not known."""

    forward_voltage: float | None
    reverse_voltage: float | None
    forward_current: float | None
    reverse_current: float | None


class Factor(Record):
    """A derating factor in force: for which parts, which share, and who says so."""

    name: str
    words: str
    share: str
    meaning: str
    source: str


def limits_of(capability: Capability, stage: Stage, rulebook: Rulebook) -> Limits:
    """Each rating times the factor of the kinds that it rests on, as the rating rules take it."""
    forward, reverse = capability.forward, capability.reverse
    return Limits(
        _part(forward.blocks, forward.weakest, _BLOCKING, stage, rulebook),
        _part(reverse.blocks, reverse.weakest, _BLOCKING, stage, rulebook),
        _part(forward.current, forward.carried_by, _CURRENT, stage, rulebook),
        _part(reverse.current, reverse.carried_by, _CURRENT, stage, rulebook),
    )


def _part(
    rating: float | Unknown, names: Iterable[str], factor: str, stage: Stage, rulebook: Rulebook
) -> float | None:
    parameter = rulebook.parameters.get(factor)
    if isinstance(rating, Unknown) or parameter is None:
        return None
    kinds = {stage.parts.by_name[name].kind.value for name in names if name in stage.parts.by_name}
    return rating * parameter.row_for(tuple(sorted(kinds))).value


def factors_in_force(rulebook: Rulebook) -> tuple[Factor, ...]:
    """Every row of every derating parameter, in the order in which the packs state them."""
    return tuple(
        Factor(name, word, f"{100.0 * row.value:g} %", parameter.meaning, row.source)
        for name, parameter in rulebook.parameters.items()
        if name.startswith("derate.")
        for word, row in parameter.rows.items()
    )
