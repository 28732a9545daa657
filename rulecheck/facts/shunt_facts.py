"""Facts of shunts: small resistors in a line, whose drop tells its current."""

from rulecheck.facts.facts import Bounds, Subject, Value
from rulecheck.facts.feeding import Heating, feeders_of, find_wires, heating_of, wire_pairs
from rulecheck.facts.inputs import Inputs, stated_number
from rulecheck.facts.terms import SubjectTerm, link, number, text
from rulecheck.parts import Kind, Part
from rulecheck.values import Dimension, Interval, Unknown

SHUNT = SubjectTerm(
    "shunt",
    "A resistor of 0.1 ohm or less in a line: what tells a current.",
    (
        number("resistance", Dimension.RESISTANCE, "Its resistance."),
        text("carries", "The port, position or inductor whose current passes it."),
        number("largest-current", Dimension.CURRENT, "The largest peak of its current."),
        number("drop", Dimension.VOLTAGE, "Its voltage at that peak."),
        number("power", Dimension.POWER, "Its dissipation at the largest rms current."),
        number("rated-power", Dimension.POWER, "Its rated power."),
    ),
    (link("part", "part", "The same thing as a part."),),
)


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    wires = find_wires(inputs)
    return tuple(
        _shunt(inputs, part, feeders_of(wires, inputs, part))
        for part in inputs.stage.parts.parts
        if is_shunt(inputs, part)
    )


def is_shunt(inputs: Inputs, part: Part) -> bool:
    """A resistor that is a wire for the topology, and no jumper."""
    resists = part.kind is Kind.RESISTOR and not isinstance(part.value, Unknown)
    return resists and part.value != 0.0 and bool(wire_pairs(inputs, part))


def _shunt(inputs: Inputs, part: Part, feeders: tuple[tuple[str, str], ...]) -> Subject:
    kinds = ("position", "inductor", "port")
    ranked = sorted(feeders, key=lambda feeder: kinds.index(feeder[0]))
    found = _heating(inputs, part, ranked)
    ohm = part.value if isinstance(part.value, float) else 0.0
    values: dict[str, Value] = {
        "resistance": part.value,
        "carries": ranked[0][1] if ranked else "",
        "largest-current": found if isinstance(found, Unknown) else found.peak,
        "drop": found if isinstance(found, Unknown) else found.peak * ohm,
        "power": _power(part, found, ohm),
        "rated-power": stated_number(part, "ratings.power"),
    }
    return Subject(
        "shunt", part.name, values, {"part": (part.name,)}, (part.name,), part.nets, part.span
    )


def _heating(inputs: Inputs, part: Part, feeders: list[tuple[str, str]]) -> Heating | Unknown:
    given = inputs.stage.stated_current.get(part.name)
    if given is not None:
        return Heating(given.magnitude, 0.0, given.magnitude)
    if not feeders:
        settle = f"a port, position or inductor whose whole current passes {part.name}"
        return Unknown(f"current of {part.name}", settle)
    return heating_of(inputs, feeders[0])


def _power(part: Part, found: Heating | Unknown, ohm: float) -> Value:
    """Exact where the rms current is; else between what is certain and what the peak would do."""
    if isinstance(found, Unknown):
        return found
    low, high = found.rms_low**2 * ohm, found.rms_high**2 * ohm
    if high - low <= 1e-9 * high:
        return high
    missing = Unknown(
        f"rms current of {part.name}", f"the share of time in which {part.name} carries"
    )
    return Bounds(Interval(low, high), (missing,))
