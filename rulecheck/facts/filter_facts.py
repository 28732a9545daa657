"""Facts of filters: an inductor and the capacitors at its quiet end.

SW - L1 - OUT, C2 at OUT            corner 1 / (2 pi root(L C)), C of the bank at OUT
two inductors into one bank         one filter: their inductances side by side
OUT - L2 - GRID behind it           LCL: resonance root((L1 + L2) / (L1 L2 C)) / (2 pi)
"""

import math
from collections.abc import Iterable, Mapping

from rulecheck.demand import CapacitorBank
from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.inputs import Inputs
from rulecheck.facts.terms import SubjectTerm, link, number, yes_no
from rulecheck.parts import Kind
from rulecheck.stage import Branch, BranchKind, Port, PortKind
from rulecheck.values import Dimension, Unknown
from rulecheck.values.record import Record

HZ, NUMBER = Dimension.FREQUENCY, Dimension.NUMBER

FILTER = SubjectTerm(
    "filter",
    "Inductors from switched nets and the capacitors at their common quiet end.",
    (
        number("inductance", Dimension.INDUCTANCE, "Of its inductors side by side."),
        number("capacitance", Dimension.CAPACITANCE, "Of its capacitors."),
        number("corner", HZ, "1 / (2 pi root(L C))."),
        number("switching-frequency", HZ, "The lowest of the legs before it."),
        number("fundamental", HZ, "The highest frequency of its AC port; 0 for DC."),
        yes_no("alternating", "An AC port stands behind it."),
        yes_no("damped", "A resistor in series with a capacitor, or an electrolytic, damps it."),
        yes_no("third-order", "A further inductor leads on from its capacitors (LCL)."),
        number("resonance", HZ, "Of both inductors with the capacitors, where it is LCL."),
        number("reactive-share", NUMBER, "Its reactive current over its port's, both largest."),
    ),
    (
        link("inductors", "inductor", "Its inductors before the capacitors."),
        link("members", "capacitor", "Its capacitors."),
    ),
)


class _Filter(Record):
    coils: tuple[Branch, ...]
    quiet: str
    bank: CapacitorBank
    beyond: tuple[Branch, ...]


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    return tuple(_filter(inputs, found) for found in _find(inputs))


def _find(inputs: Inputs) -> Iterable[_Filter]:
    stage = inputs.stage
    switched = {net for p in stage.positions for net in (p.start, p.end)}
    coils = [b for b in stage.branches if b.kind is BranchKind.CURRENT and b.part]
    by_quiet: dict[str, list[Branch]] = {}
    for coil in coils:
        for near, quiet in ((coil.start, coil.end), (coil.end, coil.start)):
            if near in switched and quiet not in switched and quiet not in inputs.grounds:
                by_quiet.setdefault(quiet, []).append(coil)
    for quiet, into in by_quiet.items():
        banks = [b for b in inputs.demands.banks.banks if quiet in (b.start, b.end)]
        if banks:
            bank = max(banks, key=lambda b: b.farad if isinstance(b.farad, float) else math.inf)
            beyond = [c for c in coils if quiet in (c.start, c.end) and c not in into]
            yield _Filter(tuple(into), quiet, bank, tuple(beyond))


def _filter(inputs: Inputs, found: _Filter) -> Subject:
    henry, farad = _parallel(found.coils), found.bank.farad
    port = _port_behind(inputs, found)
    values: dict[str, Value] = {
        "inductance": henry,
        "capacitance": farad,
        "corner": _corner(henry, farad),
        "switching-frequency": _frequency(inputs, found),
        "fundamental": _fundamental(port),
        "alternating": port is not None,
        "damped": _damped(inputs, found),
        "third-order": bool(found.beyond),
        "resonance": _resonance(henry, _parallel(found.beyond), farad),
        "reactive-share": _reactive(port, found.bank),
    }
    parts = (*(coil.part for coil in found.coils), *found.bank.members)
    links: Mapping[str, tuple[str, ...]] = {
        "inductors": tuple(coil.part for coil in found.coils),
        "members": found.bank.members,
    }
    nets = (found.quiet,)
    span, related = inputs.span_of_parts(parts), inputs.related_spans(parts)
    return Subject("filter", found.coils[0].part, values, links, parts, nets, span, related)


def _parallel(coils: Iterable[Branch]) -> float | Unknown:
    total = 0.0
    for coil in coils:
        if not coil.value:
            return Unknown(f"inductance of {coil.part}", f"value of {coil.part}")
        total += 1.0 / coil.value
    return 1.0 / total if total else Unknown("a further inductor", "a filter of third order")


def _corner(henry: float | Unknown, farad: float | Unknown) -> Value:
    if isinstance(henry, Unknown) or isinstance(farad, Unknown):
        return henry if isinstance(henry, Unknown) else farad
    return 1.0 / (2.0 * math.pi * math.sqrt(henry * farad))


def _resonance(first: float | Unknown, second: float | Unknown, farad: float | Unknown) -> Value:
    if isinstance(first, Unknown) or isinstance(second, Unknown):
        return first if isinstance(first, Unknown) else second
    return _corner(first * second / (first + second), farad)


def _frequency(inputs: Inputs, found: _Filter) -> Value:
    stage = inputs.stage
    ends = {net for coil in found.coils for net in (coil.start, coil.end)}
    own = [
        switching.frequency
        for net, switching in stage.leg_switching.items()
        if net in ends and switching.frequency
    ]
    value = min(own, default=stage.switching.frequency)
    return value or Unknown("switching frequency", "switching: {frequency: ...}")


def _port_behind(inputs: Inputs, found: _Filter) -> Port | None:
    """The AC port at the quiet end, straight or behind a further inductor."""
    nets = {found.quiet, *(n for coil in found.beyond for n in (coil.start, coil.end))}
    ports = [p for p in inputs.stage.ports if p.kind is not PortKind.DC and nets & set(p.nets)]
    return ports[0] if ports else None


def _fundamental(port: Port | None) -> Value:
    if port is None:
        return 0.0
    if port.frequency is None:
        where = f"ports: {{{port.name}: {{frequency: ...}}}}"
        return Unknown(f"frequency of port {port.name}", where)
    return port.frequency.high


def _reactive(port: Port | None, bank: CapacitorBank) -> Value:
    if port is None:
        return 0.0
    if port.current is None:
        where = f"ports: {{{port.name}: {{draws: ...}}}}"
        return Unknown(f"current of port {port.name}", where)
    frequency = _fundamental(port)
    if isinstance(bank.voltage, Unknown) or isinstance(bank.farad, Unknown):
        return bank.voltage if isinstance(bank.voltage, Unknown) else bank.farad
    if not isinstance(frequency, float):
        return frequency
    reactive = 2.0 * math.pi * frequency * bank.farad * bank.voltage.magnitude
    return reactive / port.current.magnitude if port.current.magnitude else math.inf


def _damped(inputs: Inputs, found: _Filter) -> bool:
    """An electrolytic's own resistance, an RC branch at the quiet net, or a resistor there."""
    for name in found.bank.members:
        if inputs.part_by_name[name].facts.get("ratings.dielectric") == "electrolytic":
            return True
    for name in inputs.parts_at_net.get(found.quiet, ()):
        part = inputs.part_by_name[name]
        if part.kind is Kind.RESISTOR and not isinstance(part.value, Unknown):
            far = [n for net in part.nets if (n := inputs.merged(net)) != found.quiet]
            beyond = {inputs.part_by_name[p].kind for n in far for p in _at(inputs, n)}
            if part.value < 1e3 and beyond <= {Kind.RESISTOR, Kind.CAPACITOR}:
                return True
    return False


def _at(inputs: Inputs, net: str) -> tuple[str, ...]:
    return inputs.parts_at_net.get(net, ())
