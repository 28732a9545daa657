"""Operating points: sample values of the stiff quantities, tied as the power balance ties them.

boost, v(in) 12 ... 24 V, v(out) 48 V, out draws 0 ... 5 A
    points over v(in) and i(out); i(in) = v(out) i(out) / v(in) at each, not a range of its own
"""

from collections.abc import Callable, Iterable, Mapping, Sequence

import numpy as np

from rulecheck.demand.analysis import Worked
from rulecheck.demand.waveforms.pieces import Array
from rulecheck.demand.waveforms.records import Corner
from rulecheck.stage import BranchKind, Port, PortKind, Stage
from rulecheck.values import AffineForm, Interval, Unknown, natural_key
from rulecheck.values.record import Record, field

LEVELS = (1, 33, 13, 7, 5, 4, 3, 3, 2, 2, 2)
"""By the number of quantities that have a range: how many values of each are tried."""
FEW_LEVELS = (1, 2, 2, 2, 2, 2, 2)
"""The same beside the quantities whose levels are fixed, at every angle of a line period."""
_FINE = np.array([-0.75, -0.5, -0.25, -0.1, 0.0, 0.1, 0.25, 0.5, 0.75])
_COARSE = np.array([-0.5, -0.2, 0.0, 0.2, 0.5])
"""Steps of the grid."""
Values = Mapping[str, Array]


class Law(Record):
    """A port's current that follows from other quantities at every point."""

    name: str
    uses: tuple[str, ...]
    value: Callable[[Values], Array]


class Space(Record):
    """The quantities that vary freely, and those that follow from them."""

    ranges: Mapping[str, Interval]
    laws: tuple[Law, ...]
    fixed_levels: Mapping[str, int] = field(default_factory=dict)
    """How many values of some quantities are tried, whatever the number of the others."""

    @property
    def spread(self) -> tuple[str, ...]:
        return tuple(name for name, span in self.ranges.items() if span.high > span.low)

    def levels(self, name: str) -> int:
        if name not in self.spread:
            return 1
        table = FEW_LEVELS if self.fixed_levels else LEVELS
        free = [n for n in self.spread if n not in self.fixed_levels]
        return self.fixed_levels.get(name) or table[len(free)]

    def inside(self, corner: Corner) -> bool:
        """False where every quantity is at an end of its range."""
        return any(self.ranges[n].low < x < self.ranges[n].high for n, x in corner)

    def grid(self) -> Values:
        """Ends and an even spread between them, every mixture of them."""
        axes = [
            np.linspace(span.low, span.high, self.levels(name))
            for name, span in self.ranges.items()
        ]
        return self.completed(_crossed(tuple(self.ranges), axes))

    def around(self, corners: Sequence[Corner]) -> Values:
        """Points near each corner, within a step of the grid to either side."""
        spread = [n for n in self.spread if not self.fixed_levels or n in self.fixed_levels]
        offsets = _FINE if len(spread) <= 2 and not self.fixed_levels else _COARSE
        found = []
        for corner in corners:
            at = dict(corner)
            axes = []
            for name, span in self.ranges.items():
                step = (span.high - span.low) / max(self.levels(name) - 1, 1)
                near = at[name] + step * (offsets if name in spread else np.zeros(1))
                axes.append(np.clip(near, span.low, span.high))
            found.append(_crossed(tuple(self.ranges), axes))
        return self.completed(
            {name: np.concatenate([points[name] for points in found]) for name in self.ranges}
        )

    def completed(self, free: Mapping[str, Array]) -> Values:
        values = dict(free)
        for law in self.laws:
            values[law.name] = law.value(values)
        return values

    def corner(self, values: Values, index: int) -> Corner:
        return tuple((name, float(values[name][index])) for name in self.ranges)


def _crossed(names: Sequence[str], axes: Sequence[Array]) -> dict[str, Array]:
    if not names:
        return {}
    meshed = np.meshgrid(*axes, indexing="ij")
    return {name: axis.ravel() for name, axis in zip(names, meshed, strict=True)}


def space_of(
    names: Iterable[str],
    worked: Worked,
    extra: Mapping[str, tuple[Interval, int]],
    settle: Mapping[str, str],
) -> Space | Unknown:
    """The free quantities behind the names; Unknown where one has no range, or they are many."""
    laws = {law.name: law for law in _laws(worked)}
    powers = {_power_name(p): p.power for p in worked.stage.ports if p.power is not None}
    waiting, used = sorted(set(names), key=natural_key), dict[str, Law]()
    free = {name: span for name, (span, _) in extra.items()}
    while waiting:
        name = waiting.pop(0)
        if name in free or name in used:
            continue
        if name in laws:
            used[name] = laws[name]
            waiting += laws[name].uses
            continue
        span = powers.get(name) or worked.box.ranges.get(name)
        if span is None or not span.bounded:
            return Unknown(name, settle.get(name, name))
        free[name] = span
    ordered = {n: free[n] for n in sorted(free, key=natural_key)}
    space = Space(ordered, tuple(used.values()), {n: levels for n, (_, levels) in extra.items()})
    if len(space.spread) - len(extra) >= len(FEW_LEVELS if extra else LEVELS):
        return Unknown("its operating points", "single values in place of ranges in the sheet")
    return space


def value_of(form: AffineForm, values: Values) -> Array:
    """The form at every point, of the shape of its variables."""
    total: Array = np.asarray(form.constant, dtype=float)
    for name, coefficient in form.terms:
        total = total + coefficient * values[name]
    return total


def _laws(worked: Worked) -> Iterable[Law]:
    """Of DC ports whose current follows from power; a balance with AC ports ties no instant."""
    stage, origins = worked.stage, worked.port_currents.origins
    all_dc = all(port.kind is PortKind.DC for port in stage.ports)
    for port in stage.ports:
        volts = worked.voltages.averages.difference(*port.nets[:2])
        if port.kind is not PortKind.DC or volts is None or port.current is not None:
            continue
        if port.power is not None:
            yield _own_power(port, volts)
        elif all_dc and "balance" in origins.get(port.name, ""):
            law = _balance(port, volts, worked)
            if law is not None:
                yield law


def _own_power(port: Port, volts: AffineForm) -> Law:
    power = _power_name(port)
    return Law(
        f"i({port.name})",
        (power, *volts.names),
        lambda values: np.asarray(values[power] / value_of(volts, values)),
    )


def _balance(port: Port, volts: AffineForm, worked: Worked) -> Law | None:
    terms = [_power_of(other, worked) for other in worked.stage.ports if other is not port]
    known = [term for term in terms if term is not None]
    if len(known) < len(terms):
        return None
    loads = _loads(worked.stage, worked)
    uses = {*volts.names, *(n for names, _ in known for n in names)}
    uses |= {n for form, _ in loads for n in form.names}
    efficiency = worked.stage.efficiency

    def value(values: Values) -> Array:
        total = sum((power(values) for _, power in known), np.zeros(1))
        total = total - sum((value_of(f, values) ** 2 / ohm for f, ohm in loads), np.zeros(1))
        needed = np.where(total < 0.0, -total / efficiency, -total * efficiency)
        return np.asarray(needed / value_of(volts, values))

    return Law(f"i({port.name})", tuple(sorted(uses)), value)


def _power_of(
    port: Port, worked: Worked
) -> tuple[tuple[str, ...], Callable[[Values], Array]] | None:
    if port.power is not None:
        name = _power_name(port)
        return (name,), lambda values: np.asarray(values[name])
    volts = worked.voltages.averages.difference(*port.nets[:2])
    if volts is None or port.current is None:
        return None
    current = f"i({port.name})"
    return (current, *volts.names), lambda v: np.asarray(value_of(volts, v) * v[current])


def _loads(stage: Stage, worked: Worked) -> list[tuple[AffineForm, float]]:
    found = []
    for branch in stage.branches:
        form = worked.voltages.averages.difference(branch.start, branch.end)
        if branch.kind is BranchKind.RESISTOR and branch.value and form is not None:
            found.append((form, branch.value))
    return found


def _power_name(port: Port) -> str:
    return f"power of {port.name}"
