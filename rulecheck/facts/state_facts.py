"""Facts of groups of positions and of their legal switching states."""

from rulecheck.demand import Group, State
from rulecheck.facts.commanded_facts import GROUP_FIELDS, group_values, state_names
from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.inputs import Inputs, group_name
from rulecheck.facts.terms import SubjectTerm, count, link, text, texts, yes_no
from rulecheck.values import Unknown

GROUP = SubjectTerm(
    "group",
    "Positions whose switching states depend on each other.",
    (
        yes_no("analysed", "Its states were enumerated and the stage works with them."),
        text("why-not", "Why it was not analysed; empty where it was."),
        count("legal-states", "How many states neither short a voltage nor break a current."),
        count("forbidden-states", "Needed states that a drawn device's own free path forbids."),
        texts("forbidding", "The positions whose free paths forbid them."),
        *GROUP_FIELDS,
    ),
    (
        link("positions", "position", "Its positions."),
        link("states", "switch-state", "Its legal states."),
        link("commanded", "commanded-state", "What the gate sources command, state by state."),
    ),
)

SWITCH_STATE = SubjectTerm(
    "switch-state",
    "One legal combination of on positions in a group.",
    (
        texts("on", "The positions that are on."),
        count("on-count", "How many positions are on."),
        yes_no("available", "No free path of the drawn devices forbids it."),
    ),
    (
        link("positions", "position", "The positions that are on."),
        link("group", "group", "The group that it is a state of."),
    ),
)


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    """Each group, and its states."""
    found: list[Subject] = []
    for group in inputs.demands.groups:
        if group.positions:
            found.append(_group(inputs, group))
            found += [_state(inputs, group, state) for state in group.states]
    return tuple(found)


def _group(inputs: Inputs, group: Group) -> Subject:
    name = group_name(group.positions)
    known: Value | None = None if group.analysed else _not_analysed(group)
    parts = inputs.parts_of_positions(group.positions)
    values: dict[str, Value] = {
        "analysed": _analysed(group, known),
        "why-not": group.why_not,
        "legal-states": float(len(group.states)) if known is None else known,
        "forbidden-states": float(len(group.forbidden_states)) if known is None else known,
        "forbidding": group.forbidding if known is None else known,
        **group_values(inputs, group),
    }
    links: dict[str, tuple[str, ...] | Unknown] = {
        "positions": group.positions,
        "states": tuple(state_name(name, state) for state in group.states),
        "commanded": state_names(inputs, group),
    }
    span, related = inputs.span_of_parts(parts), inputs.related_spans(parts)
    return Subject("group", name, values, links, parts, (), span, related)


def _analysed(group: Group, known: Value | None) -> Value:
    """No, where it was found that the stage cannot work; not known where it was too large."""
    if known is None or group.cannot_work:
        return group.analysed
    return known


def _not_analysed(group: Group) -> Unknown:
    names = ", ".join(group.positions)
    return Unknown(f"states of {names}", f"a stage that works: {group.why_not}")


def state_name(group: str, state: State) -> str:
    return f"{group}: {'+'.join(state.on) or 'none'} on"


def _state(inputs: Inputs, group: Group, state: State) -> Subject:
    name = group_name(group.positions)
    values: dict[str, Value] = {
        "on": state.on,
        "on-count": float(len(state.on)),
        "available": state.available,
    }
    links = {"positions": state.on, "group": (name,)}
    parts = inputs.parts_of_positions(state.on)
    span = inputs.span_of_parts(parts or inputs.parts_of_positions(group.positions))
    return Subject("switch-state", state_name(name, state), values, links, parts, (), span)
