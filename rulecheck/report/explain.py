"""Find what a name means in this stage and explain it."""

from rulecheck.capability import Capabilities
from rulecheck.demand import Demands, Leg
from rulecheck.parts import Part
from rulecheck.report.explain_leg import explain_bridge, explain_leg
from rulecheck.report.explain_position import explain_position
from rulecheck.report.explain_variable import variable_entries
from rulecheck.report.explanation import Entry, Explanation
from rulecheck.report.figures import figure, range_figure
from rulecheck.report.look import PLAIN, Look
from rulecheck.stage import Port, PortKind, Position, Stage
from rulecheck.values import natural_key

_PORT_WORDS = {
    PortKind.DC: "DC port",
    PortKind.AC: "AC port",
    PortKind.PHASES: "port of symmetrical phases",
}


def explain(
    name: str, stage: Stage, capabilities: Capabilities, demands: Demands, look: Look = PLAIN
) -> Explanation | None:
    """A position, a leg, a part or a port by its name, in any case; None where there is none."""
    wanted = name.lower()
    position = _position(wanted, stage)
    if position is not None:
        return explain_position(position, stage, capabilities, demands, look)
    leg = _leg(wanted, demands)
    if leg is not None:
        return explain_leg(leg, stage, demands, look)
    bridge = next((bridge for bridge in demands.bridges if bridge.name.lower() == wanted), None)
    if bridge is not None:
        return explain_bridge(bridge, demands)
    port = next((port for port in stage.ports if port.name.lower() == wanted), None)
    if port is not None:
        return _explain_port(port, stage, demands, look)
    part = next((part for part in stage.parts.parts if part.name.lower() == wanted), None)
    return _explain_part(part, stage, demands, look) if part is not None else None


def known_names(stage: Stage, demands: Demands) -> tuple[str, ...]:
    """Every name that `explain` answers to."""
    names = {position.name for position in stage.positions}
    names |= {leg.name for leg in demands.legs} | {port.name for port in stage.ports}
    names |= {bridge.name for bridge in demands.bridges}
    names |= {part.name for part in stage.parts.parts}
    return tuple(sorted(names, key=natural_key))


def _position(wanted: str, stage: Stage) -> Position | None:
    named = (position for position in stage.positions if position.name.lower() == wanted)
    holding = (
        position
        for position in stage.positions
        if wanted in (part.lower() for part in position.parts)
    )
    return next(named, None) or next(holding, None)


def _leg(wanted: str, demands: Demands) -> Leg | None:
    return next(
        (leg for leg in demands.legs if wanted in (leg.name.lower(), leg.midpoint.lower())), None
    )


def _explain_port(port: Port, stage: Stage, demands: Demands, look: Look) -> Explanation:
    stated = (("voltage", port.voltage, "V"), ("current", port.current, "A"))
    return Explanation(
        f"{port.name}  {_PORT_WORDS[port.kind]} at {', '.join(port.nets)}  ({port.span})",
        (
            Entry("stated in", port.stated_in),
            *(
                Entry(label, range_figure(value, unit, look) if value else "left open")
                for label, value, unit in stated
            ),
            *variable_entries(_names_with(port.name, demands), stage, demands, 0, look),
        ),
    )


def _explain_part(part: Part, stage: Stage, demands: Demands, look: Look) -> Explanation:
    role = stage.roles.get(part.name)
    pins = ", ".join(f"{pin.role} on {pin.net}" for pin in part.pins)
    return Explanation(
        f"{part.name}  {part.kind.value} {part.text}".rstrip() + f"  ({part.span})",
        (
            Entry("pins", pins),
            Entry("role", _role_text(part, stage) if role is not None else "none found"),
            *(Entry(path, _datum_text(part, path), 1) for path in sorted(part.data)),
            *variable_entries(_names_with(part.name, demands), stage, demands, 0, look),
            *_carried_by(part.name, demands, look),
        ),
    )


def _role_text(part: Part, stage: Stage) -> str:
    role = stage.roles[part.name].value
    of = stage.role_of.get(part.name)
    return f"{role} of {of}" if of else role


def _datum_text(part: Part, path: str) -> str:
    datum = part.data[path]
    unit = datum.dimension.value
    value = datum.value
    text = figure(value, unit) if isinstance(value, float | int) else range_figure(value, unit)
    return f"{text}, from {datum.stated_in} ({datum.span})"


def _names_with(owner: str, demands: Demands) -> tuple[str, ...]:
    """The variables that belong to a part or port: `i(L1)`, `v(C7)`, `i(pump/U)`."""
    ends = (f"({owner.lower()})", f"({owner.lower()}/")
    return tuple(v.name for v in demands.variables if any(end in v.name.lower() for end in ends))


def _carried_by(part: str, demands: Demands, look: Look) -> tuple[Entry, ...]:
    """The positions whose demand is made of this part's quantity."""
    names = set(_names_with(part, demands))
    entries = []
    for demand in demands.positions.values():
        sides = (
            ("must block", "V", demand.off_voltage, (demand.off_low, demand.off_high)),
            ("must carry", "A", demand.on_current, (demand.on_low, demand.on_high)),
        )
        for words, unit, value, witnesses in sides:
            if any(names & set(witness.form.names) for witness in witnesses if witness):
                text = f"therefore {words} {range_figure(value, unit, look)}"
                entries.append(Entry(demand.position, text))
    return tuple(sorted(entries, key=lambda entry: natural_key(entry.label)))
