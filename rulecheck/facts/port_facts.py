"""Facts of ports: where the stage meets the world."""

from rulecheck.facts.facts import Subject, Value
from rulecheck.facts.feeding import Wires, find_wires
from rulecheck.facts.inputs import Inputs
from rulecheck.facts.port_guards import is_fused, is_reverse_protected, is_surge_clamped
from rulecheck.facts.terms import SubjectTerm, link, number, span_of, text, texts, yes_no
from rulecheck.stage import Port
from rulecheck.values import Dimension, Interval, Unknown

PORT = SubjectTerm(
    "port",
    "Where the stage meets the world, from the sheet or from a source of the netlist.",
    (
        text("sort", "`dc`, `ac` or `phases`."),
        text("stated-in", "`sheet`, or the element of the netlist that serves."),
        yes_no("voltage-stated", "Somebody fixes its voltage."),
        yes_no("current-stated", "Somebody fixes its current."),
        span_of("voltage", Dimension.VOLTAGE, "First net over second; phases: phase to neutral."),
        span_of("current", Dimension.CURRENT, "Mean or amplitude, out of the first net inwards."),
        span_of("power", Dimension.POWER, "Power into the stage."),
        span_of("frequency", Dimension.FREQUENCY, "Its frequency."),
        text("behind", "What the sheet says stands behind it; empty where it does not say."),
        yes_no("supplies", "It fixes a voltage and, as stated, supplies current into the stage."),
        yes_no("fused", "A fuse or breaker interrupts a line of it, of phases every line."),
        yes_no("fused-elsewhere", "The sheet says that its fuse is on another drawing."),
        texts("withstands", "What the sheet says it is to survive from outside."),
        yes_no("reverse-protected", "Turned round it drives no current, or blows its fuse."),
        yes_no("surge-clamped", "A clamp stands between its lines."),
        yes_no("ripple-limited", "The sheet says how much ripple its voltage may have."),
        number("ripple-limit", Dimension.VOLTAGE, "That ripple, peak to peak."),
    ),
    (
        link("nets", "net", "Its nets."),
        link("banks", "bank", "Capacitors across it."),
    ),
)


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    wires = find_wires(inputs)
    return tuple(_port(inputs, wires, port) for port in inputs.stage.ports)


def _port(inputs: Inputs, wires: Wires, port: Port) -> Subject:
    values: dict[str, Value] = {
        "sort": port.kind.value,
        "stated-in": port.stated_in,
        "voltage-stated": port.voltage is not None,
        "current-stated": port.current is not None,
        "voltage": _or_derived(inputs, port, "v", "voltage", port.voltage),
        "current": _or_derived(inputs, port, "i", "draws", port.current),
        "power": _stated(port, "power", port.power),
        "frequency": _stated(port, "frequency", port.frequency),
        "behind": port.source,
        "supplies": _supplies(port),
        "fused": is_fused(inputs, wires, port),
        "fused-elsewhere": port.fused_elsewhere,
        "withstands": port.withstands,
        "reverse-protected": is_reverse_protected(inputs, wires, port),
        "surge-clamped": is_surge_clamped(inputs, port),
        "ripple-limited": port.ripple is not None,
        "ripple-limit": port.ripple or _stated(port, "ripple", None),
    }
    nets = tuple(dict.fromkeys(net for net in (*port.nets, port.neutral) if net))
    banks = tuple(
        bank.name for bank in inputs.demands.banks.banks if {bank.start, bank.end} <= set(port.nets)
    )
    links = {"nets": nets, "banks": banks}
    return Subject("port", port.name, values, links, (), nets, port.span)


def _or_derived(
    inputs: Inputs, port: Port, letter: str, key: str, stated: Interval | None
) -> Interval | Unknown:
    if stated is not None:
        return stated
    name = f"{letter}({port.name})"
    found = next((v.range for v in inputs.demands.variables if v.name == name), None)
    return _stated(port, key, None) if found is None else found


def _stated(port: Port, key: str, value: Interval | None) -> Interval | Unknown:
    return value or Unknown(f"{key} of port {port.name}", f"ports: {{{port.name}: {{{key}: ...}}}}")


def _supplies(port: Port) -> bool | Unknown:
    """Whether it fixes a voltage and supplies current; open where sheet and netlist leave that."""
    if port.draws or (port.current is not None and port.current.high <= 0.0):
        return False
    if port.voltage is not None and port.current is not None:
        return True
    what = "voltage" if port.voltage is None else "supplies"
    return Unknown(f"{what} of port {port.name}", f"ports: {{{port.name}: {{{what}: ...}}}}")
