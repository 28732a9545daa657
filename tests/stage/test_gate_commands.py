"""Gate commands: on-times of sources, through drivers, and over a common period."""

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck.netlist import Waveform, read_circuit_text
from rulecheck.parts import identify_parts, read_part_data
from rulecheck.reading import SourceText
from rulecheck.stage import GateCommand, common_window, read_sheet, read_stage
from rulecheck.stage.gate_command import both, joined, opposite, total
from rulecheck.stage.waveform_command import command_of
from rulecheck.values import Interval, Unknown
from tests.kit.stages import stage_of

LEG = """
C1 BAT 0 470u
L1 BAT SW 33u
M1 BUS G1 SW SW FET
M2 SW G2 0 0 FET
C2 BUS 0 470u
R1 D1 G1 4.7
R2 D2 G2 4.7
R3 G1 SW 10k
R4 G2 0 10k
"""
SHEET = """
ports:
  battery: {between: [BAT, 0], voltage: [42 V, 58 V], supplies: [-80 A, 80 A]}
  bus: {between: [BUS, 0], voltage: [90 V, 120 V]}
"""
HALF_BRIDGE = """
parts:
  DR-1:
    kind: driver
    pins: [supply, ground, input-high, input-low, output-high, return-high, output-low]
    driver: {%s}
  DR-2:
    kind: driver
    pins: [supply, ground, input, output-high, return-high, output-low]
    driver: {%s}
"""


def commands(cards: str, parts: str = "{}") -> dict[str, GateCommand]:
    return dict(stage_of(LEG + cards, SHEET, parts).gate_commands)


def on_times(command: GateCommand) -> list[float]:
    """Starts and ends in microseconds."""
    return [round(edge * 1e6, 6) for span in command.on for edge in (span.low, span.high)]


def wave(text: str, *values: float, repeats_from: float | None = None) -> GateCommand | None:
    return command_of(Waveform(text, values, text, repeats_from), "V1", False)


def test_a_pulse_counts_from_half_rise_to_half_fall() -> None:
    command = wave("pulse", 0, 12, 0, 10e-9, 30e-9, 4e-6, 10e-6)
    assert command is not None
    assert on_times(command) == [0.005, 4.025]
    assert command.period == 10e-6


def test_a_pulse_past_the_period_goes_on_at_its_beginning() -> None:
    command = wave("pulse", 0, 12, 8e-6, 0, 0, 4e-6, 10e-6)
    assert command is not None
    assert on_times(command) == [0, 2, 8, 10]


def test_a_falling_pulse_is_on_outside_it() -> None:
    command = wave("pulse", 12, 0, 2e-6, 0, 0, 3e-6, 10e-6)
    assert command is not None
    assert on_times(command) == [0, 2, 5, 10]


def test_a_piecewise_line_is_on_above_half_of_its_swing() -> None:
    command = wave("pwl", 0, -5, 1e-6, -5, 2e-6, 15, 5e-6, 15, 6e-6, -5)
    assert command is not None
    assert on_times(command) == [1.5, 5.5]
    assert not command.repeats


def test_a_repeated_line_counts_from_where_it_repeats() -> None:
    command = wave("pwl", 0, 0, 3e-6, 0, 3e-6, 5, 7e-6, 5, 7e-6, 0, 12e-6, 0, repeats_from=2e-6)
    assert command is not None
    assert on_times(command) == [1, 5]
    assert (command.period, command.repeats) == (pytest.approx(10e-6), True)


@pytest.mark.parametrize(
    ("kind", "values"),
    [("pulse", (0, 12, 0, 1e-9)), ("sin", (0, 1, 50)), ("pwl", (0, 5, 1, 5)), ("pwl", ())],
)
def test_other_waveforms_are_no_command(kind: str, values: tuple[float, ...]) -> None:
    assert wave(kind, *values) is None


def test_sources_at_the_gates_command_the_devices() -> None:
    found = commands("V1 D1 SW PULSE(0 12 0 0 0 4u 10u)\nV2 0 D2 PULSE(-12 0 5u 0 0 4u 10u)\n")
    assert on_times(found["M1"]) == [0, 4]
    assert on_times(found["M2"]) == [0, 5, 9, 10]


def test_a_driver_hands_its_inputs_on() -> None:
    cards = "XU1 VCC 0 HI LI D1 SW D2 DR-1\nV1 HI 0 PULSE(0 5 0 0 0 4u 10u)\n"
    cards += "V2 IN 0 PULSE(0 5 5u 0 0 4u 10u)\nR9 IN LI 100\n"
    found = commands(cards, HALF_BRIDGE % ("", ""))
    assert on_times(found["M1"]) == [0, 4]
    assert on_times(found["M2"]) == [5, 9]
    assert found["M1"].driver == "XU1"


def test_a_driver_with_one_input_gives_the_opposite_below() -> None:
    parts = HALF_BRIDGE % ("", "dead-time: 500 ns")
    found = commands("XU1 VCC 0 P D1 SW D2 DR-2\nV1 P 0 PULSE(0 5 1u 0 0 4u 10u)\n", parts)
    assert on_times(found["M1"]) == [1.5, 5]
    assert on_times(found["M2"]) == [0, 1, 5.5, 10]
    assert not found["M1"].may_begin_later


def test_a_dead_time_that_nobody_states_is_remembered() -> None:
    found = commands(
        "XU1 VCC 0 P D1 SW D2 DR-2\nV1 P 0 PULSE(0 5 1u 0 0 4u 10u)\n", HALF_BRIDGE % ("", "")
    )
    assert found["M1"].may_begin_later == found["M2"].may_begin_later == "XU1"


def test_an_interlock_keeps_overlapping_inputs_apart() -> None:
    parts = HALF_BRIDGE % ("interlock: true, dead-time: 200 ns", "")
    cards = "XU1 VCC 0 HI LI D1 SW D2 DR-1\nV1 HI 0 PULSE(0 5 0 0 0 6u 10u)\n"
    found = commands(cards + "V2 LI 0 PULSE(0 5 5u 0 0 4u 10u)\n", parts)
    assert on_times(found["M1"]) == [0, 5]
    assert on_times(found["M2"]) == [6.2, 9]


def test_periods_without_a_small_common_multiple_are_said_to_have_none() -> None:
    one = GateCommand((Interval(0, 1e-6),), 10e-6, "V1")
    other = GateCommand((Interval(0, 1e-6),), 10.01237e-6, "V2")
    window = common_window({"a": one, "b": other})
    assert isinstance(window, Unknown)
    assert "V1, V2" in window.settle


def test_periods_that_are_multiples_meet_in_the_longest() -> None:
    one = GateCommand((Interval(0, 2e-6),), 4e-6, "V1")
    other = GateCommand((Interval(1e-6, 3e-6),), 6e-6, "V2")
    window = common_window({"a": one, "b": other})
    assert not isinstance(window, Unknown)
    assert window.length == pytest.approx(12e-6)
    assert total(both(window.on["a"], window.on["b"])) == pytest.approx(2e-6)


TICK = 1e-7
edges = st.lists(st.integers(0, 39), min_size=0, max_size=6, unique=True).map(sorted)


@st.composite
def ticked(draw: st.DrawFn, name: str) -> GateCommand:
    period = draw(st.sampled_from([10, 20, 40]))
    inside = [edge for edge in draw(edges) if edge < period]
    pairs = zip(inside[::2], inside[1::2], strict=False)
    on = tuple(Interval(a * TICK, b * TICK) for a, b in pairs)
    return GateCommand(joined(on), period * TICK, name)


@settings(max_examples=60)
@given(ticked("V1"), ticked("V2"))
def test_overlap_agrees_with_a_grid_of_time(one: GateCommand, other: GateCommand) -> None:
    window = common_window({"a": one, "b": other})
    assert not isinstance(window, Unknown)
    steps = round(window.length / TICK)
    moments = [(step + 0.5) * TICK for step in range(steps)]
    grid = sum(one.is_on(moment) and other.is_on(moment) for moment in moments) * TICK
    off = sum(not one.is_on(m) and not other.is_on(m) for m in moments) * TICK
    segments = window.segments()
    assert sum(s.length for s in segments if len(s.on) == 2) == pytest.approx(grid, abs=1e-12)
    assert sum(s.length for s in segments if not s.on) == pytest.approx(off, abs=1e-12)
    assert total(both(window.on["a"], window.on["b"])) == pytest.approx(grid, abs=1e-12)
    assert total(opposite(window.on["a"], window.length)) + total(window.on["a"]) == pytest.approx(
        window.length
    )


INVERTING = """
parts:
  DR-LS:
    kind: driver
    pins: [supply, ground, input, output]
    driver: {inverts: [output], delay: 20 ns}
"""


def test_an_inverting_output_is_on_while_its_input_is_low() -> None:
    """Part data name the outputs that invert, by the role of their pin."""
    cards = (
        "C1 BUS 0 1u\nL1 BUS SW 1m\nM1 SW G 0 0 FET\nR1 O G 10\n"
        "XU1 VCC 0 IN O DR-LS\nV1 IN 0 PULSE(0 5 0 1n 1n 3u 10u)\n.model FET NMOS\n"
    )
    circuit = read_circuit_text(SourceText("t.cir", f"* inverting driver\n{cards}"))
    parts = identify_parts(circuit, read_part_data([SourceText("t.parts.yaml", INVERTING)]))
    sheet = "ports: {bus: {between: [BUS, 0], voltage: 48 V}}"
    stage = read_stage(parts, read_sheet(SourceText("t.stage.yaml", sheet)).sheet).stage
    assert total(stage.gate_commands["M1"].on) == pytest.approx(7e-6, rel=1e-2)
