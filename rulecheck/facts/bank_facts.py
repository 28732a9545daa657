"""Facts of capacitor banks: what they hold, how they lose it, how they are charged.

C15 | C16 between BUS and PGND      one bank, named after C15
"""

import math
from collections.abc import Callable, Iterable, Sequence

from rulecheck.demand import CapacitorBank, Discharge
from rulecheck.facts.facts import Bounds, Subject, Value
from rulecheck.facts.inputs import Inputs, stated_number
from rulecheck.facts.terms import SubjectTerm, count, link, number, span_of, text, yes_no
from rulecheck.facts.waveform_facts import capacitor_values
from rulecheck.parts import Kind, Part
from rulecheck.stage import Port
from rulecheck.values import Dimension, Interval, Unknown
from rulecheck.values.record import Record

V, A, S, OHM = Dimension.VOLTAGE, Dimension.CURRENT, Dimension.TIME, Dimension.RESISTANCE

BANK = SubjectTerm(
    "bank",
    "The capacitors of the power stage between the same two nets.",
    (
        count("capacitors", "How many they are."),
        span_of("voltage", V, "Its voltage, first net over second."),
        number("largest-voltage", V, "The largest magnitude of its voltage."),
        yes_no("alternating", "Its voltage takes both signs."),
        number("capacitance", Dimension.CAPACITANCE, "Of all its capacitors together."),
        number("energy", Dimension.ENERGY, "C V^2 / 2 at the largest voltage."),
        number("charge", Dimension.CHARGE, "C V at the largest voltage."),
        number("ripple-voltage", V, "Its largest ripple, peak to peak."),
        number("rated-voltage", V, "The smallest rated voltage of its capacitors."),
        yes_no("polarised", "One of its capacitors is an electrolytic or tantalum one."),
        yes_no("bled", "Resistors discharge it below 60 V once everything is off."),
        number("time-to-60-volt", S, "How long that takes from its largest voltage."),
        number("time-to-34-volt", S, "How long resistors take to 34 V."),
        number("time-to-37-percent", S, "How long resistors take to 37 % of its voltage."),
        yes_no("actively-discharged", "A switch can put a resistor across it."),
        yes_no("at-midpoint", "It is half of a split bus whose midpoint carries a load."),
        count("in-series", "How many banks share one voltage, only resistors between them."),
        number("string-voltage", V, "The largest voltage across all of them."),
        yes_no("balanced", "A resistor of its own lies across it."),
        number("balance-resistance", OHM, "The resistance across it."),
        text("fed-by", "What a port at its nets says of its source; empty where none does."),
        yes_no("at-source", "Only wires, fuses or rectifiers join it to a source with a voltage."),
        yes_no("charged-at-once", "A battery, mains or rectifier that is connected charges it."),
        yes_no("inrush-limited", "An inrush limiter or a bridged resistor lies between them."),
        number("precharge-resistance", OHM, "The resistance that limits its first charging."),
        number("precharge-current", A, "The largest voltage over that resistance."),
        number("precharge-energy-rating", Dimension.ENERGY, "What that resistor takes at once."),
    ),
    (
        link("members", "capacitor", "Its capacitors."),
        link("fuses", "part", "Fuses and breakers between it and its source."),
    ),
)
_BREAKERS = (Kind.FUSE, Kind.CIRCUIT_BREAKER)
_LIMITERS = (Kind.NTC,)
_STIFF = ("battery", "mains")
_POLARISED = ("electrolytic", "tantalum")


class _Way(Record):
    """What lies between a bank and a port on the same merged nets."""

    port: Port
    limiters: tuple[Part, ...]
    fuses: tuple[Part, ...]


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    return tuple(_bank(inputs, bank) for bank in inputs.demands.banks.banks)


def _bank(inputs: Inputs, bank: CapacitorBank) -> Subject:
    ways = list(_ways(inputs, bank))
    size = bank.voltage if isinstance(bank.voltage, Unknown) else bank.voltage.magnitude
    sources = [way.port.source for way in ways if way.port.source]
    values: dict[str, Value] = {
        "capacitors": float(len(bank.members)),
        "voltage": bank.voltage,
        "largest-voltage": size,
        "alternating": _alternates(bank.voltage),
        "capacitance": bank.farad,
        "energy": _times(bank.farad, size, lambda c, v: c * v * v / 2),
        "charge": _times(bank.farad, size, lambda c, v: c * v),
        "ripple-voltage": capacitor_values(inputs, bank.name)["ripple-voltage"],
        "rated-voltage": _least(inputs, bank.members, "ratings.voltage"),
        "polarised": any(
            inputs.part_by_name[name].facts.get("ratings.dielectric") in _POLARISED
            for name in bank.members
        ),
        **_discharged(bank),
        "actively-discharged": _actively(inputs, bank),
        "at-midpoint": _at_midpoint(inputs, bank),
        "in-series": float(bank.in_series),
        "string-voltage": bank.string_voltage,
        "fed-by": sources[0] if sources else "",
        "at-source": bool(ways),
        "charged-at-once": any(
            way.port.source in _STIFF or way.port.kind.value != "dc" for way in ways
        ),
        **_charged(ways, size),
    }
    nets = (bank.start, bank.end)
    fuses = tuple(dict.fromkeys(part.name for way in ways for part in way.fuses))
    links = {"members": bank.members, "fuses": fuses}
    span, related = inputs.span_of_parts(bank.members), inputs.related_spans(bank.members)
    return Subject("bank", bank.name, values, links, bank.members, nets, span, related)


def _alternates(voltage: Interval | Unknown) -> Value:
    if isinstance(voltage, Unknown):
        return voltage
    return voltage.low < -0.02 * voltage.magnitude and voltage.high > 0.02 * voltage.magnitude


def _times(
    farad: float | Unknown, volts: float | Unknown, product: Callable[[float, float], float]
) -> Value:
    if isinstance(farad, Unknown):
        return farad
    return volts if isinstance(volts, Unknown) else float(product(farad, volts))


def _least(inputs: Inputs, names: Sequence[str], path: str) -> Value:
    stated = [stated_number(inputs.part_by_name[name], path) for name in names]
    known = [value for value in stated if isinstance(value, float)]
    missing = tuple(value for value in stated if isinstance(value, Unknown))
    if not missing:
        return min(known)
    return Bounds(Interval(0.0, min(known)), missing) if known else missing[0]


def _discharged(bank: CapacitorBank) -> dict[str, Value]:
    lost = bank.discharge
    names = ("time-to-60-volt", "time-to-34-volt", "time-to-37-percent", "balance-resistance")
    if isinstance(lost, Discharge):
        times = (lost.to_60_volt, lost.to_34_volt, lost.to_37_percent, lost.resistance)
        own: dict[str, Value] = dict(zip(names, times, strict=True))
        return {**own, "bled": math.isfinite(times[0]), "balanced": math.isfinite(times[3])}
    return dict.fromkeys((*names, "bled", "balanced"), lost)


def _actively(inputs: Inputs, bank: CapacitorBank) -> bool:
    """A resistor from one of its nets to a net from which a gated position leads to the other."""
    ends = {bank.start, bank.end}
    loads = [b for b in inputs.stage.branches if b.kind.value == "resistor" and b.part]
    for load in loads:
        for near, far in ((load.start, load.end), (load.end, load.start)):
            others = ends - {near}
            if near in ends and far not in ends and _gated_between(inputs, far, others):
                return True
    return False


def _gated_between(inputs: Inputs, net: str, others: Iterable[str]) -> bool:
    return any(
        p.gated and net in (p.start, p.end) and set(others) & {p.start, p.end}
        for p in inputs.stage.positions
    )


def _at_midpoint(inputs: Inputs, bank: CapacitorBank) -> bool:
    """Another bank goes on from it in the same sense, both together between a leg's rails, and the
    net between them is neither the ground nor idle."""
    rails = {frozenset((leg.rails[0], leg.rails[-1])) for leg in inputs.demands.legs}
    for other in inputs.demands.banks.banks:
        shared = {bank.start, bank.end} & {other.start, other.end}
        if len(shared) != 1 or shared & inputs.grounds or bank.in_series > 1:
            continue
        outer = frozenset({bank.start, bank.end, other.start, other.end} - shared)
        if outer in rails and _chained(bank, other):
            return True
    return False


def _chained(bank: CapacitorBank, other: CapacitorBank) -> bool:
    """Where one ends the other begins, from the higher potential to the lower."""
    tops, bottoms = (_higher(bank), _higher(other)), (_lower(bank), _lower(other))
    return tops[0] == bottoms[1] or tops[1] == bottoms[0]


def _higher(bank: CapacitorBank) -> str:
    positive = isinstance(bank.voltage, Unknown) or bank.voltage.middle >= 0.0
    return bank.start if positive else bank.end


def _lower(bank: CapacitorBank) -> str:
    return bank.end if _higher(bank) == bank.start else bank.start


def _ways(inputs: Inputs, bank: CapacitorBank) -> Iterable[_Way]:
    """Ports with a voltage on its nets, or before it through nothing but diodes."""
    for port in inputs.stage.ports:
        if port.voltage is None or len(port.nets) < 2:
            continue
        direct = {bank.start, bank.end} == set(port.nets[:2]) and len(port.nets) == 2
        if direct or _rectified(inputs, port, bank):
            nets = set(port.nets)
            around = [
                part
                for part in inputs.stage.parts.parts
                if len(part.nets) >= 2 and {inputs.merged(net) for net in part.nets[:2]} <= nets
            ]
            fuses = tuple(part for part in around if part.kind in _BREAKERS)
            yield _Way(port, _limiters(inputs, around), fuses)


def _rectified(inputs: Inputs, port: Port, bank: CapacitorBank) -> bool:
    """Diodes alone lead from a phase of an AC port to the bank."""
    if port.kind.value == "dc":
        return False
    into = {p.end for p in inputs.stage.positions if not p.gated and p.start in port.nets}
    into |= {p.start for p in inputs.stage.positions if not p.gated and p.end in port.nets}
    return {bank.start, bank.end} <= into


def _limiters(inputs: Inputs, around: Iterable[Part]) -> tuple[Part, ...]:
    """Inrush limiters, and resistors that a wire such as a relay's contact bridges."""
    return tuple(
        part
        for part in around
        if part.kind in _LIMITERS
        or (
            part.kind is Kind.RESISTOR
            and len({inputs.merged(net) for net in part.nets}) == 1
            and not isinstance(part.value, Unknown)
            and part.value > 0.1
        )
    )


def _charged(ways: Sequence[_Way], volts: float | Unknown) -> dict[str, Value]:
    limiters = [part for way in ways for part in way.limiters]
    limited = bool(ways) and all(way.limiters for way in ways)
    none = Unknown("the resistance that limits charging", "a resistor or inrush limiter")
    ohms = [part.value for part in limiters if isinstance(part.value, float)]
    ohm: Value = min(ohms) if ohms and limited else none
    current: Value = none
    if isinstance(ohm, float):
        current = volts if isinstance(volts, Unknown) else volts / ohm
    rating: Value = stated_number(limiters[0], "ratings.energy") if limited else none
    return {
        "inrush-limited": limited,
        "precharge-resistance": ohm,
        "precharge-current": current,
        "precharge-energy-rating": rating,
    }
