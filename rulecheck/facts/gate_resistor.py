"""Which resistor of a gate drive gets hottest, and how hot.

Of the power Q dV f half goes when the gate is charged and half when it is discharged; each half
divides between the external resistance, the driver's and the device's (application notes, from
memory).
"""

from rulecheck.facts.facts import Bounds, Value
from rulecheck.facts.inputs import Inputs, stated_number
from rulecheck.parts import Part
from rulecheck.stage import GateDrive, GatePath
from rulecheck.values import Interval, Unknown
from rulecheck.values.record import Record


class Hottest(Record):
    name: str
    share: float
    """Of the drive's whole power, at most."""
    missing: tuple[Unknown, ...]
    """What would make the share exact."""


def hottest_resistor(inputs: Inputs, drive: GateDrive) -> Hottest | None:
    """None where no resistor is in series with the gate."""
    shares: dict[str, float] = {}
    missing: list[Unknown] = []
    sides = (
        (drive.turn_on, "driver.source-resistance"),
        (drive.turn_off, "driver.sink-resistance"),
    )
    for path, figure in sides:
        outside, unknown = _external_share(inputs, drive, path, figure)
        missing += unknown
        for name, part_of in _split(inputs, path).items():
            shares[name] = shares.get(name, 0.0) + outside * part_of / 2
    if not shares:
        return None
    name = max(shares, key=lambda key: shares[key])
    return Hottest(name, min(shares[name], 1.0), tuple(dict.fromkeys(missing)))


def _external_share(
    inputs: Inputs, drive: GateDrive, path: GatePath, figure: str
) -> tuple[float, list[Unknown]]:
    """The share of the external resistance in all that the gate's current passes."""
    ohms = path.resistance
    if isinstance(ohms, Unknown) or ohms <= 0.0:
        return 1.0, []
    devices = [inputs.part_by_name[name] for name in drive.devices]
    inner = [stated_number(part, "gate.resistance") for part in devices]
    driver = inputs.part_by_name.get(drive.output.part)
    output = _output_resistance(driver, figure)
    known = [value for value in (*inner, output) if isinstance(value, float)]
    unknown = [value for value in (*inner, output) if isinstance(value, Unknown)]
    return ohms / (ohms + sum(known)), unknown


def _output_resistance(driver: Part | None, figure: str) -> Value:
    if driver is None or driver.waveform is not None:
        return 0.0
    return stated_number(driver, figure)


def _split(inputs: Inputs, path: GatePath) -> dict[str, float]:
    """How the external power divides: by resistance in series, by conductance side by side."""
    ohms = {name: inputs.part_by_name[name].value for name in path.resistors}
    known = {name: value for name, value in ohms.items() if isinstance(value, float) and value > 0}
    total = path.resistance
    if isinstance(total, Unknown) or not known or len(known) < len(ohms):
        return dict.fromkeys(ohms, 1.0)
    if abs(sum(known.values()) - total) <= 1e-6 * total:
        return {name: value / total for name, value in known.items()}
    if abs(1.0 / sum(1.0 / value for value in known.values()) - total) <= 1e-6 * total:
        return {name: total / value for name, value in known.items()}
    return dict.fromkeys(known, 1.0)


def resistor_power(hottest: Hottest, power: Value) -> Value:
    """Watts in the hottest resistor: at most its share of the drive's power."""
    if isinstance(power, Bounds):
        return Bounds(Interval(0.0, power.range.high * hottest.share), power.missing)
    if not isinstance(power, float):
        return power
    watts = power * hottest.share
    return Bounds(Interval(0.0, watts), hottest.missing) if hottest.missing else watts
