"""Facts of parts: what each element is, and what it is rated for."""

from collections import Counter

from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.inputs import Inputs, stated_number, stated_range
from rulecheck.facts.terms import SubjectTerm, count, link, number, span_of, text, yes_no
from rulecheck.facts.written_value import written_value
from rulecheck.parts import Kind, Part
from rulecheck.values import Dimension, Span, Unknown

V, A = Dimension.VOLTAGE, Dimension.CURRENT

PART = SubjectTerm(
    "part",
    "One element of the netlist with what is known of it.",
    (
        text("kind", "Its kind as part data names it; `unknown` where nothing tells."),
        text("model", "Model, subcircuit or value text on the card."),
        text("role", "What it does in the stage: `switch`, `snubber`, `wire`, ..."),
        yes_no("understood", "Its kind is known and its card could be read."),
        yes_no("described", "It names no model, or a model card or part data says what that is."),
        yes_no("gated", "Some path through it follows a gate."),
        yes_no("power-device", "It is a semiconductor or switch with a power path."),
        count("pins", "How many pins it has."),
        text("written-unit", "The unit in its value as written; empty where there is none."),
        yes_no("unit-fits", "The unit in its value is that of its kind, or there is none."),
        yes_no("misleading-scale", "Its value is read otherwise than many would: `1M`, `1F`."),
        count("namesakes", "How many other elements have its name."),
        yes_no("shorted", "All its main pins are on one net."),
        yes_no("in-power-path", "It is a switch or branch of the power stage."),
        text("gate-net", "The net on its gate or base; empty where it has none."),
        number("resistance", Dimension.RESISTANCE, "Its value, where it is a resistor."),
        number("capacitance", Dimension.CAPACITANCE, "Its value, where it is a capacitor."),
        number("inductance", Dimension.INDUCTANCE, "Its value, where it is an inductor."),
        number("blocking", V, "Rated blocking voltage."),
        number("reverse-blocking", V, "Rated reverse blocking voltage."),
        number("current", A, "Rated current; of an inductor its saturation current."),
        number("peak-current", A, "Rated peak current."),
        span_of("gate-rating", V, "Rated gate voltage."),
        span_of("threshold", V, "Gate threshold voltage."),
        number("recovery-time", Dimension.TIME, "Reverse recovery time of its diode."),
        number("recovery-charge", Dimension.CHARGE, "Reverse recovery charge of its diode."),
        number("rated-voltage", V, "Rated voltage of a passive part, fuse or connector."),
        number("rated-power", Dimension.POWER, "Rated power."),
        text("dielectric", "Of a capacitor: `ceramic`, `film`, `electrolytic` or `tantalum`."),
    ),
    (
        link("positions", "position", "The positions that it is a device of."),
        link("nets", "net", "The nets that its pins are on."),
    ),
)

_NUMBERS = (
    ("blocking", "ratings.blocking"),
    ("reverse-blocking", "ratings.reverse-blocking"),
    ("current", "ratings.current"),
    ("peak-current", "ratings.peak-current"),
    ("recovery-time", "diode.recovery-time"),
    ("recovery-charge", "diode.recovery-charge"),
    ("rated-voltage", "ratings.voltage"),
    ("rated-power", "ratings.power"),
)
_RANGES = (("gate-rating", "ratings.gate"), ("threshold", "gate.threshold"))
_OF_KIND = (
    ("resistance", Kind.RESISTOR),
    ("capacitance", Kind.CAPACITOR),
    ("inductance", Kind.INDUCTOR),
)
_TWO_PINS = frozenset(
    {Kind.RESISTOR, Kind.CAPACITOR, Kind.INDUCTOR, Kind.VOLTAGE_SOURCE, Kind.CURRENT_SOURCE}
    | {Kind.FUSE, Kind.CIRCUIT_BREAKER, Kind.NTC, Kind.VARISTOR}
)


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    """All parts, and the elements that could not be read as parts that are not understood."""
    parts = inputs.stage.parts.parts
    names = Counter(part.name.casefold() for part in parts)
    unread = [name for name in inputs.stage.parts.not_understood if name.casefold() not in names]
    unknown = {part.name for part in parts if part.kind is Kind.UNKNOWN}
    again = set(inputs.stage.parts.not_understood) - unknown - set(unread)
    names.update(name.casefold() for name in again)
    return (
        *(_part(inputs, part, names[part.name.casefold()] - 1) for part in parts),
        *(_unread(inputs, name) for name in unread),
    )


def _part(inputs: Inputs, part: Part, namesakes: int) -> Subject:
    written = written_value(part.kind, part.text)
    role = inputs.stage.roles.get(part.name)
    values: dict[str, Value] = {
        "kind": part.kind.value,
        "model": part.text,
        "role": role.value if role else "signal",
        "understood": part.kind is not Kind.UNKNOWN,
        "described": bool(part.named_by) or not _wants_model(part),
        "gated": part.gated,
        "power-device": bool(part.edges),
        "pins": float(len(part.pins)),
        "written-unit": written.unit,
        "unit-fits": written.fits,
        "misleading-scale": written.misleading,
        "namesakes": float(namesakes),
        "shorted": _shorted(part),
        "in-power-path": part.name in inputs.positions_of_part or part.name in inputs.branch_parts,
        "gate-net": next((p.net for p in part.pins if p.role in ("gate", "base")), ""),
        "dielectric": part.facts.get("ratings.dielectric") or part.missing("ratings.dielectric"),
        **{name: _value_of(part, kind) for name, kind in _OF_KIND},
        **{name: stated_number(part, path) for name, path in _NUMBERS},
        **{name: stated_range(part, path) for name, path in _RANGES},
    }
    nets = tuple(dict.fromkeys(part.nets))
    links = {"positions": inputs.positions_of_part.get(part.name, ()), "nets": nets}
    chain = part.instance_chain
    return Subject("part", part.name, values, links, (part.name,), nets, part.span, chain)


def _wants_model(part: Part) -> bool:
    """A device whose card names a model; parts of other kinds have a value or a part number."""
    return bool(part.edges) and bool(part.text)


def _value_of(part: Part, kind: Kind) -> Value:
    if part.kind is kind:
        return part.value
    return Unknown(f"{kind.value} value of {part.name}", f"a part of kind {kind.value}")


def _shorted(part: Part) -> bool:
    """Of parts with two main pins: both on one net."""
    if part.edges:
        return all(edge.tail == edge.head for edge in part.edges)
    return part.kind in _TWO_PINS and len(part.pins) > 1 and len(set(part.nets)) == 1


def _unread(inputs: Inputs, name: str) -> Subject:
    """An element whose card could not be read: nothing is known but that it is missing."""
    unknown = Unknown(f"the card of {name}", f"a card of {name} that can be read")
    values: dict[str, Value] = {term.name: unknown for term in PART.fields}
    values |= {"kind": "unknown", "understood": False}
    place = Span(inputs.stage.netlist, 1)
    return Subject("part", name, values, {"positions": (), "nets": ()}, (name,), (), place)
