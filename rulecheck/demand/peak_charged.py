"""Capacitors that a diode charges to the peak of what drives it, such as an auxiliary supply.

    flyback, auxiliary winding L3 - D3 - C3        v(C3) = n3/n2 v(out), from the state in which
                                                    the output diode conducts

The stage must work without the diode and its capacitor; then what stands before the diode is
known in every state, and the capacitor settles at the largest.
"""

from collections.abc import Callable, Sequence

from rulecheck.demand.analysis import Worked
from rulecheck.demand.readings import feasible
from rulecheck.demand.routes import Carrier, find_routes
from rulecheck.stage import Branch, BranchKind, Position, Stage
from rulecheck.values import Interval
from rulecheck.values.record import Record, replace

WorkOut = Callable[[Stage], Worked]


class Peak(Record):
    """A capacitor that its diodes charge to the largest voltage before them."""

    capacitor: str
    diodes: tuple[str, ...]
    voltage: Interval

    @property
    def sentence(self) -> str:
        low, high = self.voltage.low, self.voltage.high
        ends = f"{low:.4g} V" if high - low < 1e-6 * high else f"{low:.4g} V ... {high:.4g} V"
        names = " and ".join(self.diodes)
        return f"{self.capacitor}: {ends}, the largest voltage that {names} can charge it to"


def find_peaks(worked: Worked, work_out: WorkOut) -> tuple[Peak, ...]:
    """The undetermined capacitors that settle so; `work_out` analyses a stage."""
    found = []
    for capacitor in worked.voltages.undetermined:
        diodes = _charging(worked.stage, capacitor)
        if not diodes:
            continue
        rest = _without(worked.stage, capacitor, diodes)
        voltage = _peak(work_out(rest), capacitor, diodes)
        if voltage is not None:
            found.append(Peak(capacitor.name, tuple(p.name for p in diodes), voltage))
    return tuple(found)


def with_peaks(stage: Stage, peaks: Sequence[Peak]) -> Stage:
    given = {peak.capacitor: peak.voltage for peak in peaks}
    branches = tuple(
        replace(b, given=given[b.name]) if b.name in given else b for b in stage.branches
    )
    return replace(stage, branches=branches)


def _charging(stage: Stage, capacitor: Branch) -> tuple[Position, ...]:
    """The diodes into one end of the capacitor, where nothing else but loads is there."""
    net = capacitor.start
    diodes = tuple(p for p in stage.positions if net in (p.start, p.end))
    if not diodes or any(p.gated or p.end != net for p in diodes):
        return ()
    others = [b for b in stage.branches if net in (b.start, b.end) and b is not capacitor]
    if any((b.kind is BranchKind.CURRENT and b.part) or b.port for b in others):
        return ()
    windings = {end for core in stage.transformers for pair in core.windings for end in pair}
    return () if net in windings else diodes


def _without(stage: Stage, capacitor: Branch, diodes: tuple[Position, ...]) -> Stage:
    net = capacitor.start
    gone = {p.name for p in diodes}
    return replace(
        stage,
        branches=tuple(b for b in stage.branches if net not in (b.start, b.end)),
        positions=tuple(p for p in stage.positions if p.name not in gone),
    )


def _peak(worked: Worked, capacitor: Branch, diodes: tuple[Position, ...]) -> Interval | None:
    if worked.failures or worked.connecting or worked.reading.amended:
        return None
    spans: list[Interval] = []
    for diode in diodes:
        probe = Carrier("", diode.start, capacitor.end, None, "", "")
        for _, route in find_routes((probe,), worked.topology):
            if len(route.steps) != 1 or route.floating:
                return None
            step = route.steps[0]
            for state, box in feasible(worked.reading, step.cluster, worked.box):
                potentials = state.solution.potentials
                form = potentials[step.enter] - potentials[step.leave] + route.fixed
                spans.append(box.range_of(form))
    usable = spans and all(span.bounded for span in spans)
    if not usable:
        return None
    peak = Interval(max(s.low for s in spans), max(s.high for s in spans))
    return peak if peak.low > 0.0 else None
