"""What the devices and drivers of a leg do to its timing: interlock, delays, switching times."""

from collections.abc import Iterable, Sequence

from rulecheck.demand import Leg
from rulecheck.facts.inputs import Inputs, stated_range
from rulecheck.parts import Datum, Part
from rulecheck.stage import DrivenBy, DriveOutput
from rulecheck.values import Interval, Unknown
from rulecheck.values.record import Record

_WITH_DATA = (DrivenBy.DRIVER, DrivenBy.MODULE)
_NO_OUTPUT = DriveOutput(DrivenBy.NOTHING, "", "", "")


class LegDrivers(Record):
    """Of a leg's gated devices and of what drives them; seconds."""

    devices: tuple[str, ...]
    interlock: bool | Unknown
    """One driver serves both sides and never turns both on."""
    built_in_dead_time: float | Unknown | None
    """The least that a driver of both sides keeps by itself; None where it keeps none."""
    switching_spread: float | Unknown
    """Longest turn-off minus shortest turn-on of the devices."""
    delay_spread: float | Unknown
    """Longest minus shortest delay of the drivers."""


def gated_devices(inputs: Inputs, positions: Iterable[str]) -> tuple[str, ...]:
    names = inputs.parts_of_positions(positions)
    return tuple(name for name in names if inputs.part_by_name[name].gated)


def drivers_of(inputs: Inputs, leg: Leg) -> LegDrivers:
    """The leg's devices and drivers, each figure at its worst."""
    high, low = gated_devices(inputs, leg.high), gated_devices(inputs, leg.low)
    others = gated_devices(inputs, leg.others)
    devices = tuple(dict.fromkeys((*high, *low, *others)))
    outputs = [output_of(inputs, name) for name in devices]
    return LegDrivers(
        devices,
        _interlock(inputs, leg, high, low, others),
        _built_in(inputs, high, low),
        _spread(inputs, devices, "gate.turn-off", "gate.turn-on"),
        _delay_spread(inputs, leg, outputs),
    )


def output_of(inputs: Inputs, device: str) -> DriveOutput:
    """What commands the device's gate."""
    pins = inputs.part_by_name[device].pins
    gates = [inputs.merged(p.net) for p in pins if p.role in ("gate", "base", "control-plus")]
    drive = inputs.stage.gate_drives.get(gates[0]) if gates else None
    return drive.output if drive is not None else _NO_OUTPUT


def _common_driver(inputs: Inputs, high: Sequence[str], low: Sequence[str]) -> Part | None:
    """The one driver that serves all of them."""
    outputs = [output_of(inputs, name) for name in (*high, *low)]
    names = {output.part for output in outputs}
    if len(names) != 1 or not high or not low or outputs[0].by not in _WITH_DATA:
        return None
    return inputs.part_by_name.get(outputs[0].part)


def _interlock(
    inputs: Inputs, leg: Leg, high: Sequence[str], low: Sequence[str], others: Sequence[str]
) -> bool | Unknown:
    driver = None if others else _common_driver(inputs, high, low)
    unknown = Unknown(
        f"interlock of leg {leg.name}", f"drivers of {', '.join((*high, *low))} (kind: driver)"
    )
    if driver is None:
        apart = [output_of(inputs, name) for name in (*high, *low, *others)]
        single = all(output.by in (DrivenBy.DRIVER, DrivenBy.SOURCE) for output in apart)
        return False if apart and single else unknown
    if not isinstance(driver.datum("driver.dead-time"), Unknown):
        return True
    stated = driver.facts.get("driver.interlock")
    if stated is not None:
        return stated == "true"
    if driver.net("input") is not None and driver.net("output-low") is not None:
        return True
    return driver.missing("driver.interlock")


def _built_in(inputs: Inputs, high: Sequence[str], low: Sequence[str]) -> float | Unknown | None:
    driver = _common_driver(inputs, high, low)
    if driver is None:
        return None
    datum = driver.datum("driver.dead-time")
    if isinstance(datum, Datum):
        return datum.value.low if isinstance(datum.value, Interval) else datum.value
    keeps = driver.facts.get("driver.interlock") == "true" or driver.net("input") is not None
    return datum if keeps else None


def _spread(inputs: Inputs, devices: Sequence[str], longest: str, shortest: str) -> float | Unknown:
    """The longest of one time minus the shortest of another, over all devices."""
    parts = [inputs.part_by_name[name] for name in devices]
    slow = [stated_range(part, longest) for part in parts]
    fast = [stated_range(part, shortest) for part in parts]
    missing = [item for item in (*slow, *fast) if isinstance(item, Unknown)]
    if missing or not parts:
        return _all_of("switching times", missing)
    highest = max(item.high for item in slow if isinstance(item, Interval))
    return highest - min(item.low for item in fast if isinstance(item, Interval))


def _delay_spread(inputs: Inputs, leg: Leg, outputs: Iterable[DriveOutput]) -> float | Unknown:
    """Over all drivers; a source at the gate itself has no delay."""
    delays: list[Interval] = []
    missing: list[Unknown] = []
    for output in dict.fromkeys(outputs):
        if output.by is DrivenBy.SOURCE:
            delays.append(Interval(0.0, 0.0))
            continue
        part = inputs.part_by_name.get(output.part) if output.by in _WITH_DATA else None
        if part is None:
            settle = f"drivers of leg {leg.name} (kind: driver)"
            missing.append(Unknown(f"delays of the drivers of leg {leg.name}", settle))
            continue
        delay = stated_range(part, "driver.delay")
        if isinstance(delay, Interval):
            delays.append(delay)
        elif isinstance(delay, Unknown):
            missing.append(delay)
    if missing or not delays:
        return _all_of("delays", missing)
    return max(d.high for d in delays) - min(d.low for d in delays)


def _all_of(what: str, missing: Iterable[Unknown]) -> Unknown:
    missing = tuple(dict.fromkeys(missing))
    if not missing:
        return Unknown(what, "part data of the devices")
    return Unknown(
        " and ".join(item.what for item in missing),
        " and ".join(dict.fromkeys(item.settle for item in missing)),
    )
