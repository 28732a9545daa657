"""Capacitor voltages from the duty of the gates' own pulse sources.

    buck with Q1 on for 40 % of the period        mean of SW is 0.4 v(in), so v(C1) = 0.4 v(in)

Over a period each inductor's mean voltage is zero; with the share of time of each state known,
that is one linear relation an inductor. Continuous conduction is assumed, and said.
"""

from collections.abc import Mapping, Sequence

from rulecheck.demand.analysis import Worked
from rulecheck.demand.routes import Route
from rulecheck.demand.states import RawState
from rulecheck.demand.voltages import name_of
from rulecheck.stage import GateCommand, Stage, common_window
from rulecheck.values import AffineForm, Interval, Unknown, total_of
from rulecheck.values.record import replace

Shares = Sequence[tuple[RawState, float]]
_SLIVER = 0.04
"""Share of a period below which a set of commands is dead time, not a state of its own."""


def with_duty(worked: Worked) -> tuple[Stage, tuple[str, ...]]:
    """The stage with the voltages that the gates' duty fixes stated, and what was assumed."""
    stage = worked.stage
    open_ = {name_of(b): b.name for b in worked.voltages.undetermined if b.part}
    if not open_ or not stage.gate_commands:
        return stage, ()
    shares = [_shares(worked, index) for index in range(len(worked.topology.clusters))]
    solved: dict[str, AffineForm] = {}
    for carrier, route in worked.routes:
        relation = _mean_voltage(route, shares) if carrier.part else None
        if relation is None:
            continue
        _eliminate(relation.substitute(solved), open_, solved)
    given = {open_[n]: worked.box.range_of(f) for n, f in solved.items() if _known(f, worked)}
    branches = tuple(
        replace(b, given=given[b.name]) if b.name in given else b for b in stage.branches
    )
    sentences = tuple(
        f"{name}: {solved[name].text()} from the duty of the gate sources, conduction "
        "taken as continuous"
        for name in sorted(solved)
        if open_[name] in given
    )
    return replace(stage, branches=branches), sentences


def _known(form: AffineForm, worked: Worked) -> bool:
    span: Interval = worked.box.range_of(form)
    return span.bounded and not worked.box.says_nothing(form)


def _eliminate(
    relation: AffineForm, open_: Mapping[str, str], solved: dict[str, AffineForm]
) -> None:
    """Solve the relation `form = 0` for an open voltage and put it into the earlier ones."""
    candidates = [(abs(c), n, c) for n, c in relation.terms if n in open_]
    if not candidates:
        return
    _, name, coefficient = max(candidates)
    form = (AffineForm.of({name: coefficient}) - relation).scaled(1.0 / coefficient)
    for earlier in solved:
        solved[earlier] = solved[earlier].substitute({name: form})
    solved[name] = form


def _mean_voltage(route: Route, shares: Sequence[Shares | None]) -> AffineForm | None:
    total = [route.fixed]
    for step in route.steps:
        mine = shares[step.cluster]
        if mine is None:
            return None
        total += [
            (s.solution.potentials[step.enter] - s.solution.potentials[step.leave]).scaled(
                share * step.weight
            )
            for s, share in mine
        ]
    return total_of(total)


def _shares(worked: Worked, index: int) -> Shares | None:
    """The share of a period of each state, where gates and states match one to one."""
    cluster = worked.topology.clusters[index]
    commands = worked.stage.gate_commands
    parts = {link.name: link.position.parts for link in cluster.positions if link.position}
    gates = {
        name: next((commands[p] for p in parts[name] if p in commands), None)
        for name in sorted(cluster.gated)
    }
    known = {name: command for name, command in gates.items() if command is not None}
    if len(known) < len(gates) or not all(command.repeats for command in known.values()):
        return None
    by_gates: dict[frozenset[str], list[RawState]] = {}
    for state in worked.reading.states[index]:
        by_gates.setdefault(frozenset(state.on) & cluster.gated, []).append(state)
    found: list[tuple[RawState, float]] = []
    for on, share in _command_shares(known).items():
        states = by_gates.get(on, [])
        if len(states) != 1:
            return None
        found.append((states[0], share))
    return found or None


def _command_shares(commands: Mapping[str, GateCommand]) -> dict[frozenset[str], float]:
    """How long each set of gates is commanded on; slivers (dead times) join their neighbour."""
    window = common_window(commands)
    if isinstance(window, Unknown):
        return {}
    shares: dict[frozenset[str], float] = {}
    for segment in window.segments():
        shares[segment.on] = shares.get(segment.on, 0.0) + segment.length / window.length
    longest = max(shares, key=lambda gates: shares[gates])
    kept = {gates: share for gates, share in shares.items() if share > _SLIVER}
    kept[longest] = kept.get(longest, 0.0) + 1.0 - sum(kept.values())
    return kept
