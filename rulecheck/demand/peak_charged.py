"""Capacitors that a diode charges to the peak of what drives it, such as an auxiliary supply.

    flyback, auxiliary winding L3 - D3 - C3        v(C3) = n3/n2 v(out), from the state in which
                                                    the output diode conducts

The stage must work without the diode and its capacitor; then what stands before the diode is
known in every state, and the capacitor settles at the largest.
"""

from collections.abc import Callable
from dataclasses import replace

from rulecheck.demand.analysis import Worked
from rulecheck.demand.readings import feasible
from rulecheck.demand.routes import Carrier, find_routes
from rulecheck.stage import Branch, BranchKind, Position, Stage
from rulecheck.values import Interval

WorkOut = Callable[[Stage], Worked]


def with_peaks(worked: Worked, stage: Stage, work_out: WorkOut) -> tuple[Stage, tuple[str, ...]]:
    """The stage with such capacitors' voltages stated, and what was assumed."""
    sentences: tuple[str, ...] = ()
    for capacitor in worked.voltages.undetermined:
        diodes = _charging(stage, capacitor)
        if not diodes:
            continue
        rest = _without(stage, capacitor, diodes)
        peak = _peak(work_out(rest), capacitor, diodes)
        if peak is None:
            continue
        branches = tuple(
            replace(b, given=peak) if b.name == capacitor.name else b for b in stage.branches
        )
        stage = replace(stage, branches=branches)
        names = " and ".join(p.name for p in diodes)
        sentences += (
            f"{capacitor.name}: {peak.low:.4g} V ... {peak.high:.4g} V, the largest voltage "
            f"that {names} can charge it to",
        )
    return stage, sentences


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
    if worked.failures or worked.connecting:
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
