"""What each key of a stage sheet means, with an example of its value."""

from rulecheck.reading.keys import Word

_SWITCHING = {
    "frequency": Word("How often each switch is turned on in a second.", "20 kHz"),
    "dead-time": Word(
        "How long both switches of a leg are commanded off between two states.", "400 ns"
    ),
    "edge": Word("How long the midpoint takes from one rail to the other.", "15 ns"),
    "shortest-pulse": Word("The shortest time that a switch is commanded on or off.", "500 ns"),
    "stray-inductance": Word("Of the loop through a leg and its nearest capacitor.", "15 nH"),
}
_LEG = {
    **_SWITCHING,
    "phase": Word("When the leg turns on, in degrees of the switching period.", "180"),
}
_LEGS = Word("What holds for one leg alone, by the net of its midpoint.", called="SW")


SHEET_WORDS = {
    "ports": Word("Where the stage meets the world, by a name of your choice.", called="battery"),
    "ports.*.between": Word("The net at its + terminal, then the one at its -.", "[BAT, PGND]"),
    "ports.*.phases": Word("The nets of a symmetrical set of phases, in their order.", "[U, V, W]"),
    "ports.*.neutral": Word("The net of the neutral of a set of phases, if it is led out.", "N"),
    "ports.*.voltage": Word(
        "Its voltage, + over - or phase to neutral; `peak` or `rms` behind it where it alternates."
        " A port with a voltage is stiff: nothing in the stage changes it.",
        "[42 V, 58 V]",
    ),
    "ports.*.line-voltage": Word(
        "The voltage of a set of phases from line to line, in place of `voltage`.", "400 V rms"
    ),
    "ports.*.supplies": Word(
        "The current that flows out of its + net into the stage; negative is the other way. It is"
        " the mean over a switching period, or the amplitude where it alternates.",
        "[-80 A, 80 A]",
    ),
    "ports.*.draws": Word(
        "The current that flows out of the stage into its + net; otherwise as `supplies`.",
        "25 A peak",
    ),
    "ports.*.power": Word("The power that it draws, in place of a current.", "[0 W, 2 kW]"),
    "ports.*.frequency": Word("The frequency of what alternates at it.", "[0 Hz, 60 Hz]"),
    "ports.*.modulation": Word(
        "How the bridge at it makes its sine: `unipolar`, each leg by itself, or `bipolar`, both"
        " legs at once.",
        "unipolar",
    ),
    "ports.*.modulation-index": Word(
        "The amplitude of the modulating sine over that of its carrier.", "[0, 1]"
    ),
    "ports.*.power-factor": Word(
        "The cosine of the angle between its voltage and its current.", "[0.8, 1]"
    ),
    "ports.*.ripple": Word("The most ripple that its voltage may have, peak to peak.", "500 mV"),
    "ports.*.source": Word("What stands behind it.", "battery"),
    "ports.*.fuse": Word(
        "Where the fuse or breaker of its wires is drawn; `elsewhere` is another drawing.",
        "elsewhere",
    ),
    "ports.*.withstands": Word("What it is to survive from outside.", "[reverse-polarity]"),
    "switching": Word("How the legs are switched; it holds for all of them."),
    **{f"switching.{name}": word for name, word in _SWITCHING.items()},
    "switching.legs": _LEGS,
    **{f"switching.legs.*.{name}": word for name, word in _LEG.items()},
    "legs": _LEGS,
    **{f"legs.*.{name}": word for name, word in _LEG.items()},
    "efficiency": Word(
        "The share of the power drawn that comes out, for the balance of power; 1 where it is not"
        " given.",
        "0.95",
    ),
    "parts": Word("Files of part data, relative to the sheet.", "[hut.parts.yaml]"),
    "set": Word(
        "What overrules the reading and the derivation of an element, by its name.", called="L1"
    ),
    "set.*.current": Word(
        "The whole instantaneous range of the element's current; nothing is added to it.",
        "[-90 A, 90 A]",
    ),
    "set.*.voltage": Word("The range of its voltage, first net over second.", "400 V"),
    "set.*.role": Word("What it is for, where the netlist is read wrongly.", "snubber"),
    "set.*.leakage": Word("Of a winding: the leakage inductance seen from it.", "2 uH"),
    "set.*.rms-current": Word(
        "Its largest rms current, where a simulation or a measurement gave it.", "6 A"
    ),
    "set.*.balance": Word(
        "Of a winding: what keeps the mean voltage of its core at zero.", "measured"
    ),
    "gate-supplies": Word(
        "The voltage of a gate supply that the netlist does not state, by its net.",
        "{VCC: [11.4 V, 12.6 V]}",
    ),
    "domains": Word(
        "Nets that belong together galvanically, by a name of your choice; any two domains are to"
        " be separate.",
        "{mains: [L, N], battery: [BAT, PGND]}",
    ),
    "barriers": Word("What separates two domains."),
    "barriers.*.between": Word("Two of the names under `domains`.", "[mains, battery]"),
    "barriers.*.voltage": Word("The working voltage across it, as its peak.", "358 V"),
    "barriers.*.test-voltage": Word("The voltage that it is tested with.", "3 kV"),
}
