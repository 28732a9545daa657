"""What drives a gate: the output, the resistances both ways, the return and the supply."""

from enum import StrEnum

from rulecheck.values import Unknown
from rulecheck.values.record import Record


class DrivenBy(StrEnum):
    """What kind of thing commands a gate."""

    DRIVER = "driver"
    SOURCE = "source"
    ISOLATOR = "isolator"
    CONTROLLER = "controller"
    TRANSFORMER = "transformer"
    MODULE = "module"
    """The device is inside a module with its own driver."""
    CIRCUIT = "circuit"
    """A part whose inside is not described; taken for a driver."""
    TRANSISTOR = "transistor"
    """Drive transistors with nothing found behind them."""
    CONNECTOR = "connector"
    """The command comes from another board."""
    CONSTANT = "constant"
    """A DC source: nothing ever changes the gate."""
    NOTHING = ""


class DriveOutput(Record):
    """The pin that commands a gate, and the pins that go with it; merged nets, empty: no pin."""

    by: DrivenBy
    part: str
    role: str
    net: str
    return_net: str = ""
    """What its voltage is measured against."""
    off_net: str = ""
    """The net that it pulls to when off: the return, or a rail below it."""
    supply_net: str = ""
    supply_role: str = ""
    input_nets: tuple[str, ...] = ()
    own_return: bool = False
    """It has a return pin of its own, apart from the part's ground."""
    isolated: bool = False
    """Its input side has its own ground."""
    input_ground: str = ""
    """The ground of the input side, or of the whole part."""

    @property
    def floating_supply(self) -> bool:
        """Its supply is the floating one of a bootstrap."""
        return self.supply_role.startswith("bootstrap")


class GatePath(Record):
    """One direction of a gate's drive, between the gate and what pulls it."""

    resistance: float | Unknown
    """Ohm, of everything between, parallel ways counted together."""
    resistors: tuple[str, ...]
    """The resistors that share the current, nearest to the gate first."""
    ends_at: str
    """The net that it ends at; empty where nothing pulls the gate that way."""


class GateClamp(Record):
    """Zeners from a gate to its return; volts, gate over return."""

    parts: tuple[str, ...]
    highest: float | Unknown
    lowest: float | Unknown


class GateDrive(Record):
    """Everything found from one gate net back to what commands it."""

    gate: str
    devices: tuple[str, ...]
    returns: tuple[str, ...]
    """The devices' own source, emitter and Kelvin nets."""
    output: DriveOutput
    turn_on: GatePath
    turn_off: GatePath
    buffers: tuple[str, ...] = ()
    """Drive transistors between the output and the gate."""
    turn_off_transistors: tuple[str, ...] = ()
    """Of them, those that pull the gate to the device's own return."""
    transformer: str = ""
    """The gate transformer between the output and the gate."""
    hold_resistors: tuple[str, ...] = ()
    """Resistors from the gate to the device's own return."""
    clamps: tuple[GateClamp, ...] = ()
    inverted: bool = False
    """The drive transistors between the output and the gate invert the command."""
    bias: float | Unknown = 0.0
    """Volts between the device's own return and the net that the output pulls to when off."""
    bias_parts: tuple[str, ...] = ()
    return_right: bool | Unknown = True
    """The output's return is the device's own source, emitter or Kelvin net, or a rail of a bias
    beside it."""
