"""A hand-made battery leg: what the steps would hand on for a half bridge with one inductor."""

from rulecheck.capability import Capabilities, Capability
from rulecheck.demand import (
    Demands,
    Group,
    HardCommutation,
    InterruptedCurrent,
    Leg,
    PositionDemand,
    State,
    Variable,
    Witness,
)
from rulecheck.parts import Datum, Kind, Part, PartList, Pin
from rulecheck.stage import Port, PortKind, Position, Role, Stage, Switching
from rulecheck.values import Dimension, Interval, Span, Unknown, variable
from tests.report.examples import BOTH_CURRENTS, direction

RATING = Datum(100.0, Dimension.VOLTAGE, "part data SW-N100-*", Span("hut.parts.yaml", 3, 5))


def battery_leg() -> tuple[Stage, Capabilities, Demands]:
    return _stage(), _capabilities(), _demands()


def _stage() -> Stage:
    parts = (
        _switch("Q1", "BUS", "SW", 14),
        _switch("Q2", "SW", "PGND", 15),
        Part("L1", Kind.INDUCTOR, (Pin("1", "BAT"), Pin("2", "SW")), Span("leg.cir", 9), 22e-6),
        Part("R7", Kind.RESISTOR, (Pin("1", "BUS"), Pin("2", "N1")), Span("leg.cir", 20), 10.0),
    )
    part_list = PartList(
        "leg.cir", parts, (), "PGND", (), (), (), {part.name: part for part in parts}
    )
    battery = Port(
        "battery", PortKind.DC, ("BAT", "PGND"), "", Interval(42.0, 58.0), Interval(-80.0, 80.0),
        None, None, "sheet", Span("leg.stage.yaml", 2, 3),
    )  # fmt: skip
    positions = (_position("Q1", "BUS", "SW", 14), _position("Q2", "SW", "PGND", 15))
    return Stage(
        "leg.cir", part_list, (battery,), (), (), positions, {},
        {"Q1": Role.SWITCH, "Q2": Role.SWITCH, "L1": Role.INDUCTOR, "R7": Role.SNUBBER},
        {"R7": "Q1"},
        switching=Switching(20e3, 400e-9),
    )  # fmt: skip


def _switch(name: str, drain: str, source: str, line: int) -> Part:
    pins = (Pin("drain", drain), Pin("gate", f"G{name}"), Pin("source", source))
    return Part(
        name, Kind.MOSFET, pins, Span("leg.cir", line), Unknown("", ""), "SW-N100-7", (),
        {"ratings.blocking": RATING},
    )  # fmt: skip


def _position(name: str, start: str, end: str, line: int) -> Position:
    return Position(name, (name,), start, end, (), True, False, True, Span("leg.cir", line))


def _capabilities() -> Capabilities:
    forward = direction(current=Unknown("current", "ratings.current of part SW-N100-7"))
    reverse = direction(0.0, 120.0, freewheels=True)
    return Capabilities(
        {name: Capability(name, forward, reverse, BOTH_CURRENTS) for name in ("Q1", "Q2")}
    )


def _demands() -> Demands:
    current, bus = variable("i(L1)"), variable("v(bus)")
    states = (
        State(("Q1",), {"Q2": bus}, {"Q1": current}, True),
        State(("Q2",), {"Q1": bus}, {"Q2": -current}, True),
    )
    return Demands(
        (
            Variable("v(bus)", "V", Interval(36.0, 58.0), "sheet, port bus"),
            Variable("supplies(battery)", "A", Interval(-80.0, 80.0), "sheet, port battery"),
            Variable(
                "i(L1)", "A", Interval(-86.0, 86.0), "no DC current through the capacitors",
                variable("supplies(battery)"), 6.0,
            ),
        ),
        {"Q1": _demand("Q1", "Q2"), "Q2": _demand("Q2", "Q1")},
        (Group(("Q1", "Q2"), states, True),),
        (Leg("SW", "half-bridge leg", "SW", ("BUS", "PGND"), ("Q1",), ("Q2",), (), 2),),
        (), (),
        (InterruptedCurrent("L1", "BAT -> SW", ("BAT", "SW"), ("Q1",), Interval(0.0, 86.0)),),
        (),
        (HardCommutation("Q2", "Q1", 86.0, 58.0),),
        (), (),
    )  # fmt: skip


def _demand(name: str, other: str) -> PositionDemand:
    def blocking(value: float) -> Witness:
        return Witness(value, (other,), variable("v(bus)"), (("v(bus)", value),))

    def carrying(value: float) -> Witness:
        return Witness(value, (name,), variable("i(L1)"), (("i(L1)", value),))

    return PositionDemand(
        name, Interval(36.0, 58.0), Interval(-86.0, 86.0), BOTH_CURRENTS,
        blocking(36.0), blocking(58.0), carrying(-86.0), carrying(86.0),
        ("spikes of the loop inductance",),
    )  # fmt: skip
