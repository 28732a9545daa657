"""Coupled inductors become cores."""

from rulecheck.netlist import Element
from rulecheck.parts import PartList
from rulecheck.values.record import replace
from tests.kit.parts import card, identified

WINDINGS = {"L1": 100e-6, "L2": 400e-6, "L3": 25e-6, "L4": 1e-6}


def couple(name: str, windings: str, coefficient: float | None) -> Element:
    plain = card(name, "", "", coefficient)
    return replace(plain, nets=(), controls=tuple(windings.split()))


def read(*couplings: Element) -> PartList:
    inductors = [card(name, f"{name}a {name}b", "", value) for name, value in WINDINGS.items()]
    return identified([*inductors, *couplings])


def test_turns_follow_the_root_of_inductance() -> None:
    (core,) = read(couple("K1", "L1 L2 L3", 0.99)).cores
    assert (core.name, core.windings, core.turns) == ("K1", ("L1", "L2", "L3"), (1.0, 2.0, 0.5))


def test_cards_that_share_an_inductor_are_one_core() -> None:
    found = read(
        couple("K1", "L1 L2", 1.0), couple("K2", "l3 L4", 0.95), couple("K3", "L2 L3", 1.0)
    )
    (core,) = found.cores
    assert sorted(core.windings) == ["L1", "L2", "L3", "L4"]
    assert dict(zip(core.windings, core.turns, strict=True))["L4"] == 0.1


def test_separate_windings_are_separate_cores() -> None:
    cores = read(couple("K1", "L1 L2", 1.0), couple("K2", "L3 L4", 1.0)).cores
    assert [core.name for core in cores] == ["K1", "K2"]


def test_a_negative_coefficient_turns_the_dot() -> None:
    (core,) = read(couple("K1", "L1 L2", -0.98)).cores
    assert core.turns == (1.0, -2.0)


def test_loose_coupling_is_left_out_and_said_so() -> None:
    found = read(couple("K1", "L1 L2", 0.5))
    assert found.cores == ()
    assert found.assumed == ("K1 (L1 and L2, 0.5) is too loose a coupling: left out",)


def test_the_bound_itself_is_tight() -> None:
    assert len(read(couple("K1", "L1 L2", 0.9)).cores) == 1


def test_mistakes_on_coupling_cards() -> None:
    cases = {
        "K1 couples L9, which is no inductor of this netlist": couple("K1", "L1 L9", 0.99),
        "K1 has no coupling between 0 and 1": couple("K1", "L1 L2", 1.5),
        "K1 couples fewer than two inductors": couple("K1", "L1", 0.99),
    }
    for what, element in cases.items():
        assert [p.what for p in read(element).problems] == [what]


def test_a_winding_of_unknown_inductance_is_an_error() -> None:
    inductors = [card("L1", "A B", "LP"), card("L2", "C D", "", 1e-6)]
    found = identified([*inductors, couple("K1", "L1 L2", 0.99)])
    assert [p.what for p in found.problems] == ["L1 is a winding, but its inductance is not known"]


def test_names_are_looked_up_inside_the_instance_first() -> None:
    elements = [
        card("L1", "A B", "", 9.0),
        card("X1", "A B", "TX"),
        card("X1.L1", "A B", "", 1.0),
        card("X1.L2", "A C", "", 4.0),
        couple("X1.K1", "L1 L2", 0.99),
    ]
    (core,) = identified(elements, TX="1 2").cores
    assert (core.windings, core.turns) == (("X1.L1", "X1.L2"), (1.0, 2.0))
