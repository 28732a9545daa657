"""Elements of a board export: classified by pins and value text, never dropped."""

import pytest

from tests.kit.netlists import circuit, element, errors, names

OTHERS = ("R90 BUS SW 1", "R91 PGND VCC 1", "R92 G1 OUT 1", "R93 2 3 1")


@pytest.mark.parametrize(
    ("card", "nets", "text"),
    [
        ("J1 BUS PGND Conn_01x02", "BUS PGND", "Conn_01x02"),
        ("P1 BUS PGND VCC Conn", "BUS PGND VCC", "Conn"),
        ("U1 VCC PGND G1 SW DRV-2", "VCC PGND G1 SW", "DRV-2"),
        ("U1 VCC PGND PWM_H DRV-2", "VCC PGND PWM_H", "DRV-2"),
        ("TP1 SW TestPoint", "SW", "TestPoint"),
        ("TP1 SW", "SW", ""),
        ("H1 MountingHole", "", "MountingHole"),
        ("H1 PGND MountingHole_Pad", "PGND", "MountingHole_Pad"),
        ("F1 BUS VCC 10A", "BUS VCC", "10A"),
        ("F1 BUS VCC Fuse", "BUS VCC", "Fuse"),
        ("FB1 VCC OUT 600R", "VCC OUT", "600R"),
        ("FB1 VCC VIN 120R@100MHz", "VCC VIN", "120R@100MHz"),
        ("SW1 BUS OUT SW_Push", "BUS OUT", "SW_Push"),
        ("SW1 BUS OUT G1 VCC SW_DPST", "BUS OUT G1 VCC", "SW_DPST"),
        ("MH1 PGND MountingHole", "PGND", "MountingHole"),
        ("HS1 Heatsink", "", "Heatsink"),
        ("HS1 PGND Heatsink", "PGND", "Heatsink"),
        ("K1 BUS OUT VCC PGND Relay", "BUS OUT VCC PGND", "Relay"),
        ("T1 BUS SW OUT PGND TR-48-12", "BUS SW OUT PGND", "TR-48-12"),
        ("TR1 BUS SW OUT PGND TR-48-12", "BUS SW OUT PGND", "TR-48-12"),
        ("M1 BUS PGND Motor_DC", "BUS PGND", "Motor_DC"),
        ("D1 BUS SW OUT PGND BR-600", "BUS SW OUT PGND", "BR-600"),
        ("D1 2 3 BUS BR-600", "2 3 BUS", "BR-600"),
        ("LED1 VCC PGND red", "VCC PGND", "red"),
        ("RV1 VCC OUT PGND 10k", "VCC OUT PGND", "10k"),
        ("RN1 VCC VCC OUT G1 4x10k", "VCC VCC OUT G1", "4x10k"),
        ("L1 BUS OUT VCC PGND CMC-2", "BUS OUT VCC PGND", "CMC-2"),
        ("CN1 BUS PGND Conn", "BUS PGND", "Conn"),
        ("DNP1 BUS SW DI-600", "BUS SW", "DI-600"),
        ("IC1 VCC PGND OUT CTRL-3", "VCC PGND OUT", "CTRL-3"),
        ("BT1 BUS PGND Battery", "BUS PGND", "Battery"),
        ("B1 BUS PGND Battery", "BUS PGND", "Battery"),
        ("E1 BUS PGND Earth", "BUS PGND", "Earth"),
        ("Y1 VCC OUT 8MHz", "VCC OUT", "8MHz"),
        ("N1 VCC OUT Block", "VCC OUT", "Block"),
        ("W1 BUS OUT Wire", "BUS OUT", "Wire"),
        ("A1 VCC OUT Module", "VCC OUT", "Module"),
        ("O1 VCC OUT Sensor", "VCC OUT", "Sensor"),
        ("10k BUS OUT Res", "BUS OUT", "Res"),
        ("_X1 BUS OUT Res", "BUS OUT", "Res"),
        ("J1 unconnected-(J1-Pad1) Net-(J1-Pad2) Conn (2 pins)",
         "unconnected-(J1-Pad1) Net-(J1-Pad2)", "Conn (2 pins)"),
        ("J1 NC_01 NC_02 Conn", "NC_01 NC_02", "Conn"),
        ('J1 BUS OUT "two pins"', "BUS OUT", "two pins"),
        ("J1 BUS OUT Conn pitch=5", "BUS OUT", "Conn"),
    ],
)  # fmt: skip
def test_a_board_part_has_no_letter_but_all_its_pins(card: str, nets: str, text: str) -> None:
    found = circuit("\n".join((card, *OTHERS)))
    first = found.elements[0]
    assert (first.name, first.letter) == (card.split()[0], "?")
    assert (" ".join(first.nets), first.text) == (nets, text)
    assert errors(found) == []


@pytest.mark.parametrize(
    ("card", "letter"),
    [
        ("CN1 BUS PGND 10u", "C"),
        ("RV1 BUS PGND 10k", "R"),
        ("LED1 BUS PGND 10u", "L"),
        ("LS1 BUS PGND 20n", "L"),
        ("VR1 BUS PGND 5", "V"),
        ("IN1 BUS PGND 5", "I"),
        ("DNP1 BUS SW DX", "D"),
        ("SW1 BUS SW G1 PGND SX", "S"),
        ("TH1 BUS SW G1 PGND Z0=50", "T"),
        ("VBAT BUS PGND BANK-48", "V"),
        ("RLOAD BUS PGND Heater", "R"),
        ("CBUS BUS PGND C_Small", "C"),
        ("DBOOT VCC SW DI-60", "D"),
    ],
)
def test_a_value_or_a_known_model_shows_what_a_clashing_designator_is(
    card: str, letter: str
) -> None:
    found = circuit("\n".join((card, *OTHERS, ".model DX D", ".model SX VSWITCH")))
    assert found.elements[0].letter == letter


def test_a_whole_board_keeps_every_element() -> None:
    found = circuit(
        """\
        Q1 BUS G1 SW SW-N100-7
        Q2 SW G2 PGND SW-N100-7
        D1 BUS SW DI-600-15
        U1 VCC PWM G1 SW G2 PGND DRV-2
        J1 BUS PGND Conn_01x02
        C1 BUS PGND 20u
        TP1 SW TestPoint
        H1 MountingHole
        """
    )
    assert names(found) == ["Q1", "Q2", "D1", "U1", "J1", "C1", "TP1", "H1"]
    assert element(found, "U1").nets == ("VCC", "PWM", "G1", "SW", "G2", "PGND")
    assert found.unread == ()
