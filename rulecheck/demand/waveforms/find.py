"""Mean, rms, peak and ripple of everything that carries a switched current."""

import math
from collections.abc import Iterable, Mapping, Sequence

import numpy as np

from rulecheck.demand.analysis import Worked
from rulecheck.demand.waveforms import pieces
from rulecheck.demand.waveforms.bank_waves import bank_waves
from rulecheck.demand.waveforms.explore import explore
from rulecheck.demand.waveforms.operating import Values
from rulecheck.demand.waveforms.pieces import Array
from rulecheck.demand.waveforms.records import Derived, InductorWaves, PositionWaves, Waveforms
from rulecheck.demand.waveforms.scene import Pieces, Scene
from rulecheck.demand.waveforms.setting import Setting, build_setting, joined_groups
from rulecheck.demand.waveforms.systems import System, build_system
from rulecheck.values import Interval, Unknown, point
from rulecheck.values.record import replace

_POSITION = ("mean", "rms", "forward_mean", "forward_rms", "reverse_mean", "reverse_rms")
_COIL = ("mean", "rms", "ripple", "peak")


def find_waveforms(worked: Worked, settle: Mapping[str, str]) -> Waveforms:
    """All waveform quantities of a stage; `settle` says how to state a variable."""
    setting = build_setting(worked, settle)
    positions: dict[str, PositionWaves] = {}
    inductors: dict[str, InductorWaves] = {}
    for indices in _together(setting):
        system = build_system(setting, indices)
        names = _names_in(setting, indices)
        coils = _coils_of(setting, indices)
        found = {} if isinstance(system, Unknown) else _measured(system, names, coils)
        lacking = system if isinstance(system, Unknown) else None
        for name in names:
            values = [found.get(f"{name} {q}", _lacking(name, lacking)) for q in _POSITION]
            positions[name] = PositionWaves(*values)
        for coil in coils:
            part = setting.routes[coil][0].part
            values = [found.get(f"{coil} {q}", _lacking(part, lacking)) for q in _COIL]
            inductors[part] = InductorWaves(*values)
    inductors |= _unswitched(setting)
    capacitors, assumed = bank_waves(setting)
    return Waveforms(inductors, capacitors, positions, assumed)


def _lacking(name: str, lacking: Unknown | None) -> Derived:
    what = f"current of {name} over time"
    if lacking is None:
        return Derived(Unknown(what, "a stage that works"))
    return Derived(Unknown(f"{what}, for want of {lacking.what}", lacking.settle))


def _together(setting: Setting) -> list[tuple[int, ...]]:
    """Groups that some coil's voltage joins, or one port's sines."""
    chains = [
        [step.cluster for step in route.steps]
        for carrier, route in setting.routes.values()
        if carrier.part
    ]
    chains += [sorted(sines.legs) for sines in setting.sines]
    return joined_groups(range(len(setting.worked.topology.clusters)), chains)


def _names_in(setting: Setting, indices: Iterable[int]) -> list[str]:
    clusters = setting.worked.topology.clusters
    return [link.name for k in indices for link in clusters[k].positions]


def _coils_of(setting: Setting, indices: Sequence[int]) -> list[str]:
    return [
        name
        for name, (carrier, route) in setting.routes.items()
        if name == f"i({carrier.part})" and {s.cluster for s in route.steps} & set(indices)
    ]


def _measured(system: System, names: Sequence[str], coils: Sequence[str]) -> dict[str, Derived]:
    def measure(values: Values) -> list[Mapping[str, Array]]:
        found: list[Mapping[str, Array]] = []
        for scene in system.scenes(values):
            own = [(name, _of_position(scene, scene.position(name))) for name in names]
            own += [(n, _of_coil(scene, scene.coils[n])) for n in coils if n in scene.coils]
            found.append({f"{name} {q}": v for name, values in own for q, v in values.items()})
        return found

    found = explore(system.space, measure, system.missing)
    return {name: down_to_nothing(one) for name, one in found.items()} if system.sines else found


def down_to_nothing(derived: Derived) -> Derived:
    """An AC amplitude is the largest of all: less is drawn, down to nothing."""
    if isinstance(derived.range, Unknown):
        return derived
    return replace(derived, range=derived.range.hull(point(0.0)))


def _of_position(scene: Scene, current: Pieces) -> dict[str, Array]:
    first, last = current
    shares, weights = scene.shares, scene.weights
    ahead, back = pieces.of_sign(first, last, shares), pieces.of_sign(-first, -last, shares)
    return {
        "mean": pieces.mean(first, last, shares, weights),
        "rms": np.sqrt(pieces.mean_square(first, last, shares, weights)),
        "forward_mean": pieces.mean(*ahead, weights),
        "forward_rms": np.sqrt(pieces.mean_square(*ahead, weights)),
        "reverse_mean": pieces.mean(*back, weights),
        "reverse_rms": np.sqrt(pieces.mean_square(*back, weights)),
    }


def _of_coil(scene: Scene, current: Pieces) -> dict[str, Array]:
    first, last = current
    high = np.maximum(first, last).max(axis=-1)
    low = np.minimum(first, last).min(axis=-1)
    return {
        "mean": pieces.mean(first, last, scene.shares, scene.weights),
        "rms": np.sqrt(pieces.mean_square(first, last, scene.shares, scene.weights)),
        "ripple": (high - low).max(axis=-1),
        "peak": np.maximum(np.abs(high), np.abs(low)).max(axis=-1),
    }


def _unswitched(setting: Setting) -> dict[str, InductorWaves]:
    """Coils between rigid voltages, such as those of an input filter: no switch moves them."""
    worked = setting.worked
    found = {}
    for name, (carrier, route) in setting.routes.items():
        if name != f"i({carrier.part})" or route.steps:
            continue
        form = worked.box.means.get(name)
        span = worked.box.range_of(form) if form is not None else worked.box.ranges[name]
        if form is None or not span.bounded:
            lacking = _lacking(carrier.part, None)
            found[carrier.part] = InductorWaves(lacking, lacking, lacking, lacking)
            continue
        sine = bool(set(form.names) & setting.alternating)
        size = Interval(0.0 if span.contains(0.0) else min(abs(span.low), abs(span.high)),
                        span.magnitude)  # fmt: skip
        rms = size.scaled(1.0 / math.sqrt(2.0)) if sine else size
        mean = point(0.0) if sine else span
        found[carrier.part] = InductorWaves(
            Derived(mean), Derived(rms), Derived(point(0.0)), Derived(size)
        )
    return found
