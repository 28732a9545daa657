"""Facts of likeness: how a leg compares with its siblings, a capacitor with those beside it.

Three capacitors rated 250 V and one rated 100 V side by side: the one is unlike its siblings.
"""

from collections.abc import Iterator, Mapping
from statistics import median

from rulecheck.demand import Likeness, compare_legs
from rulecheck.facts.facts import Value
from rulecheck.facts.inputs import Inputs, stated_number
from rulecheck.facts.terms import FieldTerm, count, number, text, texts, yes_no
from rulecheck.parts import Part
from rulecheck.values import Dimension, Unknown

LEG_LIKENESS: tuple[FieldTerm, ...] = (
    count("siblings", "How many legs do the same job beside it: phases, interleaved legs, cells."),
    yes_no("alike", "Power parts and drives are the same in the same places as with most of them."),
    yes_no("measured-alike", "So is what measures and filters."),
    text("compared-with", "The sibling that it was compared with."),
    texts("own-parts", "Its parts that have no equal there."),
    texts("missing-parts", "Parts of that sibling that have no equal here."),
)
CAPACITOR_LIKENESS: tuple[FieldTerm, ...] = (
    count("beside", "How many capacitors of its dielectric with a rating stand side by side."),
    number("rated-beside", Dimension.VOLTAGE, "The middle of the others' rated voltages."),
)
_ALONE: Mapping[str, Value] = {
    "siblings": 0.0,
    "alike": True,
    "measured-alike": True,
    "compared-with": "",
    "own-parts": (),
    "missing-parts": (),
}


def likeness_of_legs(inputs: Inputs) -> list[Likeness]:
    return list(compare_legs(inputs.stage, inputs.demands.legs, inputs.demands.bridges))


def leg_likeness(found: Likeness | None) -> Mapping[str, Value]:
    if found is None:
        return _ALONE
    return {
        "siblings": float(len(found.siblings)),
        "alike": found.alike,
        "measured-alike": found.measured_alike,
        "compared-with": found.compared_with,
        "own-parts": found.own,
        "missing-parts": found.theirs,
    }


def ratings_beside(inputs: Inputs, part: Part) -> Mapping[str, Value]:
    """Of a capacitor: what the others of its dielectric across the same two nets are rated for."""
    rated = list(_rated_beside(inputs, part))
    if not rated:
        unknown = Unknown(
            f"ratings beside {part.name}", "capacitors beside it with ratings.voltage"
        )
        return {"beside": 0.0, "rated-beside": unknown}
    return {"beside": float(len(rated)), "rated-beside": median(rated)}


def _rated_beside(inputs: Inputs, part: Part) -> Iterator[float]:
    ends = {inputs.merged(net) for net in part.nets}
    dielectric = part.facts.get("ratings.dielectric")
    if dielectric is None or len(ends) != 2 or part.name not in inputs.branch_parts:
        return
    near = min((inputs.parts_at_net.get(net, ()) for net in sorted(ends)), key=len)
    for name in near:
        other = inputs.part_by_name[name]
        if name == part.name or other.facts.get("ratings.dielectric") != dielectric:
            continue
        value = stated_number(other, "ratings.voltage")
        if {inputs.merged(net) for net in other.nets} == ends and isinstance(value, float):
            yield value
