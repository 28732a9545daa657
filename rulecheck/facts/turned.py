"""Whether all transistors, or all diodes, of a stage look as if their pins came in another order.

Q1 and Q2 of a leg both fit only if drawn the other way up, or both have their gates on the rails
and a main pin on what drives gates: no slip of the pen, but a pin order of the export that is not
the one assumed here.
"""

from collections.abc import Iterable, Sequence

from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.inputs import Inputs
from rulecheck.parts import Part
from rulecheck.values import Unknown
from rulecheck.values.record import Record

FEWEST = 2
"""A single device drawn upside down is a mistake of its own."""


class Suspects(Record):
    """Positions whose devices are all of them turned, and the texts of all suspected devices."""

    positions: frozenset[str]
    devices: tuple[str, ...]
    open: tuple[Unknown, ...]
    """Where no suspicion is certain: what would have to be known to rule it out."""


def find_suspects(inputs: Inputs, positions: Sequence[Subject]) -> Suspects:
    """Certain only where every single one of a class is; else each is judged by itself."""
    turned: list[Subject] = []
    open_points: list[Unknown] = []
    for gated in (True, False):
        same = [p for p in positions if p.values["gated"] is gated and _holds_one_polarity(p)]
        answers = [p.values["turned"] for p in same]
        if len(same) < FEWEST or False in answers:
            continue
        unknown = [answer for answer in answers if isinstance(answer, Unknown)]
        open_points += unknown
        turned += [] if unknown else same
    devices = [name for position in turned for name in position.parts]
    devices += [part.name for part in _misplaced(inputs)]
    names = frozenset(position.name for position in turned)
    return Suspects(names, tuple(dict.fromkeys(devices)), tuple(dict.fromkeys(open_points)))


def _holds_one_polarity(position: Subject) -> bool:
    values = position.values
    return values["holds-off-forward"] != values["holds-off-reverse"]


def _misplaced(inputs: Inputs) -> Sequence[Part]:
    """All gated devices, where each has its gate on a power net and a main pin on none."""
    gated = [part for part in inputs.stage.parts.parts if part.gated]
    if len(gated) < FEWEST or not all(_is_misplaced(inputs, part) for part in gated):
        return ()
    return gated


def _is_misplaced(inputs: Inputs, part: Part) -> bool:
    gates = {inputs.merged(pin.net) for pin in part.pins if pin.role in ("gate", "base")}
    main = {inputs.merged(net) for edge in part.edges for net in (edge.tail, edge.head)}
    return bool(gates & inputs.power_nets) and not main <= inputs.power_nets


def stage_values(inputs: Inputs, suspects: Suspects) -> dict[str, Value]:
    """The stage's fields on the pin order."""
    suspected: Value = bool(suspects.devices)
    if not suspects.devices and suspects.open:
        suspected = suspects.open[0]
    return {
        "pin-order-suspect": suspected,
        "suspect-devices": float(len(suspects.devices)),
        "suspect-models": tuple(sorted(_models(inputs, suspects.devices))),
    }


def _models(inputs: Inputs, names: Iterable[str]) -> set[str]:
    texts = (inputs.part_by_name[name].text for name in names)
    return {inputs.spelling[text.casefold()] for text in texts}
