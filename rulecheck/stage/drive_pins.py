"""Which pins of a driver go with an output: its return, supply, input and off rail.

output-high   return-high, else return, else ground     supply: bootstrap-high, else bootstrap
output-a      return-a, else return, else ground        supply: supply-a, else supply
output-on     the pulling-up half of a split output; output-off the pulling-down half
"""

from collections.abc import Iterable

from rulecheck.parts import Kind, Part
from rulecheck.stage.gate_drive import DrivenBy, DriveOutput
from rulecheck.stage.layout import Layout
from rulecheck.values.record import replace

BY_KIND = {
    Kind.DRIVER: DrivenBy.DRIVER,
    Kind.ISOLATOR: DrivenBy.ISOLATOR,
    Kind.CONTROLLER: DrivenBy.CONTROLLER,
    Kind.SENSOR: DrivenBy.CONTROLLER,
    Kind.UNKNOWN: DrivenBy.CIRCUIT,
    Kind.OTHER: DrivenBy.CIRCUIT,
    Kind.CONNECTOR: DrivenBy.CONNECTOR,
}
UP_WORDS = frozenset({"on", "up", "pullup"})
DOWN_WORDS = frozenset({"off", "down", "sink", "pulldown"})
_GIVING = ("output", "out-", "outp", "pwm", "gate", "collector", "out")
_INPUT_SIDE = ("supply-in", "ground-in")
_LOW = "low"


def gives_out(part: Part, role: str) -> bool:
    """Whether this pin can command a gate; any pin of a part whose inside is not described."""
    if part.kind in (Kind.UNKNOWN, Kind.OTHER):
        return not role.startswith(("supply", "ground", "vcc", "vdd", "gnd", "vss", "input"))
    if part.kind is Kind.CONNECTOR:
        return True
    return part.kind in BY_KIND and role.startswith(_GIVING)


def drive_output(layout: Layout, part: Part, role: str, net: str) -> DriveOutput:
    """The output with the pins that belong to it."""
    by = BY_KIND[part.kind]
    found = DriveOutput(by, part.name, role, net)
    if by in (DrivenBy.CIRCUIT, DrivenBy.CONNECTOR):
        return found
    channel = _channel(role)
    own = _first(part, _suffixed(("return", "ground-out"), channel))
    shared = _first(part, ("ground",))
    low_side = channel == _LOW or own is None
    return_pin = own if own is not None else shared
    supply = _first(part, _supply_roles(channel, low_side))
    off = _first(part, _suffixed(("negative", "supply-negative"), channel)) or return_pin
    return replace(
        found,
        return_net=_net(layout, part, return_pin),
        off_net=_net(layout, part, off),
        supply_net=_net(layout, part, supply),
        supply_role=supply or "",
        input_nets=_inputs(layout, part, channel),
        own_return=own is not None,
        isolated=part.kind is Kind.ISOLATOR or any(part.net(r) for r in _INPUT_SIDE),
        input_ground=_net(layout, part, _first(part, ("ground-in", "ground"))),
    )


def _channel(role: str) -> str:
    """`high` of `output-high-on`, `a` of `output-a`, nothing of `output`."""
    words = [word for word in role.split("-")[1:] if word not in UP_WORDS | DOWN_WORDS]
    return "-".join(words)


def pulls_up(role: str) -> bool:
    return not set(role.split("-")[1:]) & DOWN_WORDS


def pulls_down(role: str) -> bool:
    return not set(role.split("-")[1:]) & UP_WORDS


def _suffixed(names: Iterable[str], channel: str) -> tuple[str, ...]:
    names = tuple(names)
    own = tuple(f"{name}-{channel}" for name in names) if channel else ()
    return (*own, *names) if channel != _LOW else own


def _supply_roles(channel: str, low_side: bool) -> tuple[str, ...]:
    plain = (f"supply-{channel}",) if channel else ()
    if low_side:
        return (*plain, "supply", "supply-out")
    return (
        *((f"bootstrap-{channel}",) if channel else ()),
        "bootstrap",
        *plain,
        "supply-out",
        "supply",
    )


def _inputs(layout: Layout, part: Part, channel: str) -> tuple[str, ...]:
    roles = [pin.role for pin in part.pins if pin.role.startswith(("input", "in-"))]
    own = [role for role in roles if channel and role.endswith(f"-{channel}")]
    if own:
        roles = own
    elif "input" in roles:
        roles = ["input"]
    return tuple(dict.fromkeys(_net(layout, part, role) for role in roles))


def _first(part: Part, roles: Iterable[str]) -> str | None:
    return next((role for role in roles if part.net(role) is not None), None)


def _net(layout: Layout, part: Part, role: str | None) -> str:
    net = part.net(role) if role else None
    return layout.net(net) if net else ""
