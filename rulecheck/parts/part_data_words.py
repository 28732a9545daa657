"""What each key of a file of part data means, with an example of its value."""

from rulecheck.reading.keys import Word

_RATINGS = {
    "": Word("Limits that the maker states; which of them apply depends on the kind."),
    "blocking": Word(
        "The voltage that a power device withstands while off, forwards; of a diode its repetitive"
        " reverse voltage; of a zener its clamp voltage.",
        "100 V",
    ),
    "reverse-blocking": Word("The same backwards, where the device blocks that way.", "100 V"),
    "current": Word(
        "The current that it carries for ever; of an inductor the one at which it saturates.",
        "120 A",
    ),
    "peak-current": Word("The current that it carries for short pulses.", "480 A"),
    "rms-current": Word("The root-mean-square current that heats it no more than it may.", "95 A"),
    "ripple-current": Word("The alternating current that a capacitor carries, as rms.", "12 A"),
    "voltage": Word("The voltage that a capacitor, resistor, fuse or connector bears.", "100 V"),
    "dc-voltage": Word("The same where the voltage does not alternate.", "80 V"),
    "clamp": Word("The voltage at which a clamp holds its rated current.", "150 V"),
    "isolation": Word("The voltage that it withstands between its two sides.", "5 kV"),
    "gate": Word("The voltages that its gate withstands against its source.", "[-20 V, 20 V]"),
    "power": Word("The heat that it gets rid of.", "3 W"),
    "energy": Word("The heat that it takes in at once, such as at a first charging.", "40 J"),
    "junction-temperature": Word("The hottest that its junction may become.", "150 degC"),
    "dielectric": Word("What a capacitor is made of.", "film"),
    "core": Word("Of an inductor with a magnet: it wants current to its second net.", "polarised"),
}
_GATE = {
    "": Word("The gate of a device, as its data sheet states it."),
    "charge": Word("The total gate charge.", "90 nC"),
    "threshold": Word("The gate voltage at which it begins to conduct.", "[2 V, 4 V]"),
    "miller-capacitance": Word("The capacitance from gate to drain or collector.", "40 pF"),
    "input-capacitance": Word("The capacitance that the driver sees.", "6 nF"),
    "resistance": Word("The resistance inside the device, in series with its gate.", "1.5 ohm"),
    "turn-on": Word("From the command at the gate to full conduction.", "40 ns"),
    "turn-off": Word("From the command at the gate to full blocking.", "70 ns"),
}
_DIODE = {
    "": Word("The recovery of a diode, or of the diode in a device."),
    "recovery-charge": Word("The charge that it gives back when it is turned off.", "110 nC"),
    "recovery-time": Word("How long it takes to block again.", "60 ns"),
}
_DRIVER = {
    "": Word("What a gate driver, an isolator or a controller does by itself."),
    "dead-time": Word("The dead time that it keeps by itself.", "300 ns"),
    "inverts": Word("The outputs that are high while their input is low.", "[output-low]"),
    "interlock": Word("Whether it refuses to turn on both of its outputs at once.", "true"),
    "delay": Word(
        "The delay from its input to its output, shortest and longest.", "[20 ns, 45 ns]"
    ),
    "output-current": Word("The peak current of its output.", "4 A"),
    "lockout": Word("The supply voltage below which it keeps its outputs off.", "8.5 V"),
    "supply": Word("The supply voltages that it may be run from.", "[10 V, 20 V]"),
    "isolation": Word("The voltage between its input side and its output side.", "1500 V"),
    "sink-resistance": Word("The resistance of its output while it pulls down.", "1.2 ohm"),
    "source-resistance": Word("The resistance of its output while it pulls up.", "2 ohm"),
    "quiescent-current": Word("The current that it takes from its floating supply.", "200 uA"),
}
_WINDINGS = {
    "": Word("The windings of a winding set, by a name of your choice.", called="primary"),
    "*.pins": Word("The pin with the dot, then the other pin.", "[1, 2]"),
    "*.turns": Word("The number of its turns.", "24"),
}


def _below(place: str, words: dict[str, Word]) -> dict[str, Word]:
    return {f"{place}.{name}" if name else place: word for name, word in words.items()}


def _of_a_device(place: str) -> dict[str, Word]:
    return {
        **_below(f"{place}.ratings", _RATINGS),
        **_below(f"{place}.gate", _GATE),
        **_below(f"{place}.diode", _DIODE),
    }


PART_DATA_WORDS = {
    "parts": Word(
        "The parts, each by its model, subcircuit or value text; `*` and `?` stand for any signs.",
        called='"SW-N100-*"',
    ),
    "parts.*.kind": Word("What it is.", "mosfet"),
    "parts.*.pins": Word(
        "The roles of its pins, in the order of the netlist, or the pin of each role.",
        "[drain, gate, source]",
    ),
    **_of_a_device("parts.*"),
    **_below("parts.*.driver", _DRIVER),
    "parts.*.devices": Word(
        "The devices inside a module, by a name of your choice.", called="high"
    ),
    "parts.*.devices.*.kind": Word("What the inner device is.", "igbt-with-diode"),
    "parts.*.devices.*.pins": Word(
        "The pin of the module on each of its roles.",
        "{collector: plus, gate: gate-high, emitter: mid}",
    ),
    **_of_a_device("parts.*.devices.*"),
    **_below("parts.*.windings", _WINDINGS),
    "parts.*.inductance": Word("The inductance of a choke that its card does not give.", "22 uH"),
}
