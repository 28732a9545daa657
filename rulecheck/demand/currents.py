"""Ranges of the stiff currents: stated, mean plus ripple, clipped where a diode stops them."""

import math
from collections.abc import Collection, Mapping, Sequence

from rulecheck.demand.evaluate import SMALL
from rulecheck.demand.means import Unknowns, find_means, magnetising_means
from rulecheck.demand.routes import Carrier
from rulecheck.demand.stiff import EVERYTHING, Box
from rulecheck.demand.surroundings import Ripple, Surroundings, ripple_of
from rulecheck.stage import Transformer
from rulecheck.values import AffineForm, Interval, write_quantity
from rulecheck.values.record import Record, replace


class Means(Record):
    """Of the inductors, by variable: the mean as a form, and how it was found."""

    forms: Mapping[str, AffineForm]
    origins: Mapping[str, str]
    rectified: Mapping[str, tuple[AffineForm, ...]]
    """Where a slow rectifier decides: the mean in each of its states."""
    branches: Mapping[str, AffineForm]
    """The mean of every branch and position, by part, that Kirchhoff's law fixes."""


def derive_means(
    unknowns: Unknowns,
    carriers: Sequence[Carrier],
    transformers: Sequence[Transformer],
    rectifier_states: Sequence[frozenset[str]],
) -> Means:
    """Kirchhoff's law on means; then once for each state of the slow rectifiers.

    `rectifier_states` lists the sets of diodes that are off together.
    """
    found = find_means(unknowns)
    found = {**found, **_equal_shares(unknowns, found, carriers)}
    magnetising = magnetising_means(transformers, found)
    forms: dict[str, AffineForm] = {}
    origins: dict[str, str] = {}
    for carrier in carriers:
        form = magnetising.get(carrier.name) or found.get(carrier.part)
        if carrier.port or form is None:
            continue
        if carrier.name in magnetising or carrier.name == f"i({carrier.part})":
            forms[carrier.name] = form
            origins[carrier.name] = f"mean by Kirchhoff's law: {carrier.name} = {form.text()}"
    rectified: dict[str, list[AffineForm]] = {}
    for off in rectifier_states:
        edges = tuple(edge for edge in unknowns.edges if edge[0] not in off)
        means = find_means(replace(unknowns, edges=edges))
        for carrier in carriers:
            if carrier.part in means and carrier.name == f"i({carrier.part})":
                rectified.setdefault(carrier.name, []).append(means[carrier.part])
    kept = {n: tuple(f) for n, f in rectified.items() if n not in forms}
    return Means(forms, origins, kept, found)


def _equal_shares(
    unknowns: Unknowns, means: Mapping[str, AffineForm], carriers: Sequence[Carrier]
) -> dict[str, AffineForm]:
    """Equal inductors that alone feed a net share what it takes evenly (interleaved legs)."""
    inductance = {c.part: c.inductance for c in carriers if c.name == f"i({c.part})"}
    at_net: dict[str, list[tuple[str, int]]] = {}
    for name, start, end in unknowns.edges:
        at_net.setdefault(start, []).append((name, -1))
        at_net.setdefault(end, []).append((name, 1))
    shares: dict[str, AffineForm] = {}
    for net, edges in sorted(at_net.items()):
        names = [name for name, _ in edges]
        values = {inductance.get(name) for name in names}
        if len(edges) < 2 or len(values) > 1 or None in values or means.keys() & set(names):
            continue
        if not _same_rails(unknowns, names, net):
            continue
        total = AffineForm()
        for start, end, form in unknowns.known:
            if start != end and net in (start, end):
                total += form if start == net else -form
        for name, sign in edges:
            shares[name] = total.scaled(sign / len(edges))
    return shares


def _same_rails(unknowns: Unknowns, names: Sequence[str], net: str) -> bool:
    """True where the inductors' far ends are switched between the same two or more nets."""
    far: list[frozenset[str]] = []
    for name in names:
        end = next(e[2] if e[1] == net else e[1] for e in unknowns.edges if e[0] == name)
        around = {e[2] if e[1] == end else e[1] for e in unknowns.edges if end in e[1:]}
        far.append(frozenset(around - {net}))
    return len(set(far)) == 1 and len(far[0]) >= 1


class CurrentRange(Record):
    range: Interval
    ripple: float
    """Half of it, peak to peak, in amperes; infinite where nobody can tell."""
    origin: str
    settled: bool
    """False where not even the sign is known."""
    settle: tuple[str, ...] = ()
    """What would settle the ripple: sheet lines, or variables by name."""


def range_of_current(carrier: Carrier, means: Means, around: Surroundings) -> CurrentRange:
    """The whole instantaneous range of one carrier that nobody states."""
    ripple = ripple_of(carrier, around)
    form = means.forms.get(carrier.name)
    if form is not None:
        mean = around.box.range_of(form)
        origin = means.origins[carrier.name]
    elif carrier.name in means.rectified:
        mean = _hull(around.box, means.rectified[carrier.name])
        origin = f"mean, rectified: {means.rectified[carrier.name][0].text()} or its negative"
    else:
        return _without_mean(carrier, ripple, means, around)
    return _around_mean(carrier, around, mean, ripple, origin)


def _around_mean(
    carrier: Carrier, around: Surroundings, mean: Interval, ripple: Ripple, origin: str
) -> CurrentRange:
    if not ripple.known:
        return _without_ripple(carrier, around, mean, ripple, origin)
    half = ripple.half
    note = f", +- {write_quantity(half, 'A')} of ripple" if half else ripple.note
    span = Interval(mean.low - half, mean.high + half)
    return _clipped(carrier, around, CurrentRange(span, half, origin + note, True))


def _without_ripple(
    carrier: Carrier, around: Surroundings, mean: Interval, ripple: Ripple, origin: str
) -> CurrentRange:
    """Ripple of unknown size: no magnitude is known, and the sign only where it cannot turn."""
    found = CurrentRange(EVERYTHING, ripple.half, origin + ripple.note, False, ripple.settle)
    up, down = (
        around.keeps(carrier.name, EVERYTHING, positive)
        and around.alternates_with(carrier.name, positive)
        for positive in (True, False)
    )
    half = EVERYTHING.part_of_sign(up)
    if up != down and half is not None and half.meet(mean) is not None:
        origin = f"{found.origin}; a diode stops it at zero"
        return replace(found, range=half, origin=origin, settled=True)
    return replace(found, settled=_takes_both_signs(mean))


def _takes_both_signs(mean: Interval) -> bool:
    """True where ripple of any size leaves both signs, neither of them small."""
    small = SMALL * mean.magnitude if mean.bounded else 0.0
    return mean.low <= -small and mean.high >= small


def currents_without_route(
    carriers: Sequence[Carrier],
    found: Mapping[str, CurrentRange],
    stated: Collection[str],
    means: Means,
    box: Box,
) -> dict[str, CurrentRange]:
    """Inductors in series with a port of unknown voltage: a mean, and ripple of unknown size."""
    more: dict[str, CurrentRange] = {}
    for carrier in carriers:
        mean = means.forms.get(carrier.name)
        if carrier.name in found or carrier.name in stated or carrier.port or mean is None:
            continue
        ports = sorted({c.port for c in carriers if c.port and c.name in mean.names})
        settle = tuple(f"ports: {{{port}: {{voltage: ...}}}}" for port in ports)
        origin = (
            f"{means.origins[carrier.name]}, its ripple unknown: no voltage is stated beyond it"
        )
        both = _takes_both_signs(box.range_of(mean))
        more[carrier.name] = CurrentRange(EVERYTHING, math.inf, origin, both, settle)
    return more


def _hull(box: Box, forms: Sequence[AffineForm]) -> Interval:
    span = box.range_of(forms[0])
    for form in forms[1:]:
        span = span.hull(box.range_of(form))
    return span


def _by_positions(carrier: Carrier, means: Means, around: Surroundings) -> Interval | None:
    """The sign, and the least magnitude, from positions that carry this current alone.

    Each one's mean is a share of the current, so the current has the mean's sign and is no
    smaller.
    """
    found: Interval | None = None
    for step in around.route.steps:
        for link in around.reading.clusters[step.cluster].positions:
            span = _alone(carrier, link.name, means, around, step.cluster)
            if span is not None:
                low = span.low if span.low >= 0.0 else -math.inf
                wide = Interval(low, span.high if span.high <= 0.0 else math.inf)
                found = wide if found is None else found.meet(wide) or found
    return found


def _alone(
    carrier: Carrier, position: str, means: Means, around: Surroundings, cluster: int
) -> Interval | None:
    """The mean of a position that in all its states carries a multiple of this current."""
    states = around.reading.states[cluster]
    forms = {s.solution.on_currents[position] for s in states if position in s.on}
    mean = means.branches.get(position)
    if mean is None or len(forms) != 1 or around.box.says_nothing(mean):
        return None
    form = forms.pop()
    if form.names != (carrier.name,):
        return None
    span = around.box.range_of(mean).scaled(1.0 / form.terms[0][1])
    return span if span.bounded else None


def _without_mean(
    carrier: Carrier, ripple: Ripple, means: Means, around: Surroundings
) -> CurrentRange:
    """A magnetising current is its ripple; another current may still have a known sign."""
    flow = _by_positions(carrier, means, around)
    if flow is not None:
        why = "at least the mean current of a position that carries it; magnitude not stated"
        return _around_mean(carrier, around, flow, ripple, why)
    up, down = (around.keeps(carrier.name, EVERYTHING, positive) for positive in (True, False))
    magnetising = carrier.name.startswith("i(magnetising")
    half = ripple.half
    if magnetising and 0.0 < half < math.inf and (up or down):
        low = -half if up and down else 0.0 if up else -2 * half
        high = half if up and down else 2 * half if up else 0.0
        return CurrentRange(Interval(low, high), 0.0, "the ripple of a flux that balances", True)
    settle = ripple.settle if magnetising else ()
    if up != down:
        side = EVERYTHING.part_of_sign(up) or EVERYTHING
        why = "only this sign can be kept; magnitude not stated"
        return CurrentRange(side, 0.0, why, True, settle)
    why = "alternates; magnitude not stated" if around.alternates else "nobody states it"
    return CurrentRange(EVERYTHING, 0.0, why, around.alternates, settle)


def _clipped(carrier: Carrier, around: Surroundings, found: CurrentRange) -> CurrentRange:
    """Discontinuous conduction: where no state can keep a sign, the current stops at zero."""
    span = found.range
    if not around.route.steps or not span.low < 0.0 < span.high:
        return found
    up, down = (around.keeps(carrier.name, span, positive) for positive in (True, False))
    half = span.part_of_sign(up)
    if up == down or half is None:
        return found
    return replace(found, range=half, origin=f"{found.origin}; a diode stops it at zero")
