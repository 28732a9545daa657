"""What all systems of a stage share: pairs of states, sines, routes, frequencies and delays."""

from collections.abc import Iterable, Mapping, Sequence

from rulecheck.demand.analysis import Worked
from rulecheck.demand.routes import Carrier, Route
from rulecheck.demand.unions import Unions
from rulecheck.demand.waveforms.modulation import Sines, find_sines
from rulecheck.demand.waveforms.timing import Pair, pair_of
from rulecheck.stage import PortKind
from rulecheck.values.record import Record

_SAME_PERIOD = 0.01
"""Share by which a command's period may differ from the switching period."""


class Setting(Record):
    """What all systems of a stage share."""

    worked: Worked
    pairs: Mapping[int, Pair]
    sines: Sequence[Sines]
    routes: Mapping[str, tuple[Carrier, Route]]
    settle: Mapping[str, str]
    alternating: frozenset[str]
    """The variables of AC ports."""
    delays: Mapping[int, float]
    """By group: when its first state begins, as a share of the period, where that is known."""


def build_setting(worked: Worked, settle: Mapping[str, str]) -> Setting:
    count = len(worked.topology.clusters)
    pairs = {k: pair for k in range(count) if (pair := pair_of(worked, k)) is not None}
    sines = find_sines(worked.stage.ports, pairs, worked.box)
    alternating = frozenset(
        name
        for name in worked.box.ranges
        for port in worked.stage.ports
        if port.kind is not PortKind.DC
        and name in (f"i({port.name})", f"v({port.name})", *_phase_names(port.name, port.nets))
    )
    routes = {carrier.name: (carrier, route) for carrier, route in worked.routes}
    return Setting(worked, pairs, sines, routes, settle, alternating, _delays(worked, pairs))


def joined_groups(members: Iterable[int], chains: Iterable[Sequence[int]]) -> list[tuple[int, ...]]:
    """The groups in classes: those of one chain are in one class."""
    joined = Unions(map(str, sorted(members)))
    for chain in chains:
        for other in chain[1:]:
            joined.join(str(chain[0]), str(other))
    return [tuple(map(int, group)) for group in joined.classes()]


def _phase_names(port: str, nets: Iterable[str]) -> list[str]:
    return [f"{letter}({port}/{net})" for letter in "iv" for net in nets]


def frequency_of(worked: Worked, index: int) -> float:
    """Of a group, hertz; 0 where nobody states it."""
    stage = worked.stage
    nets = {net for link in worked.topology.clusters[index].positions for net in link.nets}
    own = [
        switching.frequency
        for net, switching in stage.leg_switching.items()
        if net in nets and switching.frequency
    ]
    return min(own, default=stage.switching.frequency or 0.0)


def _delays(worked: Worked, pairs: Mapping[int, Pair]) -> dict[int, float]:
    stage = worked.stage
    found: dict[int, float] = {}
    for index, pair in pairs.items():
        stated = stage.leg_switching.get(pair.midpoint)
        parts = [
            part
            for link in pair.cluster.positions
            if link.position and link.name in set(pair.first.on) & pair.cluster.gated
            for part in link.position.parts
        ]
        begins = _begin(worked, index, parts)
        if stated is not None and stated.phase is not None:
            found[index] = stated.phase / 360.0
        elif begins is not None:
            found[index] = begins
    return found


def _begin(worked: Worked, index: int, parts: Iterable[str]) -> float | None:
    """When the one on-time of a commanded gate begins, as a share of the switching period."""
    commands = worked.stage.gate_commands
    command = next((commands[p] for p in parts if p in commands), None)
    frequency = frequency_of(worked, index)
    if command is None or not command.repeats or command.may_begin_later:
        return None
    if abs(command.period * frequency - 1.0) > _SAME_PERIOD:
        return None
    spans = command.on
    wraps = len(spans) == 2 and spans[0].low <= 0.0 and spans[1].high >= command.period
    if len(spans) != 1 and not wraps:
        return None
    return spans[-1].low / command.period


def delay_line(setting: Setting, indices: Iterable[int]) -> str:
    nets = [setting.pairs[k].midpoint for k in indices if k in setting.pairs]
    legs = ", ".join(f"{net}: {{phase: ...}}" for net in nets)
    return f"switching: {{legs: {{{legs}}}}}"
