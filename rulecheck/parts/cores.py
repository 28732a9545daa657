"""Gather coupled inductors into cores.

K1 L1 L2 0.99
K2 L2 L3 0.99      one core K1 with windings L1, L2, L3; turns as the roots of inductance
K3 L1 L9 0.4       too loose for a transformer: left out, and said so
"""

import math
from collections.abc import Iterable, Mapping

from rulecheck.netlist import Element
from rulecheck.parts.part import Core, Kind, Part
from rulecheck.values import Problem, Unknown, error
from rulecheck.values.record import Record

TIGHT = 0.9
"""Coupling from which inductors are windings of one transformer (common practice)."""


class Coupling(Record):
    element: Element
    windings: tuple[Part, ...]
    sign: float


class Cores(Record):
    cores: tuple[Core, ...]
    assumed: tuple[str, ...]
    problems: tuple[Problem, ...]


def find_cores(couplings: Iterable[Element], parts: Mapping[str, Part]) -> Cores:
    """Merge the K cards that share inductors; `parts` are found by lower-case name."""
    tight: list[Coupling] = []
    assumed: list[str] = []
    problems: list[Problem] = []
    for element in couplings:
        found = _coupling(element, parts)
        if isinstance(found, Problem):
            problems.append(found)
        elif isinstance(found, str):
            assumed.append(found)
        else:
            tight.append(found)
    cores = [_core(group, problems) for group in _groups(tight)]
    return Cores(tuple(c for c in cores if c is not None), tuple(assumed), tuple(problems))


def _coupling(element: Element, parts: Mapping[str, Part]) -> Coupling | Problem | str:
    windings: list[Part] = []
    for name in element.controls:
        winding = _inductor(name, element.instance, parts)
        if winding is None:
            what = f"{element.name} couples {name}, which is no inductor of this netlist"
            return error(element.span, what, "name inductors (L...) on the K card")
        windings.append(winding)
    if isinstance(element.value, Unknown) or not 0.0 <= abs(element.value) <= 1.0:
        what = f"{element.name} has no coupling between 0 and 1"
        return error(element.span, what, "write the coefficient last: K1 L1 L2 0.99")
    if len(windings) < 2:
        what = f"{element.name} couples fewer than two inductors"
        return error(element.span, what, "name the coupled inductors: K1 L1 L2 0.99")
    if abs(element.value) < TIGHT:
        names = " and ".join(winding.name for winding in windings)
        return f"{element.name} ({names}, {element.value:g}) is too loose a coupling: left out"
    return Coupling(element, tuple(windings), math.copysign(1.0, element.value))


def _inductor(name: str, instance: str, parts: Mapping[str, Part]) -> Part | None:
    """Look the name up as it stands and from inside the K card's own instance outward."""
    path = instance.split(".") if instance else []
    candidates = [".".join((*path[:depth], name)) for depth in range(len(path), -1, -1)]
    for candidate in candidates:
        part = parts.get(candidate.lower())
        if part is not None and part.kind is Kind.INDUCTOR:
            return part
    return None


def _groups(couplings: Iterable[Coupling]) -> list[list[Coupling]]:
    """Couplings that share a winding, transitively; groups in the order of their first card."""
    group_of: dict[str, list[Coupling]] = {}
    for coupling in couplings:
        names = [winding.name for winding in coupling.windings]
        joined = {id(group_of[name]): group_of[name] for name in names if name in group_of}
        merged = [c for group in joined.values() for c in group] + [coupling]
        group_of |= {winding.name: merged for c in merged for winding in c.windings}
    return list({id(group): group for group in group_of.values()}.values())


def _core(group: list[Coupling], problems: list[Problem]) -> Core | None:
    windings = {w.name: w for coupling in group for w in coupling.windings}
    signs = _signs(group, next(iter(windings)))
    turns: list[float] = []
    for winding in windings.values():
        if isinstance(winding.value, Unknown) or winding.value <= 0.0:
            what = f"{winding.name} is a winding, but its inductance is not known"
            problems.append(error(winding.span, what, "write the inductance in henry on its card"))
            return None
        turns.append(signs[winding.name] * math.sqrt(winding.value))
    scaled = tuple(number / turns[0] for number in turns)
    first = group[0].element
    return Core(first.name, tuple(windings), scaled, first.span)


def _signs(group: list[Coupling], first: str) -> dict[str, float]:
    """A negative coefficient turns a winding's dot to its other net."""
    signs = {first: 1.0}
    waiting = list(group)
    while waiting:
        coupling = next(c for c in waiting if any(w.name in signs for w in c.windings))
        waiting.remove(coupling)
        known = next(w.name for w in coupling.windings if w.name in signs)
        for winding in coupling.windings:
            signs.setdefault(winding.name, signs[known] * coupling.sign)
    return signs
