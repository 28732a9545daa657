"""Whether positions that conduct close a loop around a stiff voltage.

Q1 and Q2 of a leg both on          BUS - Q1 - SW - Q2 - 0: shorts v(bus)
two transistors, each with a series diode, on between two lines and one coil: no loop

Along a closed walk in conducting directions the drops sum to the stiff voltages passed; if that
sum can be positive, some position would be forward-biased and nothing limits its current.
"""

from collections.abc import Collection, Iterator

from rulecheck.demand.analysis import Worked
from rulecheck.demand.commands import ClosedLoop
from rulecheck.demand.conduction import Ways, ways_of
from rulecheck.demand.equations import solve_state
from rulecheck.demand.states import Laws
from rulecheck.demand.topology import Cluster
from rulecheck.values import AffineForm, Unknown
from rulecheck.values.record import Record

_MOST_LOOPS = 2000
"""A group with more closed walks than this is not judged by them."""
_SMALL, _SMALL_VOLTAGE = 0.02, 1.0


class _Step(Record):
    """One position passed in one direction; `drop` is its own stiff voltage that way."""

    position: str
    head: str
    drop: AffineForm


def loop_with(
    worked: Worked, cluster: Cluster, devices_on: Collection[str]
) -> ClosedLoop | Unknown | None:
    """A loop that these gates close and no free path alone does; None where there is none."""
    ways = ways_of(cluster, devices_on)
    free = ways_of(cluster, ())
    gated = frozenset(name for name, way in ways.items() if way != free[name])
    if not gated:
        return None
    by_windings = _through_windings(worked, cluster, ways, gated)
    if by_windings is not None:
        return by_windings
    onward = _onward(cluster, ways)
    for count, walk in enumerate(_closed_walks(onward)):
        if count > _MOST_LOOPS:
            names = ", ".join(sorted(gated))
            return Unknown(f"whether {names} short a voltage", "a group with fewer loops")
        loop = _judged(worked, walk)
        if loop is not None and gated & set(loop.positions):
            return loop
    return None


def _onward(cluster: Cluster, ways: Ways) -> dict[str, list[_Step]]:
    onward: dict[str, list[_Step]] = {island: [] for island in cluster.islands}
    for link in cluster.positions:
        forward, reverse = ways[link.name]
        if forward:
            onward[link.start].append(_Step(link.name, link.end, link.step))
        if reverse:
            onward[link.end].append(_Step(link.name, link.start, -link.step))
    return onward


def _closed_walks(onward: dict[str, list[_Step]]) -> Iterator[tuple[_Step, ...]]:
    """Every simple closed walk once: from its first island in order, depth-first."""
    order = {island: index for index, island in enumerate(sorted(onward))}
    for first in order:
        stack: list[tuple[str, tuple[_Step, ...], frozenset[str]]] = [(first, (), frozenset())]
        while stack:
            island, walk, passed = stack.pop()
            for step in onward[island]:
                if step.position in {before.position for before in walk}:
                    continue
                if step.head == first:
                    yield (*walk, step)
                elif order[step.head] > order[first] and step.head not in passed:
                    stack.append((step.head, (*walk, step), passed | {step.head}))


def _judged(worked: Worked, walk: tuple[_Step, ...]) -> ClosedLoop | None:
    total = AffineForm()
    for step in walk:
        total += step.drop
    if total.is_zero or Laws(worked.topology.ties, worked.box).vanishes(total):
        return None
    span = worked.box.range_of(total)
    small = max(_SMALL_VOLTAGE, _SMALL * span.magnitude) if span.bounded else _SMALL_VOLTAGE
    if span.high <= small:
        return None
    return ClosedLoop(tuple(step.position for step in walk), total.text(), span)


def _through_windings(
    worked: Worked, cluster: Cluster, ways: Ways, gated: frozenset[str]
) -> ClosedLoop | None:
    """Windings on one core held at voltages that their turns do not allow together."""
    if not any(link.core for link in cluster.links):
        return None
    laws = Laws(worked.topology.ties, worked.box)
    on = frozenset(name for name, way in ways.items() if way == (True, True))
    solution = solve_state(cluster, on, laws.vanishes)
    if not on & gated or not solution.voltage_contradictions:
        return None
    form = max(solution.voltage_contradictions, key=lambda f: worked.box.range_of(f).magnitude)
    return ClosedLoop(tuple(sorted(on)), form.text(), worked.box.range_of(form))
