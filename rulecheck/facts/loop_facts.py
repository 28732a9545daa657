"""Facts of the loop through a leg and its nearest capacitor: is there one, and how far it rings.

overshoot = L di / dt, with the largest current of the leg within its edge time
"""

from collections.abc import Iterable

from rulecheck.demand import Leg
from rulecheck.facts.facts import Value
from rulecheck.facts.inputs import Inputs
from rulecheck.facts.terms import number, yes_no
from rulecheck.parts import Kind
from rulecheck.stage import Role
from rulecheck.values import Dimension, Unknown

LOOP_TERMS = (
    yes_no("decoupled", "Capacitors join its rails."),
    yes_no("stray-stated", "The sheet states the stray inductance of its loop."),
    number("stray-inductance", Dimension.INDUCTANCE, "The stray inductance of its loop."),
    number("overshoot", Dimension.VOLTAGE, "Stray inductance times the current's steepest slope."),
)
_NO_DECOUPLING = frozenset({Role.ISOLATION, Role.GATE_DRIVE, Role.BOOTSTRAP, Role.SENSE})


def loop_values(inputs: Inputs, leg: Leg) -> dict[str, Value]:
    own = inputs.stage.leg_switching.get(leg.midpoint)
    common = inputs.stage.switching
    henry = (own.stray_inductance if own else None) or common.stray_inductance
    edge = (own.edge if own else None) or common.edge
    where = "switching: {stray-inductance: ...}"
    stray: Value = henry or Unknown(f"stray inductance of leg {leg.name}", where)
    rise: Value = edge or Unknown(f"edge time of leg {leg.name}", "switching: {edge: ...}")
    current = _largest_current(inputs, (*leg.high, *leg.low, *leg.others))
    overshoot: Value = next((v for v in (stray, rise, current) if isinstance(v, Unknown)), stray)
    if isinstance(stray, float) and isinstance(rise, float) and isinstance(current, float):
        overshoot = stray * current / rise
    return {
        "decoupled": _joined(inputs, leg.rails),
        "stray-stated": henry is not None,
        "stray-inductance": stray,
        "overshoot": overshoot,
    }


def _largest_current(inputs: Inputs, names: Iterable[str]) -> Value:
    largest = 0.0
    for name in names:
        span = inputs.demands.positions[name].on_current
        if isinstance(span, Unknown):
            return span
        largest = max(largest, span.magnitude)
    return largest


def _joined(inputs: Inputs, rails: tuple[str, ...]) -> bool:
    """Whether capacitors lead from rail to rail; those of isolation and signals do not count."""
    links = [(bank.start, bank.end) for bank in inputs.demands.banks.banks]
    for part in inputs.stage.parts.parts:
        role = inputs.stage.roles.get(part.name)
        if part.kind is Kind.CAPACITOR and len(part.nets) == 2 and role not in _NO_DECOUPLING:
            links.append((inputs.merged(part.nets[0]), inputs.merged(part.nets[1])))
    reached, goal = {rails[0]}, rails[-1]
    while goal not in reached:
        more = {net for pair in links if set(pair) & reached for net in pair} - reached
        if not more:
            return False
        reached |= more
    return True
