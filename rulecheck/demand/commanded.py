"""What the gates' commands do to a group: walk their common period, state by state.

half-bridge leg, both gates on for 200 ns        shorts v(bus)
current-source leg, no gate on for 1 us          interrupts i(L1)

A leg between voltages must not have both on, one that feeds a coil must not have both off; which
of them it is follows from what its states do, never from a name. Wood, Switching Power
Converters, 1981 (from memory): no state may short a voltage-type port or open a current-type one.
"""

from collections.abc import Collection, Iterator, Mapping
from itertools import pairwise

from rulecheck.demand.analysis import Worked
from rulecheck.demand.closed_loops import loop_with
from rulecheck.demand.commands import ClosedLoop, CommandedGroup, CommandedState, Takeover
from rulecheck.demand.conduction import forms_while, ways_of
from rulecheck.demand.routes import find_carriers
from rulecheck.demand.stiff import Box, tightened
from rulecheck.demand.topology import Cluster
from rulecheck.parts import Kind
from rulecheck.stage import CommonWindow, Segment, common_window
from rulecheck.values import Interval, Unknown, natural_key

_LATCHING = frozenset({Kind.THYRISTOR, Kind.TRIAC})


def find_commanded(worked: Worked) -> tuple[CommandedGroup, ...]:
    """One record for each group with gates, in the order of the groups."""
    stage = worked.stage
    carriers = {
        carrier.name: carrier.part or carrier.port
        for carrier in find_carriers(stage.branches, stage.transformers, stage.ports)
        if not carrier.name.startswith("i(magnetising")
    }
    return tuple(
        _Judge(worked, index, cluster, carriers).group()
        for index, cluster in enumerate(worked.topology.clusters)
        if cluster.gated
    )


class _Judge:
    """One group and the answers found so far, by the devices that are on."""

    def __init__(
        self, worked: Worked, index: int, cluster: Cluster, carriers: Mapping[str, str]
    ) -> None:
        self.carriers = carriers
        self.worked = worked
        self.index = index
        self.cluster = cluster
        self.parts = worked.stage.parts.by_name
        self._loops: dict[frozenset[str], ClosedLoop | Unknown | None] = {}

    def group(self) -> CommandedGroup:
        gated = [
            name
            for link in self.cluster.positions
            if link.position
            for name in link.position.parts
            if self.parts[name].gated
        ]
        latching = any(self.parts[name].kind in _LATCHING for name in gated)
        devices = tuple(sorted(gated, key=natural_key))
        positions = tuple(sorted((p.name for p in self.cluster.positions), key=natural_key))
        window = self._window(devices)
        broken, one_way = self.interrupted(frozenset())
        found = CommandedGroup(
            positions,
            devices,
            latching,
            self.loop(frozenset(devices)) is not None,
            (*broken, *one_way),
            window,
        )
        if latching or isinstance(window, Unknown):
            return found
        segments = window.segments()
        states = tuple(self._states(segments))
        takeovers = tuple(self._takeovers(window, devices))
        return CommandedGroup(
            *(positions, devices, latching, found.can_short, found.can_interrupt, window),
            states,
            takeovers,
        )

    def _window(self, devices: Collection[str]) -> CommonWindow | Unknown:
        commands = self.worked.stage.gate_commands
        missing = [name for name in devices if name not in commands]
        if missing:
            names = ", ".join(missing)
            return Unknown(
                f"when {names} turn on", f"PULSE or PWL sources that drive the gates of {names}"
            )
        return common_window({name: commands[name] for name in devices})

    def loop(self, devices_on: frozenset[str]) -> ClosedLoop | Unknown | None:
        if devices_on not in self._loops:
            self._loops[devices_on] = loop_with(self.worked, self.cluster, devices_on)
        return self._loops[devices_on]

    def _states(self, segments: Collection[Segment]) -> Iterator[CommandedState]:
        lengths: dict[frozenset[str], float] = {}
        first: dict[frozenset[str], float] = {}
        for segment in segments:
            lengths[segment.on] = lengths.get(segment.on, 0.0) + segment.length
            first.setdefault(segment.on, segment.start)
        for on in lengths:
            devices = tuple(sorted(on, key=natural_key))
            loop = self.loop(on)
            broken, one_way = self.interrupted(on) if loop is None else ((), ())
            yield CommandedState(devices, first[on], lengths[on], loop, broken, one_way)

    def interrupted(self, devices_on: frozenset[str]) -> tuple[tuple[str, ...], tuple[str, ...]]:
        """Whose current has no way in any of its directions, and whose in one of two only."""
        worked, cluster = self.worked, self.cluster
        if self.index in worked.connecting or not worked.reading.states[self.index]:
            return (), ()
        ways = ways_of(cluster, devices_on)
        kept = [
            forms
            for state in worked.reading.states[self.index]
            if (forms := forms_while(cluster, state, ways)) is not None
        ]
        used = {n for forms in kept for form in forms for n in form.names}
        entering = {n for form in cluster.into.values() for n in form.names}
        box = worked.box.only((used | entering) & worked.box.ranges.keys())
        none: list[str] = []
        half: list[str] = []
        for name in sorted(entering & self.carriers.keys(), key=natural_key):
            spans = _directions(box, name)
            lost = [
                span
                for span in spans
                if not any(tightened(box.with_ranges({name: span}), forms) for forms in kept)
            ]
            if lost:
                (none if len(lost) == len(spans) else half).append(self.carriers[name])
        return tuple(none), tuple(half)

    def _takeovers(self, window: CommonWindow, devices: Collection[str]) -> Iterator[Takeover]:
        """For every turning on: how long before it each device went off that may not meet it."""
        for before, now in _steps(window.segments(), window.cyclic):
            for name in sorted(now.on - before.on, key=natural_key):
                for other in devices:
                    gap = None if other == name else self._gap(name, other, now, window)
                    if gap is not None:
                        yield Takeover(other, name, now.start, gap)

    def _gap(self, name: str, other: str, now: Segment, window: CommonWindow) -> float | None:
        """Seconds from the other turning off to this one turning on, where they may not meet."""
        if other not in now.on:
            together = self.loop(now.on) is None and self.loop(now.on | {other}) is not None
            return _since(other, now.start, window) if together else None
        shorted = self.loop(now.on) is not None and self.loop(now.on - {other}) is None
        return -_until(other, now.start, window) if shorted else None


def _steps(segments: tuple[Segment, ...], cyclic: bool) -> Iterator[tuple[Segment, Segment]]:
    if cyclic and segments:
        yield segments[-1], segments[0]
    yield from pairwise(segments)


def _since(device: str, moment: float, window: CommonWindow) -> float | None:
    """How long ago the device turned off; None where it was not on before."""
    times = window.on[device]
    if not times:
        return None
    ago = [moment - span.high for span in times]
    if window.cyclic:
        ago = [gap if gap >= 0.0 else gap + window.length for gap in ago]
    return min((gap for gap in ago if gap >= 0.0), default=None)


def _until(device: str, moment: float, window: CommonWindow) -> float:
    """How long the device, on at the moment, stays on."""
    ends = [span.high - moment for span in window.on[device] if span.low <= moment < span.high]
    left = max(ends, default=0.0)
    first = window.on[device][0]
    past = moment + left >= window.length and window.cyclic and first.low == 0.0
    return left + first.high if past else left


def _directions(box: Box, name: str) -> list[Interval]:
    """The parts of a current's range with one sign each; nothing where it may as well be none."""
    span = box.ranges[name]
    small = 0.02 * span.magnitude if span.bounded else 1e-3
    if small == 0.0:
        return []
    halves = (span.part_of_sign(positive, small) for positive in (True, False))
    return [half for half in halves if half is not None]
