"""Rectifiers of one core that conduct together: how the core's current splits between them.

    two outputs at 12 V, 3 A and 50 mA     D2 and D3 conduct for the same (1 - D) of a period

No single state shows it, since either diode alone could carry the whole current x. But the
capacitors carry no DC, so each diode's mean m is its output's draw; conducting for the same time
the diodes have the shares r = (m / c) / sum(m / c) of x, where c is the turns ratio. While it
conducts a diode's mean is then m / (1 - D), to which its share of the ripple adds. In common
practice this is how a multiple-output flyback is designed; leakage inductances move the split
within the conduction time.
"""

import math
from collections.abc import Mapping, Sequence
from itertools import permutations

from rulecheck.demand.analysis import Worked
from rulecheck.demand.core_current import CoreCurrent, States, core_current, largest_share
from rulecheck.demand.demands import PositionDemand, Witness
from rulecheck.demand.evaluate import quadrants_of
from rulecheck.demand.readings import inequalities
from rulecheck.demand.states import RawState
from rulecheck.demand.stiff import Box, tightened
from rulecheck.values import AffineForm, Interval, QuadrantSet
from rulecheck.values.record import Record, replace

_MAGNETISING = "i(magnetising "
_NEARLY = 0.2
"""Part of the stated voltages by which these may miss the turns ratio and still be tied: they are
nominal, and diode drops and cross-regulation part them (common practice)."""
_Demands = Mapping[str, PositionDemand]


class _Rectifier(Record):
    """A diode that in all its states carries `turns` times one core's magnetising current."""

    name: str
    current: str
    turns: float
    beside: frozenset[frozenset[str]]
    """What else is on in its states."""


def with_shares(
    found: _Demands, worked: Worked, index: int, box: Box
) -> tuple[dict[str, PositionDemand], tuple[str, ...]]:
    """The demands of a group with the currents of rectifiers that share, and what was assumed.

    Unchanged where a mean is not known or zero, or where the voltages are not tied. `box` holds
    the variables of the group's states.
    """
    demands, assumed = dict(found), []
    states = _nearly_feasible(worked, index, box)
    for sharing in _classes(_rectifiers(worked, index, states), states):
        members = frozenset(rectifier.name for rectifier in sharing)
        core = core_current(sharing[0].current, members, worked, index, states)
        means = [_mean(rectifier, worked) for rectifier in sharing]
        known = [mean for mean in means if mean is not None and mean.high > 0.0]
        if core is None or len(known) < len(sharing):
            continue
        highs = _highs(sharing, known, core)
        names = ", ".join(r.name for r in sharing[:-1]) + f" and {sharing[-1].name}"
        name = sharing[0].current.removeprefix(_MAGNETISING).removesuffix(")")
        note = f"how leakage inductances move the current of {name} between {names}"
        for rectifier in sharing:
            span = Interval(_low(rectifier, sharing, highs, core), highs[rectifier.name])
            on = _on_together(sharing, worked, index)
            changed = _limited(demands[rectifier.name], rectifier, span, on, worked.box)
            demands[rectifier.name] = replace(changed, not_covered=(*changed.not_covered, note))
        assumed.append(f"{names} share the current of {name} in proportion to their mean currents")
    return demands, tuple(assumed)


def _nearly_feasible(worked: Worked, index: int, box: Box) -> list[tuple[RawState, Box]]:
    """The group's states, with those that only a small difference of stated voltages forbids."""
    cluster, amended = worked.topology.clusters[index], worked.reading.amended
    found = []
    for state in worked.reading.states[index]:
        forms = inequalities(cluster, state, amended)
        narrowed = tightened(box, [form + _slack(form, box) for form in forms])
        if narrowed is not None:
            found.append((state, narrowed))
    return found


def _slack(form: AffineForm, box: Box) -> AffineForm:
    if not form.names or not all(name.startswith("v(") for name in form.names):
        return AffineForm()
    largest = max(abs(c) * box.ranges[name].magnitude for name, c in form.terms)
    return AffineForm((), _NEARLY * largest if math.isfinite(largest) else 0.0)


def _rectifiers(worked: Worked, index: int, states: States) -> list[_Rectifier]:
    cluster = worked.topology.clusters[index]
    found = []
    for link in cluster.positions:
        if link.name in cluster.gated or link.name in worked.reading.amended:
            continue
        mine = [state for state, _ in states if link.name in state.on]
        forms = {state.solution.on_currents[link.name] for state in mine}
        form = forms.pop() if len(forms) == 1 else AffineForm()
        if len(form.terms) == 1 and form.names[0].startswith(_MAGNETISING) and not form.constant:
            beside = frozenset(frozenset(state.on) - {link.name} for state in mine)
            found.append(_Rectifier(link.name, *form.terms[0], beside))
    return found


def _classes(rectifiers: Sequence[_Rectifier], states: States) -> list[list[_Rectifier]]:
    """Those that carry one current beside the same positions, their voltages tied pairwise."""
    classes: dict[tuple[str, frozenset[frozenset[str]]], list[_Rectifier]] = {}
    for rectifier in rectifiers:
        classes.setdefault((rectifier.current, rectifier.beside), []).append(rectifier)
    return [
        members
        for members in classes.values()
        if len(members) > 1 and all(_tied(a, b, states) for a, b in permutations(members, 2))
    ]


def _tied(first: _Rectifier, second: _Rectifier, states: States) -> bool:
    """True where the second nearly has no voltage while the first conducts, both outputs DC."""
    for state, box in states:
        if first.name not in state.on:
            continue
        form = state.solution.off_voltages.get(second.name)
        if form is None:
            return False
        span, slack = box.range_of(form), _slack(form, box).constant
        if span.low > slack or span.high < -slack:
            return False
        spans = [box.ranges[name] for name in form.names]
        if any(span.low < 0.0 < span.high for span in spans):
            return False
    return True


def _mean(rectifier: _Rectifier, worked: Worked) -> Interval | None:
    """Its mean as a part of the magnitude of the core's current; None where that is not known."""
    form = worked.means.branches.get(rectifier.name)
    if form is None or not set(form.names) <= worked.box.ranges.keys():
        return None
    span = worked.box.range_of(form).scaled(1.0 / rectifier.turns)
    if worked.box.ranges[rectifier.current].low < 0.0:
        span = -span
    return span if span.bounded and span.low >= 0.0 else None


def _highs(
    sharing: Sequence[_Rectifier], means: Sequence[Interval], core: CoreCurrent
) -> dict[str, float]:
    """The largest magnitude of each one's current, amperes."""
    least = sum(mean.low for mean in means)
    highs = {}
    for rectifier, mean in zip(sharing, means, strict=True):
        share = mean.high / (mean.high + least - mean.low)
        highs[rectifier.name] = abs(rectifier.turns) * largest_share(share, mean.high, core)
    return highs


def _low(
    rectifier: _Rectifier,
    sharing: Sequence[_Rectifier],
    highs: Mapping[str, float],
    core: CoreCurrent,
) -> float:
    """What the others at most leave to it of the core's smallest current."""
    others = [r for r in sharing if r is not rectifier]
    taken = sum(highs[r.name] / abs(r.turns) for r in others)
    return max(0.0, min((core.span.low - taken) * abs(rectifier.turns), highs[rectifier.name]))


def _on_together(sharing: Sequence[_Rectifier], worked: Worked, index: int) -> tuple[str, ...]:
    beside = min(sharing[0].beside, key=sorted)
    on = beside | {rectifier.name for rectifier in sharing}
    return tuple(p.name for p in worked.topology.clusters[index].positions if p.name in on)


def _limited(
    demand: PositionDemand,
    rectifier: _Rectifier,
    magnitude: Interval,
    on: tuple[str, ...],
    box: Box,
) -> PositionDemand:
    before = demand.on_current
    if not isinstance(before, Interval):
        return demand
    positive = (rectifier.turns > 0.0) == (box.ranges[rectifier.current].low >= 0.0)
    span = magnitude if positive else -magnitude
    span = Interval(float(f"{span.low:.12g}"), float(f"{span.high:.12g}"))
    off, quadrants = demand.off_voltage, demand.quadrants
    if isinstance(off, Interval) and isinstance(quadrants, QuadrantSet):
        quadrants = quadrants_of(off, span)
    low, high = (_witness(rectifier, span, end, on, box) for end in (False, True))
    return replace(demand, on_current=span, quadrants=quadrants, on_low=low, on_high=high)


def _witness(
    rectifier: _Rectifier, span: Interval, high: bool, on: tuple[str, ...], box: Box
) -> Witness:
    """The part of the core's current that makes the end, at the end of that current's range."""
    value = span.high if high else span.low
    core = box.ranges[rectifier.current]
    at = core.high if (rectifier.turns > 0.0) == high else core.low
    form = AffineForm.of({rectifier.current: value / at if at else 0.0})
    return Witness(value, on, form, box.corner_of(form, high))
