"""The product of this step: what the circuit asks of each position, and how that is known."""

from collections.abc import Mapping

from rulecheck.demand.bank_records import BankFindings
from rulecheck.demand.commands import CommandedGroup
from rulecheck.demand.waveforms.records import Waveforms
from rulecheck.values import AffineForm, Interval, QuadrantSet, Unknown
from rulecheck.values.record import Record, field


class Variable(Record):
    """A stiff quantity: constant within a switching period, with its range and its reason."""

    name: str
    """`v(battery)`, `i(L1)`."""
    unit: str
    range: Interval | Unknown
    origin: str
    """One sentence: the sheet line, the average, the power balance that fixed the range."""
    form: AffineForm | None = None
    """The mean as a form in other variables, where the network fixes it."""
    ripple: float = 0.0
    """Half the peak-to-peak ripple contained in the range."""


class Witness(Record):
    """Why a number is what it is: the state, the form and the corner of the variables."""

    value: float
    on: tuple[str, ...]
    """The positions that are on in that state."""
    form: AffineForm
    corner: tuple[tuple[str, float], ...]


class PositionDemand(Record):
    position: str
    off_voltage: Interval | Unknown
    on_current: Interval | Unknown
    quadrants: QuadrantSet | Unknown
    """Known by the signs even where the magnitudes are not."""
    off_low: Witness | None
    off_high: Witness | None
    on_low: Witness | None
    on_high: Witness | None
    not_covered: tuple[str, ...] = ()


class State(Record):
    """One legal combination of on positions in a group, with the forms it leads to."""

    on: tuple[str, ...]
    off_voltages: Mapping[str, AffineForm]
    on_currents: Mapping[str, AffineForm]
    available: bool
    """False where a free path of the drawn devices forbids it."""


class Group(Record):
    """Positions whose states depend on each other."""

    positions: tuple[str, ...]
    states: tuple[State, ...]
    analysed: bool
    why_not: str = ""
    cannot_work: bool = False
    """Not analysed because no reading of the drawn stage works, not for want of time or data."""
    forbidden_states: tuple[tuple[str, ...], ...] = ()
    """States the stage needs but which a drawn device's free path forbids."""
    forbidding: tuple[str, ...] = ()
    """The positions whose free paths forbid them."""


class Leg(Record):
    """Positions that share a midpoint, named from the states."""

    name: str
    kind: str
    """`half-bridge leg`, `chopper cell`, `rectifier leg`, `multilevel leg`, `selector leg`."""
    midpoint: str
    rails: tuple[str, ...]
    high: tuple[str, ...]
    low: tuple[str, ...]
    others: tuple[str, ...]
    levels: int


class Bridge(Record):
    name: str
    kind: str
    """`H-bridge` or `three-phase bridge`."""
    legs: tuple[str, ...]


class Undetermined(Record):
    """A quantity nobody stated and nothing derives."""

    what: str
    settle_with: str


class InterruptedCurrent(Record):
    """With all gates off, this current finds no free path."""

    carrier: str
    """The inductor, winding or port."""
    direction: str
    """`NET -> NET`: the way the current flows through the carrier."""
    nets: tuple[str, str]
    positions: tuple[str, ...]
    """Positions at the nets that could have carried it."""
    within: Interval | Unknown


class FreeShort(Record):
    """With all gates off, free paths close a loop around a positive voltage."""

    positions: tuple[str, ...]
    across: str
    """The voltage that is shorted, as a form."""
    voltage: Interval | Unknown


class HardCommutation(Record):
    """A free path that carries in one state and is turned off by another position turning on."""

    position: str
    by: str
    current: float | Unknown
    voltage: float | Unknown


class Demands(Record):
    variables: tuple[Variable, ...]
    positions: Mapping[str, PositionDemand]
    groups: tuple[Group, ...]
    legs: tuple[Leg, ...]
    bridges: tuple[Bridge, ...]
    undetermined: tuple[Undetermined, ...]
    interrupted: tuple[InterruptedCurrent, ...]
    free_shorts: tuple[FreeShort, ...]
    hard_commutations: tuple[HardCommutation, ...]
    assumed: tuple[str, ...]
    not_covered: tuple[str, ...]
    waveforms: Waveforms = field(default_factory=Waveforms)
    banks: BankFindings = field(default_factory=BankFindings)
    commanded: tuple[CommandedGroup, ...] = ()
    """What the gates' commands do to each group that has gates."""
