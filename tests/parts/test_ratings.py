"""Figures of a part: who states them, which statement wins, and what is missing."""

import pytest

from rulecheck.parts import Datum, Part
from rulecheck.values import Dimension, Interval, Unknown
from tests.kit.parts import HERE, card, identified, model

DATA = 'parts:\n  "FET*": {kind: mosfet, ratings: {blocking: 120 V, current: 60 A}}\n'
VERTICAL = model("FET1", "VDMOS", vds=110.0, qg=90e-9)


def fet(**parameters: float | str) -> Part:
    element = card("M1", "D G S", "FET1", kind=VERTICAL, **parameters)
    return identified([element], DATA).parts[0]


def test_the_card_wins_over_part_data_and_part_data_over_the_model() -> None:
    assert fet().data["ratings.blocking"].stated_in == "part data FET*"
    assert fet(blocking=100.0).data["ratings.blocking"] == Datum(
        100.0, Dimension.VOLTAGE, "card", HERE
    )
    assert fet().data["gate.charge"] == Datum(90e-9, Dimension.CHARGE, "model FET1", VERTICAL.span)


def test_a_card_states_names_with_underscore_and_ranges_around_zero() -> None:
    found = fet(peak_current=480.0, gate=20.0, recovery_time=60e-9)
    assert found.data["ratings.peak-current"].value == 480.0
    assert found.data["ratings.gate"].value == Interval(-20.0, 20.0)
    assert found.data["diode.recovery-time"].value == 60e-9


MODELS = {
    "diode": ("D1", "A K", model("M", "D", bv=600.0), "ratings.blocking", 600.0),
    "diode, rating beside breakdown": (
        *("D1", "A K"),
        *(model("M", "D", bv=700.0, vrrm=600.0), "ratings.blocking", 600.0),
    ),
    "p-MOSFET, negative": (
        "M1",
        "D G S",
        model("M", "VDMOS", vds=-60.0, pchan=""),
        "ratings.blocking",
        60.0,
    ),
    "bipolar": ("Q1", "C B E", model("M", "NPN", vceo=80.0), "ratings.blocking", 80.0),
    "diode current": ("D1", "A K", model("M", "D", iave=15.0), "ratings.current", 15.0),
}


@pytest.mark.parametrize("name", MODELS)
def test_models_state_ratings(name: str) -> None:
    part_name, nets, kind, path, value = MODELS[name]
    found = identified([card(part_name, nets, "M", kind=kind)]).parts[0]
    assert (found.data[path].value, found.data[path].stated_in) == (value, "model M")


def test_a_model_without_a_number_states_nothing() -> None:
    found = identified([card("D1", "A K", "M", kind=model("M", "D", bv="{vz}", iave=0.0))])
    assert found.parts[0].data == {}


def test_passives_take_ratings_from_their_cards() -> None:
    elements = [
        card("C1", "A B", "20u", 20e-6, voltage=200.0, ripple_current=20.0, dielectric="film"),
        card("L1", "A B", "10u", 10e-6, current=90.0, rms_current=60.0),
        card("R1", "A B", "10", 10.0, power=2.0, voltage=500.0),
    ]
    capacitor, inductor, resistor = identified(elements).parts
    assert capacitor.data["ratings.ripple-current"].value == 20.0
    assert capacitor.facts["ratings.dielectric"] == "film"
    assert inductor.data["ratings.rms-current"].value == 60.0
    assert set(resistor.data) == {"ratings.power", "ratings.voltage"}


def test_other_parameters_of_a_card_are_left_alone() -> None:
    found = identified([card("C1", "A B", "20u", 20e-6, ic=5.0, blocking=7.0)])
    assert (found.parts[0].data, found.problems) == ({}, ())


def test_a_rating_that_is_no_number_is_an_error() -> None:
    found = identified([card("C1", "A B", "20u", 20e-6, voltage="high", dielectric="paper")])
    assert [p.what for p in found.problems] == [
        "voltage=high of C1 is no number",
        "dielectric=paper of C1 is not known",
    ]


def test_devices_in_parallel_multiply_currents_and_charges_and_not_voltages() -> None:
    element = card("M1", "D G S", "FET1", kind=VERTICAL, m=3.0)
    found = identified([element], DATA)
    part = found.parts[0]
    assert part.multiplicity == 3.0
    assert part.data["ratings.current"].value == 180.0
    assert part.data["ratings.blocking"].value == 120.0
    assert part.data["gate.charge"].value == pytest.approx(270e-9)
    assert found.assumed == ("M1 read as 3 devices in parallel (m)",)


def test_values_of_passives_in_parallel() -> None:
    elements = [
        card("C1", "A B", "10u", 10e-6, m=2.0),
        card("R1", "A B", "10", 10.0, m=2.0),
        card("L1", "A B", "10u", 10e-6, m=2.0),
    ]
    values = [part.value for part in identified(elements).parts]
    assert values == [20e-6, 5.0, 5e-6]


def test_the_count_of_an_instance_multiplies_what_is_in_it() -> None:
    elements = [
        card("X1", "D G S", "PAIR", m=2.0),
        card("X1.M1", "D G S", "FET1", kind=VERTICAL, m=3.0),
    ]
    assert identified(elements, DATA, PAIR="1 2 3").parts[0].multiplicity == 6.0


def test_a_missing_rating_says_what_to_write_where() -> None:
    element = card("M1", "D G S", "FET9", kind=model("FET9", "NMOS"))
    resistor = card("R1", "A B", "10", 10.0)
    first, second = identified([element, resistor]).parts
    assert first.edges[0].blocks == Unknown(
        "blocking of M1", "ratings.blocking of part FET9 (in a parts file)"
    )
    assert second.missing("ratings.power").settle == "ratings.power of the card R1 (hut.cir:1)"


def test_a_fuse_takes_its_rating_from_its_text() -> None:
    found = identified([card("F1", "A B", "125A fast"), card("F2", "A B", "blade")])
    assert found.parts[0].data["ratings.current"].value == 125.0
    assert found.parts[1].data == {}
