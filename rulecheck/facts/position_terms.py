"""What a rule may ask of a switch position."""

from rulecheck.facts.terms import SubjectTerm, count, link, number, span_of, text, texts, yes_no
from rulecheck.facts.waveform_facts import POSITION_TERMS
from rulecheck.values import Dimension

V, A = Dimension.VOLTAGE, Dimension.CURRENT

POSITION = SubjectTerm(
    "position",
    "A switch position: the two-terminal group of devices that acts as one switch.",
    (
        text("from", "The net that gated forward current enters."),
        text("to", "The net that gated forward current leaves to."),
        yes_no("gated", "Some path through it follows a gate."),
        span_of("off-voltage", V, "Voltage of `from` over `to` while off, over all states."),
        span_of("on-current", A, "Current from `from` to `to` while on, over all states."),
        texts("needs", "Quadrants of the V-I plane that it must cover."),
        texts("has", "Quadrants of the V-I plane that its devices cover."),
        yes_no("needs-forward-blocking", "It must hold off `from` over `to`."),
        yes_no("needs-reverse-blocking", "It must hold off `to` over `from`."),
        yes_no("needs-forward-current", "It must carry current from `from` to `to`."),
        yes_no("needs-reverse-current", "It must carry current from `to` to `from`."),
        yes_no("holds-off-forward", "With all gates off it withstands `from` over `to`."),
        yes_no("holds-off-reverse", "With all gates off it withstands `to` over `from`."),
        yes_no("carries-forward", "With all gates on it carries current from `from` to `to`."),
        yes_no("carries-reverse", "With all gates on it carries current from `to` to `from`."),
        yes_no("freewheels-forward", "With all gates off it carries `from` to `to`."),
        yes_no("freewheels-reverse", "With all gates off it carries `to` to `from`."),
        number("asked-forward-voltage", V, "Largest `from` over `to` while off; 0 where none."),
        number("asked-reverse-voltage", V, "Largest `to` over `from` while off; 0 where none."),
        number("asked-forward-current", A, "Largest current forward while on; 0 where none."),
        number("asked-reverse-current", A, "Largest current backwards while on; 0 where none."),
        number("blocks-forward", V, "Rated blocking voltage of `from` over `to`."),
        number("blocks-reverse", V, "Rated blocking voltage of `to` over `from`."),
        number("rated-forward-current", A, "Rated current from `from` to `to`."),
        number("rated-reverse-current", A, "Rated current from `to` to `from`."),
        number("peak-current", A, "Rated peak current of all devices side by side."),
        texts("forward-blocking-kinds", "Kinds of the devices that hold off forward voltage."),
        texts("reverse-blocking-kinds", "Kinds of the devices that hold off reverse voltage."),
        texts("forward-carrying-kinds", "Kinds of the devices that carry forward current."),
        texts("reverse-carrying-kinds", "Kinds of the devices that carry reverse current."),
        text("forward-voltage-state", "The state in which the forward voltage is largest."),
        text("reverse-voltage-state", "The state in which the reverse voltage is largest."),
        text("forward-current-state", "The state in which the forward current is largest."),
        text("reverse-current-state", "The state in which the reverse current is largest."),
        text("forbids", "The needed states that its own free path forbids; `no needed state`."),
        texts("kinds", "Kinds of its devices, each once."),
        count("gated-devices", "How many of its devices have a gate."),
        count("gate-nets", "How many nets its gates are on."),
        count("series-devices", "Devices in series in the chain that holds off voltage."),
        yes_no("shared-voltage", "Each device in series has a sharing network across it."),
        count("parallel-devices", "The most devices side by side between two of its nets."),
        yes_no("parallel-alike", "Devices side by side are of one model and rating."),
        yes_no("series-diode", "A diode lies in series with a transistor that it shields."),
        yes_no(
            "free-path-doubled", "A diode lies beside a transistor that has a free path itself."
        ),
        yes_no("across-voltage", "A stiff voltage stands straight across it."),
        yes_no("turned", "As drawn it does not fit its demand; drawn the other way up it would."),
        yes_no("all-turned", "So it is with every such position of the stage, of two or more."),
        *POSITION_TERMS,
        yes_no("tied", "It joins two independent voltages and is on only where they are equal."),
    ),
    (
        link("devices", "part", "Its devices."),
        link("legs", "leg", "The legs that it is in."),
        link("group", "group", "The group whose states decide its demand."),
        link("gate-drives", "gate-drive", "The gate nets of its devices."),
        link("interruptions", "free-path", "Currents that all gates off would interrupt at it."),
        link("shorts", "free-path", "Loops of free paths through it."),
        link("recoveries", "free-path", "Turn-offs of its free path by another position."),
    ),
)
