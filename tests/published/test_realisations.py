"""Switch realisations by quadrant, as textbooks list them.

Source of the classes: Erickson and Maksimovic, Fundamentals of Power Electronics, chapter on
switch realization (from memory), and the usual realisations of the four-quadrant switches of
matrix converters. Each row is a drawn group of devices between P and N and the quadrants of
the plane of off voltage P over N and on current P to N that it covers.
"""

import pytest

from rulecheck.parts import Part
from tests.kit.parts import capability, device

V, A = 600.0, 30.0


def part(name: str, kind: str, tail: str, head: str) -> Part:
    both = {"blocking": V, "current": A}
    two_sided = kind in ("thyristor", "triac", "reverse-blocking-igbt")
    if two_sided:
        both["reverse_blocking"] = V
    return device(name, kind, tail, head, **both)


def pnp(name: str, tail: str, head: str) -> Part:
    return device(name, "bjt", tail, head, {"polarity": "pnp"}, blocking=V, current=A)


REALISATIONS = {
    "diode, anode at P": ([("D1", "diode", "P", "N")], "II"),
    "diode, cathode at P": ([("D1", "diode", "N", "P")], "IV"),
    "BJT alone": ([("Q1", "bjt", "P", "N")], "I"),
    "IGBT alone": ([("Q1", "igbt", "P", "N")], "I"),
    "IGBT alone, upside down": ([("Q1", "igbt", "N", "P")], "III"),
    "MOSFET": ([("M1", "mosfet", "P", "N")], "I+IV"),
    "MOSFET, upside down": ([("M1", "mosfet", "N", "P")], "II+III"),
    "p-MOSFET": ([("M1", "p-mosfet", "P", "N")], "I+IV"),
    "GaN HEMT": ([("Q1", "gan-hemt", "P", "N")], "I+IV"),
    "IGBT with its own diode": ([("Q1", "igbt-with-diode", "P", "N")], "I+IV"),
    "BJT and anti-parallel diode": ([("Q1", "bjt", "P", "N"), ("D1", "diode", "N", "P")], "I+IV"),
    "IGBT and anti-parallel diode, upside down": (
        [("Q1", "igbt", "N", "P"), ("D1", "diode", "P", "N")],
        "II+III",
    ),
    "MOSFET with series and anti-parallel diode": (
        [("M1", "mosfet", "P", "A"), ("D1", "diode", "A", "N"), ("D2", "diode", "N", "P")],
        "I+IV",
    ),
    "MOSFET with series diode": ([("M1", "mosfet", "P", "A"), ("D1", "diode", "A", "N")], "I+II"),
    "IGBT with series diode": ([("D1", "diode", "P", "A"), ("Q1", "igbt", "A", "N")], "I+II"),
    "thyristor": ([("Q1", "thyristor", "P", "N")], "I+II"),
    "reverse-blocking IGBT": ([("Q1", "reverse-blocking-igbt", "P", "N")], "I+II"),
    "triac": ([("Q1", "triac", "P", "N")], "I+II+III+IV"),
    "thyristors in anti-parallel": (
        [("Q1", "thyristor", "P", "N"), ("Q2", "thyristor", "N", "P")],
        "I+II+III+IV",
    ),
    "reverse-blocking IGBTs in anti-parallel": (
        [("Q1", "reverse-blocking-igbt", "P", "N"), ("Q2", "reverse-blocking-igbt", "N", "P")],
        "I+II+III+IV",
    ),
    "transistors with series diodes in anti-parallel": (
        [
            *(("Q1", "igbt", "P", "A"), ("D1", "diode", "A", "N")),
            *(("Q2", "igbt", "N", "B"), ("D2", "diode", "B", "P")),
        ],
        "I+II+III+IV",
    ),
    "common-emitter pair": (
        [
            *(("Q1", "igbt", "P", "E"), ("D1", "diode", "E", "P")),
            *(("Q2", "igbt", "N", "E"), ("D2", "diode", "E", "N")),
        ],
        "I+II+III+IV",
    ),
    "common-collector pair": (
        [("Q1", "igbt-with-diode", "C", "P"), ("Q2", "igbt-with-diode", "C", "N")],
        "I+II+III+IV",
    ),
    "common-source pair": ([("M1", "mosfet", "P", "S"), ("M2", "mosfet", "N", "S")], "I+II+III+IV"),
    "common-drain pair": ([("M1", "mosfet", "D", "P"), ("M2", "mosfet", "D", "N")], "I+II+III+IV"),
    "diode bridge around one transistor": (
        [
            *(("D1", "diode", "P", "A"), ("D2", "diode", "N", "A")),
            *(("D3", "diode", "B", "P"), ("D4", "diode", "B", "N")),
            ("Q1", "igbt", "A", "B"),
        ],
        "I+II+III+IV",
    ),
    "IGBT with its anti-parallel diode drawn backwards": (
        [("Q1", "igbt", "P", "N"), ("D1", "diode", "P", "N")],
        "-",
    ),
    "MOSFET with a series diode drawn backwards": (
        [("M1", "mosfet", "P", "A"), ("D1", "diode", "N", "A")],
        "IV",
    ),
}


@pytest.mark.parametrize("name", REALISATIONS)
def test_quadrants_of_realisation(name: str) -> None:
    devices, quadrants = REALISATIONS[name]
    found = capability("P", "N", *(part(*row) for row in devices))
    assert found.quadrants.label == quadrants


def test_pnp_transistor_carries_from_emitter_to_collector() -> None:
    assert capability("P", "N", pnp("Q1", "P", "N")).quadrants.label == "I"


def test_mosfet_whose_bulk_is_elsewhere_is_four_quadrant() -> None:
    """Without a body diode across drain and source either polarity is held off."""
    m1 = device("M1", "mosfet", "P", "N", {"body-diode": "none"}, blocking=V, reverse_blocking=20.0)
    found = capability("P", "N", m1)
    assert found.quadrants.label == "I+II+III+IV"
    assert (found.forward.blocks, found.reverse.blocks) == (V, 20.0)


@pytest.mark.parametrize(
    ("name", "forward", "reverse"),
    [
        ("common-emitter pair", V, V),
        ("common-drain pair", V, V),
        ("diode bridge around one transistor", V, V),
        ("MOSFET", V, 0.0),
        ("IGBT with series diode", V, V),
        ("thyristors in anti-parallel", V, V),
    ],
)
def test_blocking_voltage_of_realisation(name: str, forward: float, reverse: float) -> None:
    """Of two devices in anti-series one conducts freely and the other holds the voltage alone.

    In the bridge the chain from P to N is a free diode, the transistor, a free diode; and
    beside it a free diode and a blocking one.
    """
    devices, _ = REALISATIONS[name]
    found = capability("P", "N", *(part(*row) for row in devices))
    assert (found.forward.blocks, found.reverse.blocks) == (forward, reverse)
