"""Facts of inductors, capacitors and resistors: what they see beside what they are rated for."""

import math

from rulecheck.demand import Variable
from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.inputs import Inputs, stated_number
from rulecheck.facts.likeness_facts import CAPACITOR_LIKENESS, ratings_beside
from rulecheck.facts.terms import SubjectTerm, link, number, span_of, text, yes_no
from rulecheck.facts.waveform_facts import (
    CAPACITOR_TERMS,
    INDUCTOR_TERMS,
    capacitor_values,
    inductor_values,
)
from rulecheck.parts import Kind, Part
from rulecheck.values import Dimension, Interval, Unknown

V, A, W = Dimension.VOLTAGE, Dimension.CURRENT, Dimension.POWER

_OWN_PART = link("part", "part", "The same thing as a part.")

INDUCTOR = SubjectTerm(
    "inductor",
    "An inductor or a winding of a transformer.",
    (
        text("role", "What it does in the stage: `inductor`, `winding`, `wire`, ..."),
        number("inductance", Dimension.INDUCTANCE, "Its inductance."),
        span_of("current", A, "Its current from the first net to the second, ripple included."),
        number("largest-current", A, "The largest magnitude of its current."),
        number("ripple", A, "Half the peak-to-peak ripple in its current."),
        number("saturation-current", A, "Its rated saturation current."),
        number("rms-rating", A, "Its rated rms current."),
        yes_no("power", "Power current flows through it."),
        yes_no("polarised-core", "A magnet in its core asks for current from first net to second."),
        *INDUCTOR_TERMS,
    ),
    (_OWN_PART, link("interruptions", "free-path", "Its currents that all gates off interrupt.")),
)

CAPACITOR = SubjectTerm(
    "capacitor",
    "A capacitor.",
    (
        text("role", "What it does in the stage: `bulk capacitor`, `snubber`, ..."),
        number("capacitance", Dimension.CAPACITANCE, "Its capacitance."),
        span_of("voltage", V, "Its voltage, first net over second."),
        number("largest-voltage", V, "The largest magnitude of its voltage."),
        number("rated-voltage", V, "Its rated voltage."),
        number("ripple-rating", A, "Its rated ripple current."),
        text("dielectric", "`ceramic`, `film`, `electrolytic` or `tantalum`."),
        yes_no("bulk", "It holds a voltage of the power stage."),
        *CAPACITOR_LIKENESS,
        *CAPACITOR_TERMS,
    ),
    (_OWN_PART,),
)

RESISTOR = SubjectTerm(
    "resistor",
    "A resistor.",
    (
        text("role", "What it does in the stage: `load`, `sense`, `snubber`, ..."),
        number("resistance", Dimension.RESISTANCE, "Its resistance."),
        number("rated-power", W, "Its rated power."),
        number("rated-voltage", V, "Its rated voltage."),
        number("largest-voltage", V, "The largest voltage across it, where it is known."),
        number("power", W, "Its dissipation at the largest voltage, where that is known."),
        yes_no("bleeder", "It lies between the nets of a charged bank and discharges it."),
    ),
    (_OWN_PART,),
)


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    variables = {variable.name: variable for variable in inputs.demands.variables}
    makers = {Kind.INDUCTOR: _inductor, Kind.CAPACITOR: _capacitor, Kind.RESISTOR: _resistor}
    return tuple(
        makers[part.kind](inputs, part, variables)
        for part in inputs.stage.parts.parts
        if part.kind in makers
    )


def _subject(
    inputs: Inputs,
    part: Part,
    values: dict[str, Value],
    links: dict[str, tuple[str, ...]],
) -> Subject:
    role = inputs.stage.roles.get(part.name)
    own: dict[str, Value] = {"role": role.value if role else "signal", **values}
    found = {"part": (part.name,), **links}
    return Subject(part.kind.value, part.name, own, found, (part.name,), part.nets, part.span)


def _range_of(
    part: Part, letter: str, what: str, variables: dict[str, Variable]
) -> tuple[Interval | Unknown, Variable | None]:
    variable = variables.get(f"{letter}({part.name})")
    if variable is not None:
        return variable.range, variable
    settle = f"set: {{{part.name}: {{{what}: [LOW, HIGH]}}}}"
    return Unknown(f"{what} of {part.name}", settle), None


def _magnitude(span: Interval | Unknown) -> Value:
    return span if isinstance(span, Unknown) else span.magnitude


def _inductor(inputs: Inputs, part: Part, variables: dict[str, Variable]) -> Subject:
    span, variable = _range_of(part, "i", "current", variables)
    given = inputs.stage.given.get(part.name)
    if variable is None and given is not None:
        span = given
    values: dict[str, Value] = {
        "inductance": part.value,
        "current": span,
        "largest-current": _magnitude(span),
        "ripple": _ripple(part, variable),
        "saturation-current": stated_number(part, "ratings.current"),
        "rms-rating": stated_number(part, "ratings.rms-current"),
        "power": part.name in inputs.branch_parts,
        "polarised-core": part.facts.get("ratings.core") == "polarised",
        **inductor_values(inputs, part.name),
    }
    interrupted = tuple(
        f"{item.carrier} {item.direction}"
        for item in inputs.demands.interrupted
        if item.carrier == part.name
    )
    return _subject(inputs, part, values, {"interruptions": interrupted})


def _ripple(part: Part, variable: Variable | None) -> Value:
    if variable is not None and math.isfinite(variable.ripple):
        return variable.ripple
    span = variable.range if variable is not None else None
    settle = span.settle if isinstance(span, Unknown) else "its current"
    return Unknown(f"ripple of {part.name}", settle)


def _capacitor(inputs: Inputs, part: Part, variables: dict[str, Variable]) -> Subject:
    span = _known_across(inputs, part)
    if span is None:
        span, _ = _range_of(part, "v", "voltage", variables)
    dielectric = part.facts.get("ratings.dielectric")
    values: dict[str, Value] = {
        "capacitance": part.value,
        "voltage": span,
        "largest-voltage": _magnitude(span),
        "rated-voltage": stated_number(part, "ratings.voltage"),
        "ripple-rating": stated_number(part, "ratings.ripple-current"),
        "dielectric": dielectric or part.missing("ratings.dielectric"),
        "bulk": part.name in inputs.branch_parts,
        **ratings_beside(inputs, part),
        **capacitor_values(inputs, part.name),
    }
    return _subject(inputs, part, values, {})


def _resistor(inputs: Inputs, part: Part, variables: dict[str, Variable]) -> Subject:
    del variables
    span = _known_across(inputs, part)
    bleeds = inputs.demands.banks.bleeders.get(part.name)
    settle = f"set: {{{part.name}: {{voltage: [LOW, HIGH]}}}}"
    volts: Value = Unknown(f"voltage of {part.name}", settle) if span is None else _magnitude(span)
    if span is None and bleeds is not None:
        volts = bleeds
    power: Value = volts if isinstance(volts, Unknown) else part.value
    if isinstance(volts, float) and isinstance(part.value, float) and part.value > 0.0:
        power = volts * volts / part.value
    values: dict[str, Value] = {
        "resistance": part.value,
        "rated-power": stated_number(part, "ratings.power"),
        "rated-voltage": stated_number(part, "ratings.voltage"),
        "largest-voltage": volts,
        "power": power,
        "bleeder": bool(bleeds),
    }
    return _subject(inputs, part, values, {})


def _known_across(inputs: Inputs, part: Part) -> Interval | Unknown | None:
    """What the sheet states, or the stiff voltage between the part's own two nets."""
    given = inputs.stage.given.get(part.name)
    if given is not None:
        return given
    if len(part.nets) != 2:
        return None
    first, second = (inputs.merged(net) for net in part.nets)
    if first == second:
        return Interval(0.0, 0.0)
    return inputs.voltage_between.get((first, second))
