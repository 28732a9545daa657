"""Rms current and ripple voltage of capacitors, bank by bank."""

from collections.abc import Iterable, Mapping

import numpy as np

from rulecheck.demand.routes import Route
from rulecheck.demand.waveforms import pieces
from rulecheck.demand.waveforms.banks import (
    Bank,
    Feed,
    Feeds,
    branch_feeds,
    closed,
    find_banks,
    into_nets,
    position_feeds,
    shares_of,
    without_mean,
)
from rulecheck.demand.waveforms.combining import combined
from rulecheck.demand.waveforms.explore import explore
from rulecheck.demand.waveforms.modulation import swing_over_a_cycle
from rulecheck.demand.waveforms.operating import Values
from rulecheck.demand.waveforms.pieces import Array
from rulecheck.demand.waveforms.records import CapacitorWaves, Derived
from rulecheck.demand.waveforms.scene import Scene
from rulecheck.demand.waveforms.setting import Setting, frequency_of, joined_groups
from rulecheck.demand.waveforms.systems import System, build_system
from rulecheck.demand.waveforms.windings import WindingShares, winding_shares
from rulecheck.stage import Branch
from rulecheck.values import Unknown, variable
from rulecheck.values.record import Record

_SHARED = "capacitors side by side share their current by capacitance; ports supply steady currents"


class _Around(Record):
    """What is at a bank's nets."""

    positions: tuple[Feed, ...]
    branches: tuple[Feed, ...]
    windings: WindingShares
    groups: frozenset[int]


class _Whole(Record):
    """What the whole stage has, indexed once for all banks."""

    positions: Feeds
    currents: Feeds
    ports: Feeds
    groups: Mapping[str, frozenset[int]]
    """By link: the groups that it is in."""


def _whole(setting: Setting) -> _Whole:
    stage = setting.worked.stage
    groups: dict[str, set[int]] = {}
    for index, cluster in enumerate(setting.worked.topology.clusters):
        for link in cluster.links:
            groups.setdefault(link.name, set()).add(index)
    currents, ports = branch_feeds(stage, setting.alternating)
    found = {name: frozenset(members) for name, members in groups.items()}
    return _Whole(position_feeds(stage), currents, ports, found)


def bank_waves(setting: Setting) -> tuple[dict[str, CapacitorWaves], tuple[str, ...]]:
    """By capacitor, and what was assumed where anything could be worked out."""
    found: dict[str, CapacitorWaves] = {}
    whole = _whole(setting)
    for bank in find_banks(setting.worked.stage):
        found |= _waves_of(bank, setting, whole)
    known = any(not isinstance(one.rms.range, Unknown) for one in found.values())
    return found, (_SHARED,) if known else ()


def _waves_of(bank: Bank, setting: Setting, whole: _Whole) -> dict[str, CapacitorWaves]:
    around = _around(bank, setting, whole)
    open_ = [b for b in bank.capacitors if not b.value]
    if open_:
        name = open_[0].name
        return _without(bank, Unknown(f"capacitance of {name}", f"value of {name}"))
    if not around.windings.determined:
        return _without(bank, Unknown("how windings share their current", "one winding a bank"))
    parts: list[tuple[System, dict[str, Derived]]] = []
    for indices in _apart(setting, around):
        forms = [variable(feed.name) for feed in around.branches if _seen(setting, feed, indices)]
        system = build_system(setting, indices, forms)
        if isinstance(system, Unknown):
            return _without(bank, system)
        measured = _measured(bank, system, around)
        if isinstance(measured, Unknown):
            return _without(bank, measured)
        parts.append((system, measured))
    return {
        branch.name: CapacitorWaves(
            combined(setting, bundle, branch, parts, "rms"),
            combined(setting, bundle, branch, parts, "ripple"),
            bundle.share(branch),
        )
        for bundle in bank.bundles
        for branch in bundle.members
    }


def _around(bank: Bank, setting: Setting, whole: _Whole) -> _Around:
    stage, inside = setting.worked.stage, set(bank.nets)
    positions = whole.positions.at(inside)
    branches = [*whole.currents.at(inside), *whole.ports.at(inside)]
    cores = [c for c in stage.transformers if inside & {n for pair in c.windings for n in pair}]
    names = {feed.name for feed in positions} | {part for core in cores for part in core.parts}
    groups = {k for name in names for k in whole.groups.get(name, ())}
    for feed in branches:
        groups |= _groups_of(setting, feed.name)
    return _Around(
        tuple(positions), tuple(branches), winding_shares(stage, cores), frozenset(groups)
    )


def _groups_of(setting: Setting, name: str) -> set[int]:
    carrier, route = setting.routes.get(name, (None, Route(variable(name), ())))
    return {step.cluster for step in route.steps} if carrier is not None and carrier.part else set()


def _seen(setting: Setting, feed: Feed, indices: Iterable[int]) -> bool:
    groups = _groups_of(setting, feed.name)
    return bool(groups) and groups <= set(indices)


def _apart(setting: Setting, around: _Around) -> list[tuple[int, ...]]:
    """The groups around a bank, together where their timing is known to each other."""
    chains = [sorted(_groups_of(setting, feed.name)) for feed in around.branches]
    chains += [sorted(sines.legs.keys() & around.groups) for sines in setting.sines]
    modulated = {k for sines in setting.sines for k in sines.legs}
    by_frequency: dict[float, list[int]] = {}
    for k in sorted(around.groups - modulated):
        if k in setting.delays:
            by_frequency.setdefault(frequency_of(setting.worked, k), []).append(k)
    return joined_groups(around.groups, [*chains, *by_frequency.values()])


def _measured(bank: Bank, system: System, around: _Around) -> dict[str, Derived] | Unknown:
    failed: list[bool] = []

    def measure(values: Values) -> list[Mapping[str, Array]]:
        found: list[Mapping[str, Array]] = []
        for scene in system.scenes(values):
            one = _in_scene(bank, system, around, scene)
            failed.append(one is None)
            found.append(one or {})
        return found

    derived = explore(system.space, measure, system.missing)
    if any(failed):
        return Unknown("the way of the current back", "one port or source at this bank")
    return derived


def _in_scene(bank: Bank, system: System, around: _Around, scene: Scene) -> dict[str, Array] | None:
    indices, setting = set(system.indices), system.setting
    own = {link.name for k in indices for link in setting.pairs[k].cluster.links}
    positions = [feed for feed in around.positions if feed.name in own]
    branches = [
        feed
        for feed in around.branches
        if _seen(setting, feed, indices)
        or (system.sines is not None and feed.name in system.sines.names)
    ]
    windings = around.windings if any(c in own for c in _winding_parts(setting)) else _NO_WINDINGS
    into = into_nets(bank, scene, positions, branches, windings)
    alternating = {net: without_mean(current, scene) for net, current in into.items()}
    balanced = closed(bank, setting.worked.stage, alternating)
    if balanced is None:
        return None
    found: dict[str, Array] = {}
    for name, (first, last) in shares_of(bank, balanced).items():
        square = pieces.mean_square(first, last, scene.shares, scene.weights)
        found[f"{name} rms"] = np.sqrt(square)
        found[f"{name} ripple"] = _ripple(first, last, scene, system)
    return found


_NO_WINDINGS = WindingShares((), (), (), {}, True, frozenset())


def _winding_parts(setting: Setting) -> list[str]:
    return [part for core in setting.worked.stage.transformers for part in core.parts]


def _ripple(first: Array, last: Array, scene: Scene, system: System) -> Array:
    """Charge, peak to peak: within a switching period, and over the fundamental cycle."""
    steady = (scene.shares * (first + last) / 2).sum(axis=-1, keepdims=True)
    swing = pieces.swing_of_integral(first - steady, last - steady, scene.shares)
    charge = swing.max(axis=-1) / scene.frequency
    if system.sines is None:
        return np.asarray(charge)
    span = swing_over_a_cycle(steady[..., 0])
    span = np.where(span > 1e-6 * max(1.0, float(np.nanmax(np.abs(first)))), span, 0.0)
    line = system.sines.port.frequency
    lowest = line.low if line is not None else 0.0
    with np.errstate(divide="ignore", invalid="ignore"):
        slowest = np.where(span > 0.0, span / lowest, 0.0)
    return np.asarray(charge + slowest)


def _without(bank: Bank, lacking: Unknown) -> dict[str, CapacitorWaves]:
    found = {}
    for bundle in bank.bundles:
        known = all(branch.value for branch in bundle.members)
        for branch in bundle.members:
            what = f"current of {branch.name} over time, for want of {lacking.what}"
            open_ = Derived(Unknown(what, lacking.settle))
            share = bundle.share(branch) if known else _unknown_share(branch)
            found[branch.name] = CapacitorWaves(open_, open_, share)
    return found


def _unknown_share(branch: Branch) -> Unknown:
    return Unknown(f"capacitance beside {branch.name}", "values of the capacitors beside it")
