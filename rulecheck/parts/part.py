"""What is known of one element: kind, pins by role, ratings with their provenance, edges."""

from collections.abc import Mapping
from enum import StrEnum

from rulecheck.netlist import Waveform
from rulecheck.values import Dimension, Interval, Problem, Span, Unknown
from rulecheck.values.record import Record, field


class Kind(StrEnum):
    DIODE = "diode"
    ZENER = "zener"
    THYRISTOR = "thyristor"
    TRIAC = "triac"
    BJT = "bjt"
    MOSFET = "mosfet"
    P_MOSFET = "p-mosfet"
    GAN_HEMT = "gan-hemt"
    IGBT = "igbt"
    IGBT_WITH_DIODE = "igbt-with-diode"
    REVERSE_BLOCKING_IGBT = "reverse-blocking-igbt"
    IDEAL_SWITCH = "ideal-switch"
    RESISTOR = "resistor"
    CAPACITOR = "capacitor"
    INDUCTOR = "inductor"
    WINDING_SET = "winding-set"
    VOLTAGE_SOURCE = "voltage-source"
    CURRENT_SOURCE = "current-source"
    DRIVER = "driver"
    ISOLATOR = "isolator"
    CONTROLLER = "controller"
    CONNECTOR = "connector"
    FUSE = "fuse"
    CIRCUIT_BREAKER = "circuit-breaker"
    RELAY = "relay"
    NTC = "ntc"
    VARISTOR = "varistor"
    COMMON_MODE_CHOKE = "common-mode-choke"
    CURRENT_TRANSFORMER = "current-transformer"
    SENSOR = "sensor"
    MODULE = "module"
    OTHER = "other"
    UNKNOWN = "unknown"

    @property
    def called(self) -> str:
        """The kind with its article: `a mosfet`, `an igbt`."""
        return f"{'an' if self.value[0] in 'aeiou' else 'a'} {self.value}"


class Conduction(StrEnum):
    """How an edge conducts in its direction."""

    FREE = "free"
    GATED = "gated"
    NEVER = "never"


class Edge(Record):
    """One direction through a device, from net `tail` to net `head`.

    `blocks` is the voltage (tail over head, volts) that it withstands when it does not
    conduct: 0 for a free edge. `current` is its rating in amperes in that direction.
    A MOSFET's source-to-drain edge is free (its gate only lowers the drop).
    """

    tail: str
    head: str
    conduction: Conduction
    blocks: float | Unknown
    current: float | Unknown
    part: str = ""
    """The name of the part that the edge belongs to."""


class Pin(Record):
    role: str
    net: str


class Datum(Record):
    """A stated number or range, in SI units, and who stated it."""

    value: float | Interval
    dimension: Dimension
    stated_in: str
    """`card`, `model NAME` or `part data KEY`."""
    span: Span


class Part(Record):
    name: str
    kind: Kind
    pins: tuple[Pin, ...]
    span: Span
    value: float | Unknown
    """Ohm, henry, farad, or a source's DC value."""
    text: str = ""
    """Model, subcircuit or value text on the card."""
    edges: tuple[Edge, ...] = ()
    """Both directions of every power path; empty for all but power devices."""
    data: Mapping[str, Datum] = field(default_factory=dict)
    """Stated figures by path: `ratings.blocking`, `gate.charge`, `diode.recovery-time`,
    `driver.dead-time`."""
    facts: Mapping[str, str] = field(default_factory=dict)
    """Stated words by path, such as `ratings.dielectric`."""
    settle_in: str = ""
    """Where a missing datum would be written: `part SW-N100-7 (in hut.parts.yaml)`."""
    waveform: Waveform | None = None
    multiplicity: float = 1.0
    module: str = ""
    """The module part that this inner device belongs to; empty otherwise."""
    instance: str = ""
    instance_chain: tuple[Span, ...] = ()
    named_by: str = ""
    """What says more of it than its letter: `part data`, `model`, `subcircuit`; else empty."""

    def net(self, role: str) -> str | None:
        """The net on the pin of that role, or None where the part has no such pin."""
        return next((pin.net for pin in self.pins if pin.role == role), None)

    @property
    def nets(self) -> tuple[str, ...]:
        return tuple(pin.net for pin in self.pins)

    @property
    def gated(self) -> bool:
        return any(edge.conduction is Conduction.GATED for edge in self.edges)

    def datum(self, path: str) -> Datum | Unknown:
        """The stated figure, or what to write to state it."""
        return self.data.get(path) or self.missing(path)

    def missing(self, path: str) -> Unknown:
        """The figure as one that nobody stated."""
        what = path.partition(".")[2] or path
        return Unknown(f"{what} of {self.name}", f"{path} of {self.settle_in}")


class Core(Record):
    """Windings on one magnetic core: the coupled inductors' names and their relative turns.

    Turns are proportional to the square root of inductance; the dot is at the first net.
    """

    name: str
    windings: tuple[str, ...]
    turns: tuple[float, ...]
    span: Span


class PartList(Record):
    """All parts in netlist order; of a subcircuit either the instance or its contents."""

    file: str
    parts: tuple[Part, ...]
    cores: tuple[Core, ...]
    ground: str
    grounds: tuple[str, ...]
    not_understood: tuple[str, ...]
    """Names of parts of kind UNKNOWN and of elements whose cards could not be read."""
    assumed: tuple[str, ...]
    """Readings that the user may overrule, one sentence each."""
    by_name: Mapping[str, Part] = field(default_factory=dict)
    """By the part's name as written."""
    problems: tuple[Problem, ...] = ()
    """Errors and notes of part data and of the cards' own figures."""
