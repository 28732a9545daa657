"""Capacitors between two nets as one: what they hold, and how they lose it."""

from collections.abc import Iterable, Mapping, Sequence

from rulecheck.demand.analysis import Worked
from rulecheck.demand.bank_records import BankFindings, CapacitorBank, Discharge
from rulecheck.demand.discharge import (
    Network,
    discharges,
    resistor_network,
    voltage_of_resistor,
)
from rulecheck.demand.waveforms.banks import Bank, Bundle, find_banks
from rulecheck.parts import Kind
from rulecheck.stage import BranchKind, Stage
from rulecheck.values import Interval, Unknown

Pair = tuple[str, str]


def find_capacitor_banks(worked: Worked) -> BankFindings:
    found: list[CapacitorBank] = []
    bleeders: dict[str, float] = {}
    for bank in find_banks(worked.stage):
        volts = {_pair(bundle): _voltage(worked, bundle) for bundle in bank.bundles}
        network = _network(worked, bank, volts)
        lost = _discharges(bank, volts, network)
        idle = _idle_nets(worked.stage, bank)
        for bundle in bank.bundles:
            found.append(_bank(bank, bundle, volts, lost, idle))
        if isinstance(network, Network):
            bleeders |= _bleeders(worked.stage, network, volts)
    return BankFindings(tuple(found), bleeders)


def _bank(
    bank: Bank,
    bundle: Bundle,
    volts: Mapping[Pair, Interval | Unknown],
    lost: Mapping[Pair, Discharge] | Unknown,
    idle: frozenset[str],
) -> CapacitorBank:
    open_ = next((b.name for b in bundle.members if not b.value), None)
    string = _string(bank, bundle, idle)
    return CapacitorBank(
        bundle.name,
        bundle.start,
        bundle.end,
        tuple(branch.name for branch in bundle.members),
        bundle.farad if open_ is None else Unknown(f"capacitance of {open_}", f"value of {open_}"),
        volts[_pair(bundle)],
        lost if isinstance(lost, Unknown) else lost[_pair(bundle)],
        len(string),
        _sum_of([volts[_pair(one)] for one in string]),
    )


def _pair(bundle: Bundle) -> Pair:
    return bundle.start, bundle.end


def _sum_of(spans: Sequence[Interval | Unknown]) -> float | Unknown:
    total = 0.0
    for span in spans:
        if isinstance(span, Unknown):
            return span
        total += span.magnitude
    return total


def _voltage(worked: Worked, bundle: Bundle) -> Interval | Unknown:
    span = worked.box.range_of(worked.voltages.forms[bundle.name])
    if span.bounded:
        return span
    settle = f"set: {{{bundle.name}: {{voltage: [LOW, HIGH]}}}}"
    return Unknown(f"voltage of {bundle.name}", settle)


def _network(
    worked: Worked, bank: Bank, volts: Mapping[Pair, Interval | Unknown]
) -> Network | Unknown:
    """Unknown where a capacitance or a voltage is: then neither times nor voltages follow."""
    for bundle in bank.bundles:
        span = volts[_pair(bundle)]
        if isinstance(span, Unknown):
            return span
        for branch in bundle.members:
            if not branch.value:
                return Unknown(f"capacitance of {branch.name}", f"value of {branch.name}")
    return resistor_network(worked.stage, bank.nets)


def _discharges(
    bank: Bank, volts: Mapping[Pair, Interval | Unknown], network: Network | Unknown
) -> Mapping[Pair, Discharge] | Unknown:
    if isinstance(network, Unknown):
        return network
    farads = {_pair(bundle): bundle.farad for bundle in bank.bundles}
    return discharges(network, farads, _largest(volts))


def _largest(volts: Mapping[Pair, Interval | Unknown]) -> dict[Pair, float]:
    """With sign: of a voltage that alternates the positive amplitude."""
    found = {}
    for pair, span in volts.items():
        if isinstance(span, Interval):
            found[pair] = span.high if abs(span.high) >= abs(span.low) else span.low
    return found


def _idle_nets(stage: Stage, bank: Bank) -> frozenset[str]:
    """Nets of the bank at which nothing but two sets of capacitors and resistors meet."""
    busy = {net for p in stage.positions for net in (p.start, p.end)}
    own = {branch.name for branch in bank.capacitors}
    busy |= {
        net
        for b in stage.branches
        if b.name not in own and b.kind is not BranchKind.RESISTOR
        for net in (b.start, b.end)
    }
    busy |= {net for core in stage.transformers for pair in core.windings for net in pair}
    busy |= {net for port in stage.ports for net in (*port.nets, port.neutral)}
    busy.add(stage.ground)
    return frozenset(net for net in bank.nets if net not in busy and len(_at(bank, net)) == 2)


def _at(bank: Bank, net: str) -> list[Bundle]:
    return [bundle for bundle in bank.bundles if net in (bundle.start, bundle.end)]


def _string(bank: Bank, bundle: Bundle, idle: frozenset[str]) -> list[Bundle]:
    """The bundle and those in series with it."""
    string, waiting = [bundle], [bundle]
    while waiting:
        one = waiting.pop()
        for net in {one.start, one.end} & idle:
            more = [other for other in _at(bank, net) if other not in string]
            string += more
            waiting += more
    return string


def _bleeders(
    stage: Stage, network: Network, volts: Mapping[Pair, Interval | Unknown]
) -> dict[str, float]:
    potentials = _potentials(network.nets, _largest(volts))
    found = {}
    for part in stage.parts.parts:
        if part.kind is Kind.RESISTOR and len(part.nets) == 2:
            across = voltage_of_resistor(network, [stage.merged[n] for n in part.nets], potentials)
            if across is not None:
                found[part.name] = across
    return found


def _potentials(nets: Iterable[str], volts: Mapping[Pair, float]) -> dict[str, float]:
    """Of the nets that capacitors join, over the first of them."""
    found = {next(iter(nets)): 0.0}
    waiting = dict(volts)
    while waiting:
        pair = next((p for p in waiting if set(p) & found.keys()), None)
        if pair is None:
            break
        across = waiting.pop(pair)
        if pair[0] in found:
            found.setdefault(pair[1], found[pair[0]] - across)
        else:
            found[pair[0]] = found[pair[1]] + across
    return found
