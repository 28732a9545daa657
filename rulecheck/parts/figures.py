"""Every figure that part data, a card or a model may state: one table.

ratings: {blocking: 100 V}   ->   ratings.blocking, volts
M1 d g s s FET blocking=100  ->   the same
.model FET VDMOS(Vds=100)    ->   the same
"""

from collections.abc import Mapping

from rulecheck.parts.part import Kind
from rulecheck.values import Dimension
from rulecheck.values.record import Record

Words = tuple[str, ...]


class Figure(Record):
    """One stated number: where it stands, what it measures, whether a range may be given."""

    section: str
    name: str
    dimension: Dimension
    ranged: bool = False
    scales: bool = False
    """Parallel devices on one card multiply it."""
    words: Words = ()
    """The words allowed where it is no number."""

    @property
    def path(self) -> str:
        return f"{self.section}.{self.name}"


_V, _A, _S = Dimension.VOLTAGE, Dimension.CURRENT, Dimension.TIME
_OHM, _F, _C = Dimension.RESISTANCE, Dimension.CAPACITANCE, Dimension.CHARGE

FIGURES: tuple[Figure, ...] = (
    Figure("ratings", "blocking", _V),
    Figure("ratings", "reverse-blocking", _V),
    Figure("ratings", "current", _A, scales=True),
    Figure("ratings", "peak-current", _A, scales=True),
    Figure("ratings", "rms-current", _A, scales=True),
    Figure("ratings", "ripple-current", _A, scales=True),
    Figure("ratings", "voltage", _V),
    Figure("ratings", "dc-voltage", _V),
    Figure("ratings", "clamp", _V),
    Figure("ratings", "isolation", _V),
    Figure("ratings", "gate", _V, ranged=True),
    Figure("ratings", "power", Dimension.POWER, scales=True),
    Figure("ratings", "energy", Dimension.ENERGY, scales=True),
    Figure("ratings", "junction-temperature", Dimension.TEMPERATURE),
    Figure(
        "ratings",
        "dielectric",
        Dimension.NUMBER,
        words=("ceramic", "film", "electrolytic", "tantalum"),
    ),
    Figure("ratings", "core", Dimension.NUMBER, words=("polarised",)),
    Figure("gate", "charge", _C, scales=True),
    Figure("gate", "threshold", _V, ranged=True),
    Figure("gate", "miller-capacitance", _F, scales=True),
    Figure("gate", "input-capacitance", _F, scales=True),
    Figure("gate", "resistance", _OHM),
    Figure("gate", "turn-on", _S, ranged=True),
    Figure("gate", "turn-off", _S, ranged=True),
    Figure("diode", "recovery-charge", _C, scales=True),
    Figure("diode", "recovery-time", _S),
    Figure("driver", "dead-time", _S, ranged=True),
    Figure("driver", "interlock", Dimension.NUMBER, words=("true", "false")),
    Figure("driver", "inverts", Dimension.NUMBER, words=("output",)),
    Figure("driver", "delay", _S, ranged=True),
    Figure("driver", "output-current", _A),
    Figure("driver", "lockout", _V, ranged=True),
    Figure("driver", "supply", _V, ranged=True),
    Figure("driver", "isolation", _V),
    Figure("driver", "sink-resistance", _OHM),
    Figure("driver", "source-resistance", _OHM),
    Figure("driver", "quiescent-current", _A),
)
BY_PATH: Mapping[str, Figure] = {figure.path: figure for figure in FIGURES}
SECTIONS = tuple(dict.fromkeys(figure.section for figure in FIGURES))

_LINE = ("ratings.current", "ratings.voltage", "ratings.dc-voltage")
_DEVICE = (
    *("ratings.blocking", "ratings.current", "ratings.peak-current"),
    *("ratings.power", "ratings.junction-temperature"),
)
_REVERSE = "ratings.reverse-blocking"
_RECOVERY = ("diode.recovery-charge", "diode.recovery-time")
_GATE = ("ratings.gate", *(f.path for f in FIGURES if f.section == "gate"))
_TRANSISTOR = (*_DEVICE, _REVERSE, *_GATE, *_RECOVERY)
_SIGNAL = (
    *("ratings.voltage", "ratings.current", "ratings.power", "ratings.junction-temperature"),
    *("ratings.isolation", *(f.path for f in FIGURES if f.section == "driver")),
)

APPLICABLE: Mapping[Kind, Words] = {
    Kind.DIODE: (*_DEVICE, *_RECOVERY),
    Kind.ZENER: (*_DEVICE, *_RECOVERY, "ratings.clamp"),
    Kind.THYRISTOR: _TRANSISTOR,
    Kind.TRIAC: _TRANSISTOR,
    Kind.BJT: _TRANSISTOR,
    Kind.MOSFET: _TRANSISTOR,
    Kind.P_MOSFET: _TRANSISTOR,
    Kind.GAN_HEMT: _TRANSISTOR,
    Kind.IGBT: _TRANSISTOR,
    Kind.IGBT_WITH_DIODE: _TRANSISTOR,
    Kind.REVERSE_BLOCKING_IGBT: _TRANSISTOR,
    Kind.IDEAL_SWITCH: _TRANSISTOR,
    Kind.RESISTOR: ("ratings.power", "ratings.energy", "ratings.voltage", "ratings.current"),
    Kind.CAPACITOR: (
        *("ratings.voltage", "ratings.ripple-current", "ratings.dielectric"),
        "ratings.isolation",
    ),
    Kind.INDUCTOR: (
        *("ratings.current", "ratings.rms-current", "ratings.isolation"),
        "ratings.core",
    ),
    Kind.WINDING_SET: (
        *("ratings.current", "ratings.rms-current", "ratings.voltage"),
        "ratings.isolation",
    ),
    Kind.FUSE: _LINE,
    Kind.CIRCUIT_BREAKER: _LINE,
    Kind.CONNECTOR: _LINE,
    Kind.RELAY: (*_LINE, "ratings.isolation"),
    Kind.NTC: ("ratings.current", "ratings.power", "ratings.energy"),
    Kind.VARISTOR: ("ratings.voltage", "ratings.dc-voltage", "ratings.clamp", "ratings.power"),
    Kind.COMMON_MODE_CHOKE: (*_LINE, "ratings.isolation"),
    Kind.CURRENT_TRANSFORMER: (*_LINE, "ratings.isolation"),
    Kind.VOLTAGE_SOURCE: (),
    Kind.CURRENT_SOURCE: (),
    Kind.DRIVER: _SIGNAL,
    Kind.ISOLATOR: _SIGNAL,
    Kind.CONTROLLER: _SIGNAL,
    Kind.SENSOR: _SIGNAL,
    Kind.MODULE: (*_SIGNAL, "ratings.blocking"),
    Kind.OTHER: tuple(BY_PATH),
    Kind.UNKNOWN: tuple(BY_PATH),
}
"""Paths that may be stated of a kind; of others the statement would have no effect."""


def figure_named(kind: Kind, name: str) -> Figure | None:
    """The figure that a card's own parameter states, by its name with hyphens."""
    return next(
        (BY_PATH[path] for path in APPLICABLE[kind] if path.partition(".")[2] == name), None
    )


_MOS = {
    "vds": "ratings.blocking",
    "vdss": "ratings.blocking",
    "bvdss": "ratings.blocking",
    "bv": "ratings.blocking",
    "qg": "gate.charge",
}
_BIPOLAR = {
    "vceo": "ratings.blocking",
    "bvceo": "ratings.blocking",
    "icrating": "ratings.current",
    "icmax": "ratings.current",
}
_RECTIFIER = {
    "vrrm": "ratings.blocking",
    "vpk": "ratings.blocking",
    "bv": "ratings.blocking",
    "iave": "ratings.current",
}
_INSULATED_GATE = {
    "bvces": "ratings.blocking",
    "vces": "ratings.blocking",
    "icmax": "ratings.current",
    "qg": "gate.charge",
}
MODEL_FIGURES: Mapping[str, Mapping[str, str]] = {
    "D": _RECTIFIER,
    "NMOS": _MOS,
    "PMOS": _MOS,
    "VDMOS": _MOS,
    "NPN": _BIPOLAR,
    "PNP": _BIPOLAR,
    "NIGBT": _INSULATED_GATE,
    "IGBT": _INSULATED_GATE,
}
"""By model type: the parameters that state a figure, in the order in which they count.

A diode's breakdown voltage `bv` is the bound that the simulation keeps; common practice sets
it to the device's rating.
"""
