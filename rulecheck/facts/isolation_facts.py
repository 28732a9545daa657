"""Facts of insulation: where domains of the sheet meet, and how grounds are joined."""

from collections import Counter
from itertools import combinations

from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.inputs import Inputs, stated_number
from rulecheck.facts.terms import SubjectTerm, count, link, number, text, texts, yes_no
from rulecheck.parts import Kind, Part
from rulecheck.stage import Crossing
from rulecheck.values import Dimension, Span, Unknown, natural_key

V = Dimension.VOLTAGE

CROSSING = SubjectTerm(
    "crossing",
    "A part at which two domains of the sheet meet: insulation, or what defeats it.",
    (
        text("kind", "Its kind; `core` where windings on one core meet."),
        text("first", "The one domain."),
        text("second", "The other domain."),
        yes_no("insulates", "It holds the domains apart."),
        texts("chain", "Where it joins them: the parts of the shortest way between them."),
        number("working-voltage", V, "The peak voltage between the domains, as the sheet says."),
        number(
            "test-voltage", V, "What the sheet says; else twice the working one, 1 kV at least."
        ),
        number("insulation-rating", V, "The voltage that its insulation is tested with."),
        number("rated-voltage", V, "Of a capacitor: its rated voltage."),
    ),
    (link("parts", "part", "The part, or the windings."),),
)

GROUND_PAIR = SubjectTerm(
    "ground-pair",
    "Two nets that are both called ground.",
    (
        text("first", "The one ground."),
        text("second", "The other ground."),
        texts("ties", "The parts that join them straight: small resistors, beads, chokes."),
        count("tie-count", "How many parts that are."),
        yes_no("one-domain", "The sheet puts both into one domain."),
    ),
)
_TIE_RESISTANCE = 10.0
"""Ohm; a larger resistor between two grounds is no tie."""
_LEAST_TEST = 1000.0
_TEST_FACTOR = 2.0
"""Twice the supply voltage, at least 1 kV: dielectric test of IEC 60204-1 (from memory)."""


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    times: Counter[str] = Counter()
    found = []
    for crossing in inputs.stage.crossings:
        times[crossing.name] += 1
        first, second = crossing.barrier.domains
        again = times[crossing.name] > 1
        name = f"{crossing.name} {first}/{second}" if again else crossing.name
        found.append(_crossing(inputs, name, crossing))
    return (*found, *_ground_pairs(inputs))


def _crossing(inputs: Inputs, name: str, crossing: Crossing) -> Subject:
    barrier = crossing.barrier
    first, second = barrier.domains
    parts = [inputs.part_by_name[name] for name in crossing.parts]
    working: Value = barrier.voltage or Unknown(
        f"voltage between {first} and {second}",
        f"barriers: [{{between: [{first}, {second}], voltage: ...}}]",
    )
    twice = max(_TEST_FACTOR * working, _LEAST_TEST) if isinstance(working, float) else working
    values: dict[str, Value] = {
        "kind": parts[0].kind.value if len(parts) == 1 else "core",
        "first": first,
        "second": second,
        "insulates": crossing.insulates,
        "chain": crossing.chain,
        "working-voltage": working,
        "test-voltage": barrier.test_voltage or twice,
        "insulation-rating": _insulation(inputs, parts, crossing),
        "rated-voltage": stated_number(parts[0], "ratings.voltage"),
    }
    nets = tuple(dict.fromkeys(net for part in parts for net in part.nets))
    span, related = parts[0].span, inputs.related_spans(crossing.parts)
    links = {"parts": crossing.parts}
    return Subject("crossing", name, values, links, crossing.parts, nets, span, related)


def _insulation(inputs: Inputs, parts: list[Part], crossing: Crossing) -> Value:
    """Of a winding set that is one part the part's, else of whichever winding states it."""
    paths = ("ratings.isolation", "driver.isolation")
    wholes = [inputs.part_by_name[part.module] for part in parts if part.module]
    for part in (*parts, *wholes):
        for path in paths:
            if path in part.data:
                return stated_number(part, path)
    settle = f"ratings.isolation of {parts[0].settle_in}"
    return Unknown(f"insulation rating of {crossing.name}", settle)


def _ground_pairs(inputs: Inputs) -> tuple[Subject, ...]:
    grounds = sorted(inputs.grounds, key=natural_key)
    return tuple(_ground_pair(inputs, a, b) for a, b in combinations(grounds, 2))


def _ground_pair(inputs: Inputs, first: str, second: str) -> Subject:
    merged = {inputs.merged(net) for net in (first, second)}
    near = {name for net in merged for name in inputs.parts_at_net.get(net, ())}
    ties = tuple(
        name
        for name in sorted(near, key=natural_key)
        if _ties(inputs.part_by_name[name], {first, second})
    )
    values: dict[str, Value] = {
        "first": first,
        "second": second,
        "ties": ties,
        "tie-count": float(len(ties)),
        "one-domain": any({first, second} <= set(nets) for nets in inputs.stage.domains.values()),
    }
    span = inputs.span_of_parts(ties) if ties else Span(inputs.stage.netlist, 1)
    related = inputs.related_spans(ties)
    name = f"{first}/{second}"
    return Subject("ground-pair", name, values, {}, ties, (first, second), span, related)


def _ties(part: Part, grounds: set[str]) -> bool:
    if set(part.nets) != grounds or len(part.nets) != 2:
        return False
    if part.kind is Kind.RESISTOR:
        return not isinstance(part.value, Unknown) and part.value <= _TIE_RESISTANCE
    return part.kind in (Kind.INDUCTOR, Kind.FUSE, Kind.CIRCUIT_BREAKER, Kind.VOLTAGE_SOURCE)
