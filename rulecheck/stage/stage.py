"""The product of this step: the power stage as ports, branches and positions on merged nets."""

from collections.abc import Mapping
from enum import StrEnum

from rulecheck.parts import PartList
from rulecheck.stage.gate_command import GateCommand
from rulecheck.stage.gate_drive import GateDrive
from rulecheck.stage.position import Position
from rulecheck.values import Interval, Span, Unknown
from rulecheck.values.record import Record, field


class PortKind(StrEnum):
    DC = "dc"
    AC = "ac"
    PHASES = "phases"


class Port(Record):
    """Where the stage meets the world, from the sheet or from a source of the netlist.

    `current` is the mean (DC) or plus and minus the amplitude (AC) out of the first net into
    the stage; `voltage` likewise of the first net over the second, for phases of a phase over
    the neutral. None is a quantity that the port leaves free.
    """

    name: str
    kind: PortKind
    nets: tuple[str, ...]
    """DC and AC: plus and minus; phases: the phases in order. Merged nets."""
    neutral: str
    """Of phases: the net, or empty where the star point is not connected."""
    voltage: Interval | None
    current: Interval | None
    power: Interval | None
    """Into the stage, watts."""
    frequency: Interval | None
    stated_in: str
    """`sheet` or the element of the netlist that serves."""
    span: Span
    least_amplitude: float = 0.0
    """Of an AC voltage: the smallest amplitude that the sheet states."""
    draws: bool = False
    """The sheet says `draws`: an AC port takes power out of the stage."""
    source: str = ""
    """What the sheet says stands behind it: `battery`, `mains`, ...; empty where it does not."""
    fused_elsewhere: bool = False
    withstands: tuple[str, ...] = ()
    """What it is to survive from outside: `reverse-polarity`, `surge`."""
    named_nets: tuple[str, ...] = ()
    """Its nets as the sheet names them, before wires are merged."""
    modulation: str = ""
    """Of an AC port between two legs: `unipolar` or `bipolar`; empty where nobody states it."""
    modulation_index: Interval | None = None
    power_factor: Interval | None = None
    """cos phi of an AC port's fundamental, positive whatever way the power goes."""
    ripple: float | None = None
    """The most that its voltage may have, volts peak to peak."""


class BranchKind(StrEnum):
    VOLTAGE = "voltage"
    CURRENT = "current"
    RESISTOR = "resistor"


class Branch(Record):
    """A two-terminal power branch that is no position, on merged nets.

    VOLTAGE: sources, voltage ports, bulk capacitors. CURRENT: inductors, current sources and
    current ports (positive from `start` through the branch to `end`). RESISTOR: loads.
    """

    name: str
    """The part's name, or `port/PORT` and `port/PORT/NET` for a phase."""
    kind: BranchKind
    start: str
    end: str
    value: float | None
    """Ohm, henry or farad where known."""
    part: str
    """The part's name; empty for a port."""
    port: str
    """The port's name; empty for a part."""
    given: Interval | None
    """The voltage or current that sheet or source states."""


class Transformer(Record):
    """Ideal windings on one core; each is (start, end) with the dot at start."""

    name: str
    windings: tuple[tuple[str, str], ...]
    turns: tuple[float, ...]
    parts: tuple[str, ...]
    magnetising: float | None
    """Henry, seen from the first winding."""
    ideal: bool = False
    """True where the magnetising current is neglected."""


class Role(StrEnum):
    SWITCH = "switch"
    WIRE = "wire"
    SNUBBER = "snubber"
    CLAMP = "clamp"
    BULK_CAPACITOR = "bulk capacitor"
    INDUCTOR = "inductor"
    WINDING = "winding"
    SOURCE = "source"
    LOAD = "load"
    GATE_DRIVE = "gate drive"
    BOOTSTRAP = "bootstrap"
    SUPPLY = "auxiliary supply"
    ISOLATION = "isolation capacitor"
    SHARING = "sharing"
    SENSE = "sense"
    PORT = "port"
    SIGNAL = "signal"
    IGNORED = "ignored"


class Switching(Record):
    """Of one leg or of all; None where nobody states it. Hertz and seconds."""

    frequency: float | None = None
    dead_time: float | None = None
    edge: float | None = None
    shortest_pulse: float | None = None
    stray_inductance: float | None = None
    """Of the loop through a leg and its capacitor, henry."""
    phase: float | None = None
    """Of one leg: when it turns on, degrees of the switching period."""


class Barrier(Record):
    """Two domains of the sheet that are to be separate; volts, None where nobody states them."""

    domains: tuple[str, str]
    voltage: float | None
    """The working voltage between them, as its peak."""
    test_voltage: float | None
    span: Span


class Crossing(Record):
    """A part at which two domains meet."""

    name: str
    """The part's name, or the core's."""
    barrier: Barrier
    insulates: bool | Unknown
    parts: tuple[str, ...]
    chain: tuple[str, ...]
    """Where it joins the domains: all parts of the shortest way, in order."""


class Stage(Record):
    netlist: str
    parts: PartList
    ports: tuple[Port, ...]
    branches: tuple[Branch, ...]
    transformers: tuple[Transformer, ...]
    positions: tuple[Position, ...]
    merged: Mapping[str, str]
    """Every net of the circuit -> the net that stands for it after merging wires."""
    roles: Mapping[str, Role]
    """By part name."""
    role_of: Mapping[str, str] = field(default_factory=dict)
    """By part name: the part or net that the role refers to (a snubber's position)."""
    given: Mapping[str, Interval] = field(default_factory=dict)
    """Overrides of the sheet by part name: the current of an inductor, the voltage of a
    capacitor, as a whole instantaneous range."""
    ground: str = "0"
    switching: Switching = field(default_factory=Switching)
    leg_switching: Mapping[str, Switching] = field(default_factory=dict)
    """By midpoint net."""
    gate_commands: Mapping[str, GateCommand] = field(default_factory=dict)
    """By device name: when the netlist's sources turn its gate on."""
    domains: Mapping[str, tuple[str, ...]] = field(default_factory=dict)
    """By name: nets that the sheet says belong together galvanically, as the netlist names them."""
    barriers: tuple[Barrier, ...] = ()
    """One for each two domains of the sheet."""
    crossings: tuple[Crossing, ...] = ()
    """Every part at which two domains of the sheet meet."""
    stated_current: Mapping[str, Interval] = field(default_factory=dict)
    """By part: what the sheet says passes it, AC as plus and minus its peak."""
    stated_voltage: Mapping[str, Interval] = field(default_factory=dict)
    """By part: what the sheet says stands across it."""
    leakage: Mapping[str, float] = field(default_factory=dict)
    """By winding: the leakage inductance seen from it, henry."""
    rms_currents: Mapping[str, float] = field(default_factory=dict)
    """By part: its largest rms current, where the sheet states it."""
    balance: Mapping[str, str] = field(default_factory=dict)
    """By winding: what keeps its mean voltage at zero, as the sheet says."""
    efficiency: float = 1.0
    sheet: str = ""
    """The sheet's file name; empty where there is none."""
    assumed: tuple[str, ...] = ()
    not_covered: tuple[str, ...] = ()
    gate_drives: Mapping[str, GateDrive] = field(default_factory=dict)
    """By merged gate net: what drives the devices with their gate there."""
    gate_supplies: Mapping[str, Interval] = field(default_factory=dict)
    """By merged net: volts over the return that goes with it, where the sheet states them."""
