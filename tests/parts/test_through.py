"""What power current passes as through a wire, and which nets a part joins."""

import pytest

from rulecheck.netlist import read_circuit_text
from rulecheck.parts import (
    Part,
    identify_parts,
    joined_nets,
    read_part_data,
    through_nets,
)
from rulecheck.reading import SourceText
from rulecheck.stage import read_sheet, read_stage
from tests.kit.stages import reading_of, stage_of

SHEET = """
ports:
  bank: {between: [BAT, 0], voltage: [42 V, 58 V], supplies: [0 A, 20 A]}
  bus: {between: [BUS, 0], voltage: 160 V}
switching: {frequency: 50 kHz}
"""
DATA = """
parts:
  "RE-100": {kind: relay, pins: [coil-plus, coil-minus, common, normally-open]}
  "CT-50": {kind: current-transformer}
  "LC-2": {kind: common-mode-choke, pins: [in-1, out-1, in-2, out-2]}
  "CB-32": {kind: circuit-breaker, ratings: {current: 32 A, dc-voltage: 80 V}}
  "HS-50": {kind: sensor, pins: [primary-in, primary-out, supply, ground, output]}
  "NT-5": {kind: ntc, ratings: {current: 20 A}}
  "OC-1": {kind: isolator, pins: [anode, cathode, collector, emitter]}
  "CX-9": {kind: connector}
  "DR-9": {kind: driver, pins: [supply, ground, input, output]}
  "DR-8": {kind: driver, pins: [supply-in, ground-in, input, supply, output, return]}
  "CT-9": {kind: controller, pins: [supply, ground, pwm1]}
"""
BOOST = """
L1 {line} SW 100u
M1 SW G 0 0 FET
D1 SW BUS DX
C1 BUS 0 470u
"""


def part_of(card: str) -> Part:
    circuit = read_circuit_text(SourceText("t.cir", f"* test\n{card}\n.end\n"))
    found = identify_parts(circuit, read_part_data([SourceText("t.parts.yaml", DATA)]))
    assert not [p for p in found.problems if "fits no element" not in p.what]
    return found.parts[0]


@pytest.mark.parametrize(
    ("card", "pairs"),
    [
        ("XK1 A B C D RE-100", (("C", "D"),)),
        ("XT1 A B C D CT-50", (("A", "B"),)),
        ("XL1 A B C D LC-2", (("A", "B"), ("C", "D"))),
        ("XCB1 A B CB-32", (("A", "B"),)),
        ("XU1 A B C D E HS-50", (("A", "B"),)),
        ("R1 A B 5 NT-5", (("A", "B"),)),
        ("R1 A B 10k NT-5", ()),  # a temperature sensor, not an inrush limiter
    ],
)
def test_pairs_that_are_one_node(card, pairs):
    assert through_nets(part_of(card)) == pairs


@pytest.mark.parametrize(
    ("card", "groups"),
    [
        ("XU1 A K C E OC-1", {("A", "K"), ("C", "E")}),
        ("XK1 A B C D RE-100", {("A", "B"), ("C", "D")}),
        ("XT1 A B C D CT-50", {("A", "B"), ("C", "D")}),
        ("XL1 A B C D LC-2", {("A", "B"), ("C", "D")}),
        ("XU1 V G I O DR-9", {("V", "G", "I", "O")}),
        ("XU1 A B C D E F DR-8", {("A", "B", "C"), ("D", "E", "F")}),
        ("XU1 A B C CT-9", {("A", "B", "C")}),
        ("R1 A B 10", {("A", "B")}),
        ("XJ1 A B CX-9", set()),
    ],
)
def test_nets_that_a_part_joins(card, groups):
    assert set(joined_nets(part_of(card), ()).groups) == groups


def test_a_part_that_nobody_knows_may_join_all_its_nets():
    assert not joined_nets(part_of("X1 A B C MYSTERY-7"), ()).sure


@pytest.mark.parametrize("line", ["XCB1 BAT BATF CB-32", "XT1 BAT BATF S1 S2 CT-50"])
def test_the_stage_runs_through_what_stands_in_its_line(line):
    cards = f"* t\n{line}\n{BOOST.format(line='BATF')}\n.model FET NMOS\n.model DX D\n.end"
    circuit = read_circuit_text(SourceText("t.cir", cards))
    parts = identify_parts(circuit, read_part_data([SourceText("t.parts.yaml", DATA)]))
    stage = read_stage(parts, read_sheet(SourceText("t.stage.yaml", SHEET)).sheet).stage
    assert stage.merged["BATF"] == "BAT"
    assert {position.name for position in stage.positions} == {"M1", "D1"}


SEPARATE = """
domains: {battery: [BAT], signal: [SG, V5]}
barriers: [{between: [battery, signal], voltage: 400 V, test-voltage: 3 kV}]
"""


def test_the_sheet_names_domains_and_the_voltage_between_them():
    cards = BOOST.format(line="BAT") + "R1 SG V5 1k"
    stage = stage_of(cards, SHEET + SEPARATE)
    assert stage.domains == {"battery": ("BAT",), "signal": ("SG", "V5")}
    (barrier,) = stage.barriers
    assert (barrier.domains, barrier.voltage) == (("battery", "signal"), 400.0)
    assert barrier.test_voltage == 3000.0


def test_a_domain_of_an_unknown_net_is_an_error():
    reading = reading_of(BOOST.format(line="BAT"), SHEET + "domains: {signal: [SGND]}")
    assert [problem.what for problem in reading.problems] == [
        "net 'SGND' of domain 'signal' is not in the netlist"
    ]
