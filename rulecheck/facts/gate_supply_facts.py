"""Facts of gate supplies: the nets that feed drivers' outputs, bootstraps among them."""

from collections.abc import Iterable, Sequence

from rulecheck.facts.drawn import open_where_none
from rulecheck.facts.facts import Bounds, Subject, Value
from rulecheck.facts.gate_electrics import drive_power, frequency_of, gate_charge, total
from rulecheck.facts.gate_levels import bootstrap_diodes, bootstrap_feed, supply_range
from rulecheck.facts.inputs import Inputs, stated_number, stated_range
from rulecheck.facts.potential import Steps, known_steps, largest_difference
from rulecheck.facts.terms import SubjectTerm, count, link, number, span_of, text, texts, yes_no
from rulecheck.parts import Kind, Part
from rulecheck.stage import DrivenBy, GateCommand, GateDrive
from rulecheck.values import Dimension, Interval, Unknown, natural_key

V, S = Dimension.VOLTAGE, Dimension.TIME

GATE_SUPPLY = SubjectTerm(
    "gate-supply",
    "A net that feeds outputs of gate drivers, or the floating supply of a bootstrap.",
    (
        text("return", "The net that its voltage is measured against."),
        texts("returns", "Every net that an output fed by it is measured against."),
        count("return-nets", "How many those are."),
        texts("drivers", "The drivers that it feeds."),
        count("gates", "How many gate nets its outputs drive."),
        yes_no("bootstrap", "It is a floating supply that a diode charges in each period."),
        yes_no("fed", "Something but drivers and capacitors is at it, or the sheet states it."),
        yes_no("decoupled", "A capacitor stands between it and its return."),
        number("capacitance", Dimension.CAPACITANCE, "All capacitors from it to its return."),
        span_of("voltage", V, "Its voltage over its return."),
        span_of("permitted", V, "The supply voltage that all its drivers permit."),
        number("lockout", V, "The highest under-voltage lockout among its drivers."),
        number("power", Dimension.POWER, "Power that its gates take."),
        number("source-power", Dimension.POWER, "Rated power of the converter that feeds it."),
        yes_no("feed-described", "A converter of stated power feeds it."),
        number("charge", Dimension.CHARGE, "Gate charge of all its gates."),
        number("standing-current", Dimension.CURRENT, "Quiescent current of its drivers."),
        number("frequency", Dimension.FREQUENCY, "Switching frequency of its gates."),
        number("on-time", S, "Longest time that its gates stay on: a period at the most."),
        text("feed", "Of a bootstrap: the supply net that charges it; empty where none does."),
        span_of("feed-voltage", V, "Of a bootstrap: the voltage of the supply that charges it."),
        text("feed-diode", "Of a bootstrap: the diode that charges it."),
        yes_no("diode-found", "Of a bootstrap: a diode is between it and another net."),
        yes_no("diode-reversed", "Of a bootstrap: its diode points away from it."),
        number("diode-blocking", V, "Of a bootstrap: the rated blocking voltage of that diode."),
        number("diode-recovery", S, "Of a bootstrap: the recovery time of that diode."),
        number("diode-voltage", V, "Of a bootstrap: what that diode must block."),
        yes_no("refreshed", "Of a bootstrap: some state ties its return to its feed's ground."),
        yes_no("held-on", "Of a bootstrap: its gates may stay on for longer than a period."),
    ),
    (
        link("gate-drives", "gate-drive", "The gates that it feeds."),
        link("capacitors", "capacitor", "The capacitors from it to its return."),
    ),
)


def collect(inputs: Inputs) -> tuple[Subject, ...]:
    by_net: dict[str, list[GateDrive]] = {}
    for drive in inputs.stage.gate_drives.values():
        known = drive.output.supply_net
        if known and any(inputs.positions_of_part.get(name) for name in drive.devices):
            by_net.setdefault(known, []).append(drive)
    steps = known_steps(inputs)
    found = tuple(
        _subject(inputs, net, by_net[net], steps) for net in sorted(by_net, key=natural_key)
    )
    feeds = Unknown("what feeds the gate supplies", "the supplies of the drivers in the netlist")
    aids = Unknown("the capacitors of the gate supplies", "the drivers' capacitors in the netlist")
    return open_where_none(open_where_none(found, "fed", feeds), "decoupled", aids)


def _subject(
    inputs: Inputs,
    net: str,
    drives: Sequence[GateDrive],
    steps: Steps,
) -> Subject:
    output = drives[0].output
    returned = _supply_return(drives[0])
    drivers = tuple(dict.fromkeys(drive.output.part for drive in drives))
    parts = [inputs.part_by_name[name] for name in drivers]
    positions = _positions(inputs, drives)
    capacitors = _capacitors(inputs, net, returned)
    power = total(drive_power(inputs, drive, _positions(inputs, [drive])) for drive in drives)
    feeding = _feeding(inputs, net)
    permitted = _permitted(parts)
    returns = tuple(dict.fromkeys(_supply_return(drive) for drive in drives))
    values: dict[str, Value] = {
        "return": returned,
        "returns": returns,
        "return-nets": float(len(returns)),
        "drivers": drivers,
        "gates": float(len(drives)),
        "bootstrap": output.floating_supply,
        "fed": _fed(inputs, net),
        "decoupled": bool(capacitors),
        "capacitance": total(part.value for part in capacitors),
        "voltage": supply_range(inputs, net, returned),
        "permitted": permitted,
        "lockout": _highest([stated_range(part, "driver.lockout") for part in parts]),
        "power": power,
        "source-power": _source_power(inputs, net, feeding),
        "feed-described": any("ratings.power" in part.data for part in feeding),
        "charge": total(gate_charge(inputs, drive) for drive in drives),
        "standing-current": total(stated_number(p, "driver.quiescent-current") for p in parts),
        "frequency": frequency_of(inputs, positions),
        "on-time": _longest_on_time(inputs, drives, positions),
        **_bootstrap_values(inputs, net, drives, steps, permitted),
    }
    links = {
        "gate-drives": tuple(drive.gate for drive in drives),
        "capacitors": tuple(part.name for part in capacitors),
    }
    named = (*drivers, *(part.name for part in capacitors))
    span, related = inputs.span_of_parts(named), inputs.related_spans(named)
    nets = tuple(n for n in (net, returned) if n)
    return Subject("gate-supply", net, values, links, named, nets, span, related)


def _supply_return(drive: GateDrive) -> str:
    """What the supply of the output is measured against; before a gate transformer, its ground."""
    output = drive.output
    return output.input_ground if output.by is DrivenBy.TRANSFORMER else output.return_net


def _positions(inputs: Inputs, drives: Iterable[GateDrive]) -> tuple[str, ...]:
    found = (
        position
        for drive in drives
        for device in drive.devices
        for position in inputs.positions_of_part.get(device, ())
    )
    return tuple(dict.fromkeys(found))


def _capacitors(inputs: Inputs, net: str, returned: str) -> list[Part]:
    here = inputs.parts_at_net.get(net, ())
    there = set(inputs.parts_at_net.get(returned, ()))
    parts = (inputs.part_by_name[name] for name in here if name in there)
    return [part for part in parts if part.kind is Kind.CAPACITOR]


_QUIET = frozenset({Kind.CAPACITOR, Kind.DRIVER})


def _fed(inputs: Inputs, net: str) -> bool:
    kinds = {inputs.part_by_name[name].kind for name in inputs.parts_at_net.get(net, ())}
    stated = net in inputs.ports_at_net or net in inputs.stage.gate_supplies
    return bool(kinds - _QUIET) or stated


def _feeding(inputs: Inputs, net: str) -> list[Part]:
    """Converters of the auxiliary supply with an output on the net."""
    parts = (inputs.part_by_name[name] for name in inputs.parts_at_net.get(net, ()))
    return [
        part
        for part in parts
        if part.kind is Kind.OTHER
        and any(pin.role.startswith("out") and inputs.merged(pin.net) == net for pin in part.pins)
    ]


def _source_power(inputs: Inputs, net: str, feeding: Sequence[Part]) -> Value:
    if feeding:
        return stated_number(feeding[0], "ratings.power")
    return Unknown(f"power of gate supply {net}", f"ratings.power of what feeds {net}")


def _permitted(parts: Sequence[Part]) -> Value:
    found: Interval | None = None
    for part in parts:
        value = stated_range(part, "driver.supply")
        if not isinstance(value, Interval):
            return value
        found = value if found is None else found.meet(value) or value
    return found or Unknown("permitted supply voltage", "driver.supply of the driver")


def _highest(values: Sequence[Value]) -> Value:
    for value in values:
        if not isinstance(value, Interval):
            return value
    return max((value.high for value in values if isinstance(value, Interval)), default=0.0)


def _longest_on_time(
    inputs: Inputs, drives: Sequence[GateDrive], positions: Sequence[str]
) -> Value:
    """From the gates' own commands, else a whole period."""
    commands = _commands(inputs, drives)
    if commands and not any(command.steady for command in commands):
        return max(_longest_of(command) for command in commands)
    frequency = frequency_of(inputs, positions)
    return 1.0 / frequency if isinstance(frequency, float) else frequency


def _commands(inputs: Inputs, drives: Sequence[GateDrive]) -> list[GateCommand]:
    known = inputs.stage.gate_commands
    return [known[name] for drive in drives for name in drive.devices if name in known]


def _longest_of(command: GateCommand) -> float:
    """The longest on-time, one that runs past the end of the period in one piece."""
    times = [span.high - span.low for span in command.on]
    if len(times) > 1 and command.repeats and _wraps(command):
        times.append(times[0] + times[-1])
    return max(times, default=0.0)


def _wraps(command: GateCommand) -> bool:
    return command.on[0].low <= 0.0 and command.on[-1].high >= command.period


def _bootstrap_values(
    inputs: Inputs,
    net: str,
    drives: Sequence[GateDrive],
    steps: Steps,
    permitted: Value,
) -> dict[str, Value]:
    output = drives[0].output
    diodes = bootstrap_diodes(inputs, net)
    feed = bootstrap_feed(inputs, net)
    toward = [d for d in diodes if not _points_away(inputs, d, net)]
    diode = next(iter(toward or diodes), None)
    missing = Unknown(f"bootstrap diode of {net}", f"a diode from a supply to {net}")
    return {
        "feed": feed if toward else "",
        "feed-voltage": supply_range(inputs, feed, output.input_ground) if feed else missing,
        "feed-diode": diode.name if diode else "",
        "diode-found": diode is not None,
        "diode-reversed": bool(diodes) and not toward,
        "diode-blocking": stated_number(diode, "ratings.blocking") if diode else missing,
        "diode-recovery": stated_number(diode, "diode.recovery-time") if diode else missing,
        "diode-voltage": _diode_voltage(
            largest_difference(steps, output.input_ground, output.return_net),
            supply_range(inputs, feed, "") if feed else missing,
            permitted,
        ),
        "refreshed": _refreshed(inputs, output.return_net, output.input_ground),
        "held-on": _held_on(inputs, drives),
    }


def _points_away(inputs: Inputs, diode: Part, net: str) -> bool:
    """Its cathode is not on the supply's side."""
    cathode = inputs.merged(diode.net("cathode") or "")
    if cathode == net:
        return False
    beside = inputs.parts_at_net.get(cathode, ())
    joined = set(beside) & set(inputs.parts_at_net.get(net, ()))
    return not any(inputs.part_by_name[name].kind is Kind.RESISTOR for name in joined)


def _diode_voltage(potential: Value, supply: Interval | Unknown, permitted: Value) -> Value:
    """Bus plus supply: the floating supply rises with its return, the feed stays."""
    if isinstance(supply, Interval):
        return total((potential, supply.high))
    most = permitted.high if isinstance(permitted, Interval) else float("inf")
    return total((potential, Bounds(Interval(0.0, most), (supply,))))


def _refreshed(inputs: Inputs, returned: str, ground: str) -> bool | Unknown:
    """Some state of the stage joins the return to the ground through switches that are on."""
    positions = inputs.position_by_name
    groups = [group for group in inputs.demands.groups if group.analysed]
    if not groups or not returned or not ground:
        return Unknown("the states of the stage", "the ports of the stage")
    for group in groups:
        for state in group.states:
            ends = [(positions[n].start, positions[n].end) for n in state.on if n in positions]
            if _joined(ends, returned, ground):
                return True
    return False


def _joined(pairs: Sequence[tuple[str, str]], start: str, end: str) -> bool:
    reached = {start}
    grown = True
    while grown:
        more = {b for pair in pairs for a, b in (pair, pair[::-1]) if a in reached} - reached
        grown = bool(more)
        reached |= more
    return end in reached


def _held_on(inputs: Inputs, drives: Sequence[GateDrive]) -> bool:
    """A switch between two independent voltages is on for as long as they are joined."""
    tied = any(p not in inputs.group_of_position for p in _positions(inputs, drives))
    commands = _commands(inputs, drives)
    return tied or any(c.on and _longest_of(c) >= c.period for c in commands)
