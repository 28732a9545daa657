"""Facts of currents over time: what the waveforms say of inductors, capacitors and positions.

A rule asks for the worst over all operating points; while something is missing the number is
known only within the range that all its values allow.
"""

from rulecheck.demand import CapacitorWaves, Derived, InductorWaves, PositionWaves
from rulecheck.facts.facts import Bounds, Value
from rulecheck.facts.inputs import Inputs
from rulecheck.facts.terms import number, span_of
from rulecheck.values import Dimension, Interval, Unknown

A, V = Dimension.CURRENT, Dimension.VOLTAGE

INDUCTOR_TERMS = (
    span_of("mean-current", A, "Its mean current over all operating points."),
    number("rms-current", A, "Its largest rms current over all operating points."),
    number("peak-to-peak", A, "Its largest ripple, peak to peak, within a switching period."),
)
CAPACITOR_TERMS = (
    number("rms-current", A, "Its largest rms current over all operating points."),
    number("ripple-voltage", V, "Its largest ripple voltage, peak to peak."),
    number("share", Dimension.NUMBER, "Its share of the capacitance between its two nets."),
)
POSITION_TERMS = (
    span_of("mean-current", A, "Its mean current over a whole period."),
    number("rms-current", A, "Its largest rms current over a whole period."),
    number("forward-mean-current", A, "The largest mean of its forward current alone."),
    number("reverse-mean-current", A, "The largest mean of its reverse current alone."),
)


def inductor_values(inputs: Inputs, name: str) -> dict[str, Value]:
    waves = inputs.demands.waveforms.inductors.get(name) or _no_inductor(name)
    return {
        "mean-current": _span(waves.mean),
        "rms-current": _rms(inputs, name, waves.rms),
        "peak-to-peak": _worst(waves.ripple),
    }


def capacitor_values(inputs: Inputs, name: str) -> dict[str, Value]:
    waves = inputs.demands.waveforms.capacitors.get(name) or _no_capacitor(name)
    return {
        "rms-current": _rms(inputs, name, waves.rms),
        "ripple-voltage": _worst(waves.ripple),
        "share": waves.share,
    }


def position_values(inputs: Inputs, name: str) -> dict[str, Value]:
    waves = inputs.demands.waveforms.positions.get(name) or _no_position(name)
    return {
        "mean-current": _span(waves.mean),
        "rms-current": _rms(inputs, name, waves.rms),
        "forward-mean-current": _worst(waves.forward_mean),
        "reverse-mean-current": _worst(waves.reverse_mean),
    }


def _rms(inputs: Inputs, name: str, derived: Derived) -> Value:
    """What the sheet states, else what was worked out."""
    found = inputs.stage.rms_currents.get(name, _worst(derived))
    if isinstance(found, Unknown):
        settle = f"{found.settle}; or set: {{{name}: {{rms-current: ...}}}}"
        return Unknown(found.what, settle)
    return found


def _worst(derived: Derived) -> Value:
    if isinstance(derived.range, Unknown):
        return derived.range
    return Bounds(derived.range, derived.missing) if derived.missing else derived.range.high


def _span(derived: Derived) -> Value:
    if isinstance(derived.range, Interval) and derived.missing:
        return Bounds(derived.range, derived.missing)
    return derived.range


def _nothing(name: str) -> Derived:
    return Derived(Unknown(f"current of {name} over time", f"a place of {name} in the power path"))


def _no_inductor(name: str) -> InductorWaves:
    return InductorWaves(*[_nothing(name)] * 4)


def _no_capacitor(name: str) -> CapacitorWaves:
    nothing = _nothing(name)
    return CapacitorWaves(nothing, nothing, Unknown(f"share of {name}", "the stage around it"))


def _no_position(name: str) -> PositionWaves:
    return PositionWaves(*[_nothing(name)] * 6)
