"""Put together what independent groups do to one capacitor.

Different frequencies: squares of rms currents add. One frequency, delays unknown: the sum bounds
it from above and nothing from below, and the delays would settle it.
"""

import math
from collections.abc import Sequence

from rulecheck.demand.voltages import name_of
from rulecheck.demand.waveforms.banks import Bundle
from rulecheck.demand.waveforms.records import Derived
from rulecheck.demand.waveforms.setting import Setting, delay_line
from rulecheck.demand.waveforms.systems import System
from rulecheck.stage import Branch
from rulecheck.values import Interval, Unknown, point

Parts = Sequence[tuple[System, dict[str, Derived]]]


def combined(
    setting: Setting, bundle: Bundle, branch: Branch, parts: Parts, quantity: str
) -> Derived:
    """One capacitor's rms current or ripple over all groups at its bank, its reactive current
    at an AC port's frequency among it."""
    own = [(system, found[f"{bundle.name} {quantity}"]) for system, found in parts]
    lacking = next((d for _, d in own if isinstance(d.range, Unknown)), None)
    if lacking is not None:
        return lacking
    spans = [(s, d.range) for s, d in own if isinstance(d.range, Interval)]
    unknown = _unknown_delays(setting, [system for system, _ in own])
    missing = (*(m for _, d in own for m in d.missing), *unknown)
    # of rms currents the share of this capacitor; of charge what it makes of it in volts
    scale = bundle.share(branch) if quantity == "rms" else 1.0 / bundle.farad
    high = _total([(s, span.high) for s, span in spans], quantity) * scale
    lows = [span.low if s.sines is None else 0.0 for s, span in spans]
    low = 0.0 if unknown else math.sqrt(sum(x * x for x in lows)) * scale
    reactive = _reactive(setting, branch) if quantity == "rms" else point(0.0)
    if isinstance(reactive, Unknown):
        return Derived(reactive)
    low, high = math.hypot(low, reactive.low), math.hypot(high, reactive.high)
    if not math.isfinite(high):
        return Derived(Unknown(f"ripple of {branch.name}", "a lowest frequency above 0 Hz"))
    corners = dict(item for _, d in own for item in d.high_at)
    lowest = dict(item for _, d in own for item in d.low_at)
    return Derived(Interval(low, high), tuple(lowest.items()), tuple(corners.items()), missing)


def _total(values: Sequence[tuple[System, float]], quantity: str) -> float:
    if quantity == "ripple":
        return sum(value for _, value in values)
    by_frequency: dict[float, float] = {}
    for system, value in values:
        by_frequency[system.frequency] = by_frequency.get(system.frequency, 0.0) + value
    return math.sqrt(sum(value**2 for value in by_frequency.values()))


def _unknown_delays(setting: Setting, systems: Sequence[System]) -> tuple[Unknown, ...]:
    frequencies = [system.frequency for system in systems]
    if len(frequencies) == len(set(frequencies)):
        return ()
    indices = [k for system in systems for k in system.indices]
    return (Unknown("delays between legs", delay_line(setting, indices)),)


def _reactive(setting: Setting, branch: Branch) -> Interval | Unknown:
    """The rms current that an alternating voltage of an AC port drives through it."""
    form = setting.worked.voltages.forms[branch.name]
    if not set(form.names) & setting.alternating:
        return point(0.0)
    span = setting.worked.box.range_of(form)
    ports = [p for p in setting.worked.stage.ports if any(p.name in n for n in form.names)]
    frequency = next((p.frequency for p in ports if p.frequency is not None), None)
    if frequency is None or not span.bounded:
        name = name_of(branch)
        return Unknown(f"reactive current of {branch.name}", f"frequency and amplitude of {name}")
    size = 2.0 * math.pi * (branch.value or 0.0) * span.magnitude / math.sqrt(2.0)
    return Interval(0.0, size * frequency.high)
