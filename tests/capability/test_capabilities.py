"""Numbers of a position: what blocks, what carries, and what is missing."""

from rulecheck.capability import find_capabilities
from rulecheck.parts import Conduction, Edge, Part
from rulecheck.values import Unknown
from tests.kit.parts import HERE, capability, device, position


def names(missing: tuple[Unknown, ...]) -> list[str]:
    return [item.what for item in missing]


def fet(name: str, tail: str, head: str, **ratings: float) -> Part:
    return device(name, "mosfet", tail, head, **ratings)


def test_series_ratings_add_and_all_devices_are_named() -> None:
    found = capability(
        "P", "N", fet("Q1", "P", "A", blocking=100.0), fet("Q2", "A", "N", blocking=80.0)
    )
    assert found.forward.blocks == 180.0
    assert found.forward.weakest == ("Q1", "Q2")
    assert found.reverse.carried_by == ("Q2", "Q1")


def test_the_weakest_parallel_device_decides_the_blocking_rating() -> None:
    found = capability(
        "P", "N", fet("Q1", "P", "N", blocking=100.0), fet("Q2", "P", "N", blocking=80.0)
    )
    assert (found.forward.blocks, found.forward.weakest) == (80.0, ("Q2",))


def test_parallel_currents_add_and_the_narrowest_of_a_series_decides() -> None:
    parallel = [fet("Q1", "P", "A", current=30.0), fet("Q2", "P", "A", current=40.0)]
    found = capability("P", "N", *parallel, device("D1", "diode", "A", "N", current=50.0))
    assert (found.forward.current, found.reverse.current) == (50.0, 0.0)
    assert (found.reverse.carries, found.reverse.carried_by) == (False, ())


def test_an_igbt_without_diode_holds_off_nothing_in_reverse() -> None:
    found = capability("P", "N", device("Q1", "igbt", "P", "N", blocking=600.0))
    assert (found.reverse.holds_off, found.reverse.blocks) == (False, 0.0)
    stated = device("Q1", "igbt", "P", "N", blocking=600.0, reverse_blocking=20.0)
    assert capability("P", "N", stated).reverse.blocks == 20.0


def test_freewheeling_needs_no_gate_and_carrying_may() -> None:
    found = capability("P", "N", fet("Q1", "P", "N"))
    assert (found.forward.carries, found.forward.freewheels) == (True, False)
    assert (found.reverse.carries, found.reverse.freewheels) == (True, True)


def test_a_missing_rating_is_named_and_leaves_a_lower_bound() -> None:
    found = capability("P", "N", fet("Q1", "P", "A", blocking=100.0), fet("Q2", "A", "N"))
    assert isinstance(found.forward.blocks, Unknown)
    assert found.forward.blocks_at_least == 100.0
    assert names(found.forward.missing) == ["blocking of Q2", "current of Q1", "current of Q2"]
    assert found.forward.holds_off


def test_a_missing_rating_that_cannot_matter_is_not_asked_for() -> None:
    """The other pole of an anti-series pair conducts; a free path makes ratings idle."""
    pair = [fet("Q1", "P", "S", current=9.0), fet("Q2", "N", "S", current=9.0)]
    found = capability("P", "N", *pair)
    assert names(found.forward.missing) == ["blocking of Q1"]
    assert names(found.reverse.missing) == ["blocking of Q2"]
    shorted = capability("P", "N", *pair, device("D1", "diode", "P", "N", current=9.0))
    assert (shorted.forward.blocks, shorted.forward.missing) == (0.0, ())


def test_a_missing_rating_beside_a_known_weaker_chain_stays_unknown_only_below_it() -> None:
    found = capability("P", "N", fet("Q1", "P", "N", blocking=100.0), fet("Q2", "P", "N"))
    assert isinstance(found.forward.blocks, Unknown)
    assert found.forward.blocks_at_least == 0.0
    chain = [fet("Q2", "P", "A", blocking=120.0), fet("Q3", "A", "N")]
    beside = capability("P", "N", fet("Q1", "P", "N", blocking=100.0), *chain)
    assert beside.forward.blocks == 100.0


def test_a_missing_current_rating_behind_a_narrower_known_one_does_not_matter() -> None:
    narrow = fet("Q1", "P", "A", blocking=100.0, current=20.0)
    wide = [fet("Q2", "A", "N", blocking=100.0, current=30.0), fet("Q3", "A", "N", blocking=100.0)]
    found = capability("P", "N", narrow, *wide)
    assert (found.forward.current, found.forward.missing) == (20.0, ())


def test_parallel_devices_without_current_rating_are_all_named() -> None:
    both = [fet("Q1", "P", "N", blocking=100.0), fet("Q2", "P", "N", blocking=100.0)]
    found = capability("P", "N", *both, fet("Q3", "P", "N", blocking=100.0, current=5.0))
    assert names(found.forward.missing) == ["current of Q1", "current of Q2"]
    assert found.forward.current_at_least == 5.0


def test_two_chains_in_parallel_name_every_missing_current() -> None:
    chains = [fet("Q1", "P", "A"), fet("Q2", "A", "N"), fet("Q3", "P", "B"), fet("Q4", "B", "N")]
    found = capability("P", "N", *chains)
    currents = [what for what in names(found.forward.missing) if what.startswith("current")]
    assert currents == [f"current of Q{n}" for n in (1, 2, 3, 4)]


def test_a_free_path_is_preferred_when_one_path_is_shown() -> None:
    found = capability(
        "P", "N", device("Q1", "thyristor", "P", "N"), device("D2", "diode", "P", "N")
    )
    assert found.forward.carried_by == ("D2",)


def test_nets_that_no_device_joins_leave_the_numbers_unknown() -> None:
    found = capability("P", "X", fet("Q1", "P", "N", blocking=100.0))
    assert isinstance(found.forward.blocks, Unknown)
    assert found.quadrants.members == ()


def test_long_chains_of_unrated_parallel_devices_stay_quick() -> None:
    """Forty cells of two unrated devices would be 2**40 chains if all of them were kept."""
    cells = [
        device(f"Q{n}{side}", "igbt", f"n{n}", f"n{n + 1}", current=5.0)
        for n in range(40)
        for side in "ab"
    ]
    found = capability("n0", "n40", *cells)
    assert isinstance(found.forward.blocks, Unknown)
    assert found.forward.current == 10.0


def test_positions_are_answered_in_natural_order() -> None:
    drawn = [position("P", "N", fet(name, "P", "N")) for name in ("Q10", "Q2")]
    assert list(find_capabilities(drawn).positions) == ["Q2", "Q10"]


def test_edges_tell_which_part_they_belong_to() -> None:
    edges = fet("Q1", "P", "N", blocking=100.0, current=120.0).edges
    assert edges == (
        Edge("P", "N", Conduction.GATED, 100.0, 120.0, "Q1"),
        Edge("N", "P", Conduction.FREE, 0.0, 120.0, "Q1"),
    )
    assert HERE.file == "hut.cir"
