"""Groups that share coils, worked out together: what they need known, and their currents.

An interleaved converter has a system a leg, since each coil sees one leg alone; a three-phase
inverter is one system, since its legs share a star point and a pattern.
"""

import math
from collections.abc import Iterable, Mapping, Sequence

import numpy as np

from rulecheck.demand.waveforms.conduction import flowing
from rulecheck.demand.waveforms.modulation import (
    ANGLE_WEIGHTS,
    LEVELS,
    Sines,
    sine_timelines,
    sine_values,
)
from rulecheck.demand.waveforms.operating import Space, Values, space_of
from rulecheck.demand.waveforms.scene import Coil, Scene, set_scene
from rulecheck.demand.waveforms.setting import Setting, delay_line, frequency_of
from rulecheck.demand.waveforms.timing import IDLE, Pair, Timeline, duty_of, voltage_in
from rulecheck.values import AffineForm, Unknown
from rulecheck.values.record import Record, field

MOST_GROUPS = 8
"""More groups than this in one system are not worked out."""


class System(Record):
    setting: Setting
    indices: tuple[int, ...]
    coils: tuple[Coil, ...]
    frequency: float
    space: Space
    sines: Sines | None
    missing: tuple[Unknown, ...] = ()
    delays: Mapping[int, float] = field(default_factory=dict)

    def scenes(self, values: Values) -> list[Scene]:
        """One scene, or one for each pattern that the modulation may have."""
        pairs = {k: self.setting.pairs[k] for k in self.indices}
        if self.sines is None:
            wide = {name: np.asarray(value)[..., None] for name, value in values.items()}
            lines = {k: self._balanced(k, wide) for k in self.indices}
            return [set_scene(wide, pairs, lines, self.coils, self.frequency, np.ones(1))]
        wide = {**sine_values(self.sines, values)}
        return [
            set_scene(
                wide, pairs, sine_timelines(self.sines, pattern, values), self.coils,
                self.frequency, ANGLE_WEIGHTS,
            )
            for pattern in self.sines.patterns
        ]  # fmt: skip

    def _balanced(self, index: int, values: Values) -> Timeline:
        pair = self.setting.pairs[index]
        duty = duty_of(pair, list(self.setting.routes.values()), values)
        assert duty is not None
        part = flowing(pair, self.coils, self.frequency, duty, values)
        start = np.asarray(self.delays.get(index, 0.0))
        rest = 1.0 - part
        return Timeline(((0, part * duty), (1, part * (1.0 - duty)), (IDLE, rest)), start)


def build_system(
    setting: Setting, indices: Iterable[int], forms: Iterable[AffineForm] = ()
) -> System | Unknown:
    """The system of these groups and of what the forms speak of, or what it lacks."""
    chosen = tuple(sorted(indices))
    sines = next((s for s in setting.sines if set(chosen) <= s.legs.keys()), None)
    if sines is not None:
        chosen = tuple(sorted(sines.legs))
    open_ = next((k for k in chosen if k not in setting.pairs), None)
    if open_ is not None or len(chosen) > MOST_GROUPS:
        return _not_in_pairs(setting, chosen)
    forms = [*forms, *(f for k in chosen for f in _forms(setting.pairs[k]))]
    coils = _coils(setting, forms)
    names = _names(setting, forms, coils)
    if sines is None and names & setting.alternating:
        return Unknown("currents that alternate", "legs that a sine modulates, one a phase")
    if sines is not None and not names & setting.alternating <= set(sines.names):
        return Unknown("currents of several AC ports", "one AC port a group of legs")
    return _with_timing(setting, chosen, coils, names - setting.alternating, sines)


def _with_timing(
    setting: Setting, chosen: tuple[int, ...], coils: tuple[Coil, ...], names: Iterable[str],
    sines: Sines | None,
) -> System | Unknown:  # fmt: skip
    frequency = _frequency(setting, chosen, coils)
    if isinstance(frequency, Unknown):
        return frequency
    extra = {n: (s, LEVELS[n.split()[0]]) for n, s in sines.ranges.items()} if sines else {}
    space = space_of(names, setting.worked, extra, setting.settle)
    if isinstance(space, Unknown):
        return space
    if sines is None:
        if any(_unbalanced(setting, k, space) for k in chosen):
            return Unknown("the duty", "an inductor whose voltage each state of the leg decides")
        if len(chosen) > 1 and not all(k in setting.delays for k in chosen):
            return Unknown("delays", delay_line(setting, chosen))
    missing = sines.missing if sines is not None else ()
    delays = {k: d for k, d in setting.delays.items() if k in chosen}
    return System(setting, chosen, coils, frequency, space, sines, missing, delays)


def _not_in_pairs(setting: Setting, chosen: Sequence[int]) -> Unknown:
    if len(chosen) > MOST_GROUPS:
        return Unknown("currents of many groups together", "fewer legs on one bank")
    names = [
        link.name
        for k in chosen
        if k not in setting.pairs
        for link in setting.worked.topology.clusters[k].positions
    ]
    shown = ", ".join(names[:4])
    return Unknown(
        f"how long each state of {shown} lasts",
        "a group with two states in turn; those of others are not worked out",
    )


def _forms(pair: Pair) -> Iterable[AffineForm]:
    for state in pair.states:
        yield from state.solution.on_currents.values()


def _coils(setting: Setting, forms: Iterable[AffineForm]) -> tuple[Coil, ...]:
    worked = setting.worked
    names = {n for form in forms for n in form.names}
    found = []
    for name in sorted(names & setting.routes.keys()):
        carrier, route = setting.routes[name]
        if carrier.part:
            mean = worked.box.means.get(name)
            found.append(Coil(carrier, route, mean, worked.box.ranges[name]))
    return tuple(found)


def _names(setting: Setting, forms: Iterable[AffineForm], coils: Sequence[Coil]) -> set[str]:
    """The stiff quantities behind the forms, the coils' voltages and their means."""
    moved = {coil.carrier.name: coil for coil in coils}
    names: set[str] = set()
    for form in forms:
        names |= set(form.names) - moved.keys()
    for name, coil in moved.items():
        names |= set(coil.route.fixed.names)
        names |= {name} if coil.mean is None else set(coil.mean.names)
        for index in {step.cluster for step in coil.route.steps} & setting.pairs.keys():
            pair = setting.pairs[index]
            for state in pair.states:
                names |= set(voltage_in(coil.route, pair, state).names)
    return names


def _frequency(setting: Setting, chosen: Sequence[int], coils: Sequence[Coil]) -> float | Unknown:
    """Hertz, one for all the groups; infinite where no coil's ripple needs it."""
    moved = [coil for coil in coils if coil.route.steps]
    outside = {s.cluster for coil in moved for s in coil.route.steps} - set(chosen)
    if outside:
        return Unknown("ripple that further groups make", "coils that see these groups alone")
    for coil in moved:
        if not coil.carrier.inductance:
            return Unknown(f"inductance of {coil.carrier.part}", f"value of {coil.carrier.part}")
    found = {frequency_of(setting.worked, k) for k in chosen}
    if not moved and (len(found) != 1 or found == {0.0}):
        return math.inf
    if len(found) > 1:
        return Unknown("legs of different frequencies together", "one frequency for these legs")
    value = found.pop()
    return value or Unknown("the switching frequency", "switching: {frequency: ...}")


def _unbalanced(setting: Setting, index: int, space: Space) -> bool:
    values = {
        name: np.asarray([span.low, span.middle, span.high]) for name, span in space.ranges.items()
    }
    return (
        duty_of(setting.pairs[index], list(setting.routes.values()), space.completed(values))
        is None
    )
