"""Facts of cores: by which switches they are driven, and what keeps their flux where it is.

Two legs across a winding drive it both ways between the same two rails: nothing but equal times
keeps its mean voltage at zero. A capacitor in series does, and so does control of its current.
"""

from collections.abc import Iterator, Mapping

from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.inputs import Inputs
from rulecheck.facts.shunt_facts import is_shunt
from rulecheck.facts.terms import SubjectTerm, count, link, texts, yes_no
from rulecheck.parts import Kind, through_nets
from rulecheck.stage import BranchKind, Position, Transformer
from rulecheck.values import Unknown
from rulecheck.values.record import Record

CORE = SubjectTerm(
    "core",
    "Windings on one magnetic core in the power path.",
    (
        count("windings", "How many windings that are."),
        yes_no("driven-both-ways", "Switches put one voltage on it with either sign."),
        yes_no("flux-held", "Something keeps its mean voltage at zero in either case."),
        yes_no("charges-directly", "While a switch drives it, a diode joins two stiff voltages."),
        yes_no("starves", "A diode to an inductor conducts only while no switch drives it."),
        texts("charging-diodes", "Diodes that join two stiff voltages while a switch drives it."),
        texts("starved-diodes", "Diodes to an inductor that conduct only while none drives it."),
    ),
    (link("inductors", "inductor", "Its windings."),),
)
_Pair = tuple[str, str]


class _Drive(Record):
    """A winding between two rails while switches are on; `sign` is that of start over end."""

    winding: int
    rails: _Pair
    """The net that its start is on, and that of its end."""
    positions: tuple[str, ...]


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    behind = _inductors_behind(inputs)
    return tuple(_core(inputs, core, behind) for core in inputs.stage.transformers)


def _inductors_behind(inputs: Inputs) -> Mapping[str, tuple[str, ...]]:
    """By net: the nets that an inductor leads to."""
    found: dict[str, list[str]] = {}
    for branch in inputs.stage.branches:
        if branch.kind is BranchKind.CURRENT and branch.part:
            found.setdefault(branch.start, []).append(branch.end)
            found.setdefault(branch.end, []).append(branch.start)
    return {net: tuple(nets) for net, nets in found.items()}


def _core(inputs: Inputs, core: Transformer, behind: Mapping[str, tuple[str, ...]]) -> Subject:
    drives = list(_drives(inputs, core, behind))
    both = _both_ways(core, drives)
    charging, starved = _odd_diodes(inputs, core, drives, behind) if not both else ((), ())
    values: dict[str, Value] = {
        "windings": float(len(core.windings)),
        "driven-both-ways": both,
        "flux-held": _held(inputs, core),
        "charges-directly": bool(charging),
        "starves": bool(starved),
        "charging-diodes": charging,
        "starved-diodes": starved,
    }
    nets = tuple(dict.fromkeys(net for pair in core.windings for net in pair))
    span, related = inputs.span_of_parts(core.parts), inputs.related_spans(core.parts)
    links = {"inductors": core.parts}
    return Subject("core", core.name, values, links, core.parts, nets, span, related)


def _drives(
    inputs: Inputs, core: Transformer, behind: Mapping[str, tuple[str, ...]]
) -> Iterator[_Drive]:
    """Every way in which gated switches lay a winding between two nets of a stiff voltage."""
    for index, (start, end) in enumerate(core.windings):
        for first, by_first in _ways(inputs, start, behind):
            for second, by_second in _ways(inputs, end, behind):
                gated = (*by_first, *by_second)
                if gated and (first, second) in inputs.voltage_between:
                    yield _Drive(index, (first, second), gated)


def _ways(
    inputs: Inputs, net: str, behind: Mapping[str, tuple[str, ...]]
) -> Iterator[tuple[str, tuple[str, ...]]]:
    """The nets that a winding's end can be laid on: by a switch, through inductors, or for good."""
    seen = {net}
    waiting = [net]
    while waiting:
        here = waiting.pop()
        if _is_held(inputs, here):
            yield here, ()
            continue
        for position in _at(inputs, here):
            if position.gated:
                yield position.end if position.start == here else position.start, (position.name,)
        for other in behind.get(here, ()):
            if other not in seen:
                seen.add(other)
                waiting.append(other)


def _is_held(inputs: Inputs, net: str) -> bool:
    """A port or source holds the net's potential; a capacitor alone takes no direct current."""
    return net in inputs.ports_at_net or net in inputs.grounds


def _at(inputs: Inputs, net: str) -> list[Position]:
    return [p for p in inputs.stage.positions if net in (p.start, p.end)]


def _both_ways(core: Transformer, drives: list[_Drive]) -> bool:
    """The same two nets lie across the core with either sign, by different switches."""
    seen: dict[frozenset[str], set[tuple[str, bool]]] = {}
    for drive in drives:
        turned = core.turns[drive.winding] < 0.0
        first, second = drive.rails[::-1] if turned else drive.rails
        seen.setdefault(frozenset(drive.rails), set()).add((first, second < first))
    return any(len({first for first, _ in ways}) > 1 for ways in seen.values())


def _held(inputs: Inputs, core: Transformer) -> bool | Unknown:
    """As the sheet says; where a current is measured, nobody knows whether it is controlled."""
    if any(name in inputs.stage.balance for name in core.parts):
        return True
    senses = any(
        is_shunt(inputs, part)
        or (part.kind in (Kind.CURRENT_TRANSFORMER, Kind.SENSOR) and through_nets(part))
        for part in inputs.stage.parts.parts
    )
    if not senses:
        return False
    name = core.parts[0]
    return Unknown(f"balance of {name}", f"set: {{{name}: {{balance: current-control}}}}")


def _odd_diodes(
    inputs: Inputs,
    core: Transformer,
    drives: list[_Drive],
    behind: Mapping[str, tuple[str, ...]],
) -> tuple[tuple[str, ...], tuple[str, ...]]:
    """Of a core driven one way: diodes whose winding has its dot at the wrong end."""
    charging: list[str] = []
    starved: list[str] = []
    for drive in drives:
        for net, other, high in _ends_while_driven(inputs, core, drive):
            for diode, far, out in _diodes(inputs, net):
                onward = any(n != net for n in behind.get(far, ()))
                stiff = (far, other) in inputs.voltage_between
                charging += [diode] if out == high and stiff and not onward else []
                starved += [diode] if out != high and onward and not stiff else []
    return tuple(dict.fromkeys(charging)), tuple(dict.fromkeys(starved))


def _ends_while_driven(
    inputs: Inputs, core: Transformer, drive: _Drive
) -> Iterator[tuple[str, str, bool]]:
    """(net, other end, whether it is the higher one) of the other windings while it is driven."""
    span = inputs.voltage_between[drive.rails]
    if isinstance(span, Unknown) or not span.bounded or span.low < 0.0 < span.high:
        return
    positive = (span.middle > 0.0) == (core.turns[drive.winding] > 0.0)
    for index, (start, end) in enumerate(core.windings):
        if index != drive.winding:
            rises = positive == (core.turns[index] > 0.0)
            yield start, end, rises
            yield end, start, not rises


def _diodes(inputs: Inputs, net: str) -> Iterator[tuple[str, str, bool]]:
    """(name, far net, whether it leads out of the net) of diodes in series with a winding.

    A net that something holds, or where a switch is as well, is no place in series.
    """
    positions = _at(inputs, net)
    if _is_held(inputs, net) or len(positions) != 1 or positions[0].gated:
        return
    held = {n for pair in inputs.voltage_between for n in pair}
    position = positions[0]
    if net in held or position.free_forward == position.free_reverse:
        return
    far = position.end if position.start == net else position.start
    out = (position.start == net) == position.free_forward
    yield position.name, far, out
