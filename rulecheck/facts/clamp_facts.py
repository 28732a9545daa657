"""Facts of over-voltage clamps: what they hold to, and between which limits they have to."""

import math
from collections.abc import Iterator

from rulecheck.facts.facts import Bounds, Subject, Value
from rulecheck.facts.inputs import Inputs, stated_number
from rulecheck.facts.terms import SubjectTerm, count, link, number, text, yes_no
from rulecheck.parts import Kind, Part
from rulecheck.values import Dimension, Interval, Unknown

V = Dimension.VOLTAGE

CLAMP = SubjectTerm(
    "clamp",
    "A zener diode, surge clamp or varistor across a voltage that the stage works with.",
    (
        text("kind", "`zener` or `varistor`."),
        number("working-voltage", V, "The largest voltage across it, whatever its sign."),
        yes_no("reversed", "A zener diode that the working voltage drives forwards."),
        number("standing-voltage", V, "What it bears without conducting, as a peak."),
        number("clamp-voltage", V, "What it holds a surge to; without `clamp`, where it begins."),
        count("protects", "How many parts with a stated rating stand across the same voltage."),
        text("weakest", "The part of lowest rating across the same voltage."),
        number("weakest-rating", V, "That rating."),
    ),
    (link("part", "part", "The same thing as a part."),),
)

_FORWARD = 1.0
"""Volts; more than this forwards is no tolerance of a range about zero."""
SURGE = 1.15
"""An electrolytic capacitor of up to 315 V survives this multiple of its rating for a short time
(IEC 60384-4, from memory)."""
SURGE_LIMIT, SURGE_ABOVE = 315.0, 1.1


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    """Clamps across a stiff voltage; those at gates and at nets of unknown voltage are none."""
    return tuple(
        _clamp(inputs, part, span)
        for part in inputs.stage.parts.parts
        if part.kind in (Kind.ZENER, Kind.VARISTOR) and len(part.nets) == 2
        for span in (clamped_voltage(inputs, part),)
        if span is not None
    )


def clamped_voltage(inputs: Inputs, part: Part) -> Interval | Unknown | None:
    """Of its first net over its second; of a zener diode anode over cathode."""
    first, second = (inputs.merged(net) for net in part.nets)
    return inputs.voltage_between.get((first, second))


def _clamp(inputs: Inputs, part: Part, span: Interval | Unknown) -> Subject:
    rated = sorted(_rated(inputs, part))
    known = span if isinstance(span, Interval) and span.bounded else None
    unknown = Unknown(f"voltage across {part.name}", "the voltage of the ports")
    bears, holds = _levels(part)
    values: dict[str, Value] = {
        "kind": part.kind.value,
        "working-voltage": known.magnitude if known else unknown,
        "reversed": _forwards(part, known) if known else unknown,
        "standing-voltage": bears,
        "clamp-voltage": holds,
        "protects": float(len(rated)),
        "weakest": rated[0][1] if rated else "",
        "weakest-rating": _weakest(part, rated, tuple(_unrated(inputs, part))),
    }
    return Subject(
        "clamp", part.name, values, {"part": (part.name,)}, (part.name,), part.nets, part.span
    )


def _forwards(part: Part, anode_over_cathode: Interval) -> bool:
    """Whether the working voltage drives a zener diode as a plain diode."""
    return part.kind is Kind.ZENER and anode_over_cathode.high > _FORWARD


def _weakest(part: Part, rated: list[tuple[float, str]], missing: tuple[Unknown, ...]) -> Value:
    """The lowest rating; only from above where one is not stated."""
    if not rated:
        settle = "ratings of the parts across it"
        return missing[0] if missing else Unknown(f"what {part.name} protects", settle)
    return Bounds(Interval(0.0, rated[0][0]), missing) if missing else rated[0][0]


def _levels(part: Part) -> tuple[Value, Value]:
    """A zener diode begins to conduct at its stated voltage; a varistor bears its own as rms."""
    if part.kind is Kind.ZENER:
        begins = stated_number(part, "ratings.blocking")
        holds = part.datum("ratings.clamp")
        return begins, begins if isinstance(holds, Unknown) else stated_number(
            part, "ratings.clamp"
        )
    bears = stated_number(part, "ratings.voltage")
    peak = bears * math.sqrt(2.0) if isinstance(bears, float) else bears
    holds = part.datum("ratings.clamp")
    if isinstance(holds, Unknown) and isinstance(peak, float):
        return peak, Bounds(Interval(peak, math.inf), (holds,))
    return peak, stated_number(part, "ratings.clamp")


def _rated(inputs: Inputs, part: Part) -> Iterator[tuple[float, str]]:
    for name, value in _ratings_across(inputs, part):
        if isinstance(value, float):
            yield value, name


def _unrated(inputs: Inputs, part: Part) -> Iterator[Unknown]:
    for _, value in _ratings_across(inputs, part):
        if isinstance(value, Unknown):
            yield value


def _ratings_across(inputs: Inputs, part: Part) -> Iterator[tuple[str, Value]]:
    """What electrolytic capacitors across the same nets and the legs' devices between them bear.

    Film and ceramic capacitors bear a surge far above their rating; their makers state it apart.
    """
    pair = {inputs.merged(net) for net in part.nets}
    here = {n for net in pair for n in inputs.parts_at_net.get(net, ())}
    for name in sorted(here):
        other = inputs.part_by_name[name]
        across = {inputs.merged(net) for net in other.nets} == pair
        if across and other.facts.get("ratings.dielectric") == "electrolytic":
            yield name, _surge_rating(stated_number(other, "ratings.voltage"))
    for leg in inputs.demands.legs:
        if set(leg.rails) == pair and leg.levels == 2:
            yield from _of_positions(inputs, (*leg.high, *leg.low))


def _surge_rating(rated: Value) -> Value:
    if not isinstance(rated, float):
        return rated
    return rated * (SURGE if rated <= SURGE_LIMIT else SURGE_ABOVE)


def _of_positions(inputs: Inputs, names: tuple[str, ...]) -> Iterator[tuple[str, Value]]:
    """What each position of a two-level leg withstands: each stands at the whole voltage."""
    for name in names:
        capability = inputs.capabilities.positions[name]
        for way in (capability.forward, capability.reverse):
            if way.holds_off and (isinstance(way.blocks, Unknown) or way.blocks > 0.0):
                yield name, way.blocks
