"""The demands as one canonical text: variables, groups with their states, positions, legs.

variable i(L1) [-82.5, 82.5] A = -i(battery) ripple 2.5
state {Q1} Q1 i(L1), Q2 v(bus)
demand Q1 off [380, 420] on [-82.5, 82.5] I+IV
"""

from collections.abc import Iterator

from rulecheck.demand.demands import Demands, Group, Leg, PositionDemand, Variable
from rulecheck.values import Interval, QuadrantSet, Unknown


def demands_text(demands: Demands) -> str:
    """One line a record, in the order in which the demands hold them."""
    return "".join(f"{line}\n" for line in _lines(demands))


def _lines(demands: Demands) -> Iterator[str]:
    yield from (_variable(variable) for variable in demands.variables)
    for group in demands.groups:
        yield from _group(group)
    yield from (_demand(demand) for demand in demands.positions.values())
    yield from (_leg(leg) for leg in demands.legs)
    yield from (f"bridge {b.name} {b.kind} {' '.join(b.legs)}" for b in demands.bridges)
    for item in demands.undetermined:
        yield f"undetermined {item.what}; settle with {item.settle_with}"
    for current in demands.interrupted:
        yield f"interrupted {current.carrier} {current.direction} {_range(current.within)} A"
    for short in demands.free_shorts:
        yield f"free short {' '.join(short.positions)} across {short.across}"
    for item_ in demands.hard_commutations:
        numbers = f"{_number(item_.current)} A {_number(item_.voltage)} V"
        yield f"hard commutation of {item_.position} by {item_.by} {numbers}"
    yield from (f"assumed {line}" for line in demands.assumed)
    yield from (f"not covered {line}" for line in demands.not_covered)


def _variable(variable: Variable) -> str:
    form = f" = {variable.form.text()}" if variable.form is not None else ""
    ripple = f" ripple {variable.ripple:.6g}" if variable.ripple else ""
    return f"variable {variable.name} {_range(variable.range)} {variable.unit}{form}{ripple}"


def _group(group: Group) -> Iterator[str]:
    verdict = f"{len(group.states)} legal states" if group.analysed else group.why_not
    yield f"group {' '.join(group.positions) or '(no position)'}: {verdict}"
    for state in group.states:
        forms = {**state.on_currents, **state.off_voltages}
        body = ", ".join(f"{n} {forms[n].text()}" for n in group.positions if n in forms)
        barred = "" if state.available else " (forbidden by a free path)"
        yield f"state {{{' '.join(state.on)}}}{barred} {body}"


def _demand(demand: PositionDemand) -> str:
    quadrants = demand.quadrants
    label = quadrants.label if isinstance(quadrants, QuadrantSet) else "?"
    off, on = _range(demand.off_voltage), _range(demand.on_current)
    return f"demand {demand.position} off {off} on {on} {label}"


def _range(span: Interval | Unknown) -> str:
    if isinstance(span, Unknown):
        return "?"
    return f"[{span.low:.6g}, {span.high:.6g}]"


def _number(value: float | Unknown) -> str:
    return "?" if isinstance(value, Unknown) else f"{value:.6g}"


def _leg(leg: Leg) -> str:
    sides = f"high {' '.join(leg.high) or '-'} low {' '.join(leg.low) or '-'}"
    others = f" others {' '.join(leg.others)}" if leg.others else ""
    rails = " ".join(leg.rails)
    return f"leg {leg.name} {leg.kind} rails {rails} {sides}{others} levels {leg.levels}"
