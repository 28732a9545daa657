"""What drives a gate, through what, and against which net, in the usual realisations."""

import pytest

from rulecheck.netlist import read_circuit_text
from rulecheck.parts import identify_parts, read_part_data
from rulecheck.reading import SourceText
from rulecheck.stage import DrivenBy, GateDrive, read_sheet, read_stage
from rulecheck.values import Unknown

POWER = """* half of a leg
C1 BUS 0 470u
M1 BUS GH SW SW FET
M2 SW GL 0 0 FET
L1 SW BAT 33u
C2 BAT 0 470u
.model FET NMOS
.model DX D
.model NPX NPN
.model PPX PNP
"""
SHEET = """
ports:
  battery: {between: [BAT, 0], voltage: [42 V, 58 V], supplies: [-80 A, 80 A]}
  bus: {between: [BUS, 0], voltage: [80 V, 120 V]}
"""
PARTS = """
parts:
  DR-HB: {kind: driver, pins: [supply, ground, input-high, input-low, bootstrap, output-high,
    return-high, output-low]}
  DR-ISO: {kind: driver, pins: [supply-in, ground-in, input, supply, output, return]}
  DR-SPLIT: {kind: driver, pins: [supply-in, ground-in, input, supply, output-on, output-off,
    return]}
  DR-NEG: {kind: driver, pins: [supply-in, ground-in, input, supply, output, return, negative]}
  DR-LS: {kind: driver, pins: [supply, ground, input, output]}
  Z-5: {kind: zener, ratings: {blocking: 5.1 V}}
  Z-18: {kind: zener, ratings: {blocking: 18 V}}
"""


def drives(cards: str) -> dict[str, GateDrive]:
    circuit = read_circuit_text(SourceText("t.cir", POWER + cards))
    parts = identify_parts(circuit, read_part_data([SourceText("t.parts.yaml", PARTS)]))
    stage = read_stage(parts, read_sheet(SourceText("t.stage.yaml", SHEET)).sheet).stage
    return dict(stage.gate_drives)


def test_half_bridge_driver_with_bootstrap() -> None:
    found = drives("XU1 VCC 0 HIN LIN VB HO SW LO DR-HB\nR1 HO GH 4.7\nR2 LO GL 2.2")
    high, low = found["GH"], found["GL"]
    assert (high.output.by, high.output.part) == (DrivenBy.DRIVER, "XU1")
    assert (high.output.return_net, high.output.supply_net) == ("SW", "VB")
    assert high.output.floating_supply
    assert high.output.input_nets == ("HIN",)
    assert (low.output.return_net, low.output.supply_net) == ("0", "VCC")
    assert low.output.input_nets == ("LIN",)
    assert (high.turn_on.resistance, low.turn_off.resistance) == (4.7, 2.2)
    assert high.return_right is True
    assert low.return_right is True


def test_a_diode_steers_the_turn_off_resistor() -> None:
    high = drives(
        "XU1 VCC 0 HIN LIN VB HO SW LO DR-HB\nR1 HO GH 22\nR2 HO K 6.8\nD1 GH K DX\nR3 GH SW 10k"
    )["GH"]
    assert high.turn_on.resistance == 22.0
    assert high.turn_off.resistance == pytest.approx(22.0 * 6.8 / 28.8)
    assert high.turn_off.resistors == ("R1", "R2")
    assert high.hold_resistors == ("R3",)


def test_split_outputs_have_a_resistor_each() -> None:
    high = drives("XU1 V5 0 PWM VI HON HOFF SW DR-SPLIT\nR1 HON GH 10\nR2 HOFF GH 2.2")["GH"]
    assert (high.turn_on.resistance, high.turn_off.resistance) == (10.0, 2.2)
    assert high.output.isolated


def test_a_bead_is_passed() -> None:
    assert drives("XU1 VCC 0 IN LO DR-LS\nR1 LO X 10\nL9 X GL 600n")["GL"].output.part == "XU1"


def test_pull_down_transistor_at_the_gate() -> None:
    low = drives("XU1 VCC 0 IN LO DR-LS\nR1 LO X 22\nD1 X GL DX\nQ9 0 X GL PPX\nR2 GL 0 10k")["GL"]
    assert low.output.part == "XU1"
    assert low.turn_off_transistors == ("Q9",)
    assert low.turn_on.resistance == 22.0
    assert low.turn_off.resistance == 0.0


def test_emitter_followers_between_driver_and_gate() -> None:
    low = drives("XU1 VCC 0 IN LO DR-LS\nR1 LO B 22\nQ8 VCC B E NPX\nQ9 0 B E PPX\nR2 E GL 4.7")[
        "GL"
    ]
    assert (low.output.by, low.output.part) == (DrivenBy.DRIVER, "XU1")
    assert low.buffers == ("Q8", "Q9")
    assert not low.inverted
    assert low.turn_on.resistance == 4.7
    assert low.return_right is True


def test_a_collector_output_inverts() -> None:
    low = drives("VCC VCC 0 12\nXU1 VCC 0 IN O DR-LS\nR1 O B 1k\nQ8 GL B 0 NPX\nR2 VCC GL 100")
    assert low["GL"].inverted
    assert low["GL"].output.part == "XU1"


def test_gate_transformer() -> None:
    high = drives(
        "XU1 VCC 0 IN O DR-LS\nC9 O P 1u\nL8 P 0 1m\nL9 S SW 1m\nK9 L8 L9 0.99\nR1 S GH 10"
    )["GH"]
    assert high.output.by is DrivenBy.TRANSFORMER
    assert high.output.part == "XU1"
    assert high.output.return_net == "SW"
    assert high.return_right is True
    assert high.turn_on.resistance == 10.0


def test_gate_transformer_that_returns_to_ground() -> None:
    high = drives(
        "XU1 VCC 0 IN O DR-LS\nC9 O P 1u\nL8 P 0 1m\nL9 S 0 1m\nK9 L8 L9 0.99\nR1 S GH 10"
    )["GH"]
    assert high.return_right is False


def test_negative_bias_from_a_zener() -> None:
    high = drives("XU1 V5 0 PWM VI HO SW VEE DR-NEG\nR1 HO GH 10\nXZ1 VEE SW Z-5\nC9 VEE SW 1u")[
        "GH"
    ]
    assert high.return_right is True
    assert high.bias == 5.1
    assert high.bias_parts[0] == "XZ1"


def test_clamps() -> None:
    high = drives("XU1 V5 0 PWM VI HO SW DR-ISO\nR1 HO GH 10\nXZ1 SW GH Z-18")["GH"]
    assert [(c.parts, c.highest, c.lowest) for c in high.clamps] == [(("XZ1",), 18.0, -0.7)]
    both = drives("XU1 V5 0 PWM VI HO SW DR-ISO\nR1 HO GH 10\nXZ1 M GH Z-18\nXZ2 M SW Z-18")["GH"]
    (clamp,) = both.clamps
    assert clamp.highest == pytest.approx(18.7)
    assert clamp.lowest == pytest.approx(-18.7)


def test_return_on_the_power_ground_is_wrong_for_an_upper_device() -> None:
    assert drives("XU1 V5 0 PWM VI HO 0 DR-ISO\nR1 HO GH 10")["GH"].return_right is False
    assert drives("XU1 VCC 0 PWM HO DR-LS\nR1 HO GH 10")["GH"].return_right is False


def test_an_undescribed_circuit_is_taken_for_a_driver() -> None:
    high = drives("XU1 A B C HO SW MYSTERY\nR1 HO GH 10")["GH"]
    assert (high.output.by, high.output.part) == (DrivenBy.CIRCUIT, "XU1")
    assert isinstance(high.return_right, Unknown)


def test_a_bare_gate_and_a_pull_down_alone_are_driven_by_nothing() -> None:
    found = drives("R1 GL 0 10k")
    assert found["GH"].output.by is DrivenBy.NOTHING
    assert found["GL"].output.by is DrivenBy.NOTHING
    assert found["GL"].hold_resistors == ("R1",)


def test_sources_and_constant_sources() -> None:
    found = drives("V1 A SW PULSE(0 12 0 10n 10n 4u 10u)\nR1 A GH 10\nV2 GL 0 12")
    assert found["GH"].output.by is DrivenBy.SOURCE
    assert found["GL"].output.by is DrivenBy.CONSTANT
