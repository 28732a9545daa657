"""Facts of snubbers and of clamps on windings: what they dissipate, and whether they have time.

R1 BUS SN1 4.7, C5 SN1 SW 2.2n across Q1         an RC snubber of Q1: C V^2 f, tau = R C
D1 SWN CLN, C3 CLN BUS, R3 CLN BUS at Q1         a clamp of the winding that Q1 interrupts
"""

from collections.abc import Iterator, Sequence

from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.inputs import Inputs, stated_number
from rulecheck.facts.switching_times import period_of, shortest_of
from rulecheck.facts.terms import SubjectTerm, link, number, text
from rulecheck.parts import Kind, Part
from rulecheck.stage import Position, Role
from rulecheck.values import Dimension, Interval, Unknown

V, W, S = Dimension.VOLTAGE, Dimension.POWER, Dimension.TIME

SNUBBER = SubjectTerm(
    "snubber",
    "A resistor and a capacitor in series across a switch position.",
    (
        text("at", "The position that it stands across."),
        text("capacitor", "Its capacitor."),
        text("dielectric", "Of the capacitor."),
        number("swing", V, "By how much the voltage across it changes each time."),
        number("largest-voltage", V, "The largest voltage across it."),
        number("capacitor-rating", V, "The capacitor's rated voltage."),
        number("power", W, "C V^2 f: what the resistor turns into heat, both edges together."),
        number("rated-power", W, "The resistor's rated power."),
        number("time-constant", S, "Its resistance times its capacitance."),
        number("period", S, "The switching period of the position."),
        number("shortest-time", S, "The shortest time that the position is on or off."),
    ),
    (link("parts", "part", "Resistor and capacitor."), link("positions", "position", "Its place.")),
)


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    """RC networks straight across a position; sense filters and others are none."""
    across: dict[frozenset[str], Position] = {}
    for position in inputs.stage.positions:
        pair = frozenset((position.start, position.end))
        if pair not in across or position.gated:
            across[pair] = position
    return tuple(_snubbers(inputs, across))


def _snubbers(inputs: Inputs, across: dict[frozenset[str], Position]) -> Iterator[Subject]:
    for part in inputs.stage.parts.parts:
        if part.kind is not Kind.RESISTOR or inputs.stage.roles.get(part.name) is not Role.SNUBBER:
            continue
        for joint, far in (part.nets[:2], part.nets[1::-1]):
            capacitor = _capacitor_at(inputs, part, joint)
            if capacitor is None:
                continue
            ends = [inputs.merged(net) for net in capacitor.nets]
            ends.remove(inputs.merged(joint))
            position = across.get(frozenset((ends[0], inputs.merged(far))))
            if position is not None:
                yield _snubber(inputs, part, capacitor, position)
                break


def _capacitor_at(inputs: Inputs, resistor: Part, joint: str) -> Part | None:
    """The one capacitor behind the resistor, where nothing else is at their joint."""
    others = [n for n in inputs.parts_at_net.get(inputs.merged(joint), ()) if n != resistor.name]
    if len(others) != 1:
        return None
    part = inputs.part_by_name[others[0]]
    return part if part.kind is Kind.CAPACITOR and len(set(part.nets)) == 2 else None


def _snubber(inputs: Inputs, resistor: Part, capacitor: Part, position: Position) -> Subject:
    span = inputs.demands.positions[position.name].off_voltage
    swing, largest = _swing(position, span)
    dielectric = capacitor.facts.get("ratings.dielectric")
    values: dict[str, Value] = {
        "at": position.name,
        "capacitor": capacitor.name,
        "dielectric": dielectric or capacitor.missing("ratings.dielectric"),
        "swing": swing,
        "largest-voltage": largest,
        "capacitor-rating": stated_number(capacitor, "ratings.voltage"),
        "power": _power(inputs, capacitor, position, swing),
        "rated-power": stated_number(resistor, "ratings.power"),
        "time-constant": _product(resistor, capacitor),
        "period": period_of(inputs, position),
        "shortest-time": shortest_of(inputs, position),
    }
    parts = (resistor.name, capacitor.name)
    nets = tuple(dict.fromkeys((*resistor.nets, *capacitor.nets)))
    links = {"parts": parts, "positions": (position.name,)}
    related = inputs.related_spans(parts)
    return Subject("snubber", resistor.name, values, links, parts, nets, resistor.span, related)


def _swing(position: Position, span: Interval | Unknown) -> tuple[Value, Value]:
    """From nothing, while the position conducts, to the farthest off voltage."""
    if isinstance(span, Unknown):
        return span, span
    if not span.bounded:
        unknown = Unknown(f"off voltage of {position.name}", "the voltages of the ports")
        return unknown, unknown
    return max(span.high, 0.0) - min(span.low, 0.0), span.magnitude


def _power(inputs: Inputs, capacitor: Part, position: Position, swing: Value) -> Value:
    """C V^2 f of both edges (Severns, design notes on RC snubbers)."""
    period = period_of(inputs, position)
    known: Sequence[Value] = (capacitor.value, swing, period)
    missing = next((item for item in known if isinstance(item, Unknown)), None)
    if missing is not None:
        return missing
    farad, volts, seconds = (item for item in known if isinstance(item, float))
    return farad * volts**2 / seconds


def _product(resistor: Part, capacitor: Part) -> Value:
    if isinstance(resistor.value, Unknown) or isinstance(capacitor.value, Unknown):
        return resistor.value if isinstance(resistor.value, Unknown) else capacitor.value
    return resistor.value * capacitor.value
