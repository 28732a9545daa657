"""Give an account of the stiff quantities: range, reason, and how to state what nobody does."""

import math
from collections.abc import Iterable

from rulecheck.demand.alternating import alternating_parts
from rulecheck.demand.analysis import Worked
from rulecheck.demand.demands import Undetermined, Variable
from rulecheck.demand.groups import forms_of
from rulecheck.demand.topology import loop_name, magnetising_name
from rulecheck.demand.voltages import name_of
from rulecheck.stage import BranchKind, Stage
from rulecheck.values import Unknown, natural_key


def settling_of(worked: Worked) -> Iterable[tuple[str, str, str]]:
    """The same as `settling_lines`, but for a current of unknown ripple what the ripple needs."""
    lines = [*settling_lines(worked.stage)]
    by_name = {name: line for name, _, line in lines}
    for name, what, line in lines:
        current = worked.currents.get(name)
        needs = [by_name.get(item, item) for item in current.settle] if current else []
        yield name, what, " and ".join(needs) or line


def settling_lines(stage: Stage) -> Iterable[tuple[str, str, str]]:
    """Variable, what it is in words, and the sheet line that states it."""
    for branch in stage.branches:
        name = name_of(branch)
        if branch.kind is BranchKind.RESISTOR:
            continue
        key = "voltage" if branch.kind is BranchKind.VOLTAGE else "current"
        if branch.part:
            yield (
                name,
                f"{key} of {branch.part}",
                f"set: {{{branch.part}: {{{key}: [LOW, HIGH]}}}}",
            )
        else:
            word = "voltage" if branch.kind is BranchKind.VOLTAGE else "draws"
            yield name, f"{key} of port {branch.port}", f"ports: {{{branch.port}: {{{word}: ...}}}}"
    for core in stage.transformers:
        yield (
            loop_name(core.name),
            f"current that runs through the windings of {core.name} without magnetising it",
            f"a coupling below 0.9, which reads {', '.join(core.parts)} as separate inductors",
        )
    for core in stage.transformers:
        yield (
            magnetising_name(core),
            f"magnetising current of {core.name}",
            "the inductance of its windings and `switching: {frequency: ...}`, or the currents "
            "of the ports",
        )


def account_of_variables(worked: Worked, settle: dict[str, str]) -> tuple[Variable, ...]:
    stage, box = worked.stage, worked.box
    found = []
    for branch in stage.branches:
        if branch.kind is not BranchKind.VOLTAGE:
            continue
        form = worked.voltages.forms[branch.name]
        name = name_of(branch)
        own = form.names == (name,)
        span = box.range_of(form)
        known = span.bounded
        found.append(
            Variable(
                name,
                "V",
                span if known else Unknown(f"voltage of {branch.name}", settle.get(name, name)),
                worked.voltages.origins[branch.name],
                None if own else form,
            )
        )
    loops = {loop_name(core.name) for core in stage.transformers}
    for name, span in sorted(box.ranges.items(), key=lambda item: natural_key(item[0])):
        if not name.startswith("i(") or name in loops:
            continue
        current = worked.currents.get(name)
        origin = current.origin if current else _port_origin(worked, name)
        value = span if span.bounded else Unknown(f"current {name}", settle.get(name, name))
        ripple = current.ripple if current else 0.0
        found.append(Variable(name, "A", value, origin, box.means.get(name), ripple))
    return tuple(found)


def _port_origin(worked: Worked, name: str) -> str:
    port = name.removeprefix("i(").removesuffix(")").partition("/")[0]
    return worked.port_currents.origins.get(port, "stated")


def undetermined_quantities(worked: Worked) -> tuple[Undetermined, ...]:
    """Quantities that some position's demand rests on and that nobody states."""
    used = {
        name
        for index, states in enumerate(worked.reading.states)
        for state in states
        for form in forms_of(state)
        for name in form.names
        if worked.topology.clusters[index].positions
    }
    rigid = worked.voltages.potentials
    for position in worked.topology.tie_positions:
        used |= set((rigid.offset(position.start) - rigid.offset(position.end)).names)
    means = worked.box.means
    used |= {name for known in used & means.keys() for name in means[known].names}
    ripples = worked.box.ripples
    used -= {name for name in means if math.isfinite(ripples.get(name, 0.0))}
    alternating = {f"i({part})" for part in alternating_parts(worked.stage)}
    found = []
    for name, what, line in settling_of(worked):
        span = worked.box.ranges.get(name)
        if span is None or span.bounded or name not in used:
            continue
        if name in alternating or name not in worked.box.unsettled:
            what = f"magnitude of the {what}"
        found.append(Undetermined(what, line))
    return tuple(found)


def derivations(worked: Worked) -> tuple[str, ...]:
    """How each derived quantity was found, so that a user may overrule it."""
    notes = []
    for branch in worked.stage.branches:
        origin = worked.voltages.origins.get(branch.name, "")
        if origin and origin != "stated" and branch.name not in _names_left(worked):
            notes.append(f"v({branch.name.removeprefix('port/')}): {origin}")
    return tuple(notes)


def _names_left(worked: Worked) -> frozenset[str]:
    return frozenset(branch.name for branch in worked.voltages.undetermined)
