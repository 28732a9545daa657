"""Positions as two-terminal pieces of the device graph."""

from hypothesis import given
from hypothesis import strategies as st

from rulecheck.stage.grouping import group_devices


def pieces(ends: dict[str, tuple[str, str]], joints: str) -> dict[tuple[str, ...], set[str]]:
    grouping = group_devices(ends, frozenset(joints.split()))
    return {piece.parts: set(piece.terminals) for piece in grouping.pieces}


def test_a_half_bridge_is_two_positions() -> None:
    found = pieces({"Q1": ("BUS", "SW"), "Q2": ("SW", "GND")}, "BUS SW GND")
    assert found == {("Q1",): {"BUS", "SW"}, ("Q2",): {"SW", "GND"}}


def test_parallel_and_series_devices_are_one_position() -> None:
    ends = {"Q1": ("BUS", "A"), "Q2": ("A", "SW"), "D1": ("SW", "BUS"), "Q3": ("SW", "BUS")}
    assert pieces(ends, "BUS SW") == {("D1", "Q1", "Q2", "Q3"): {"BUS", "SW"}}


def test_a_joint_between_two_devices_parts_them() -> None:
    ends = {"Q1": ("BUS", "A"), "Q2": ("A", "SW")}
    assert pieces(ends, "BUS SW A") == {("Q1",): {"BUS", "A"}, ("Q2",): {"A", "SW"}}
    assert pieces(ends, "BUS SW") == {("Q1", "Q2"): {"BUS", "SW"}}


def test_a_diode_bridge_around_a_transistor_is_one_position() -> None:
    ends = {
        "D1": ("L", "X"),
        "D2": ("N", "X"),
        "D3": ("Y", "L"),
        "D4": ("Y", "N"),
        "Q1": ("X", "Y"),
    }
    assert pieces(ends, "L N") == {("D1", "D2", "D3", "D4", "Q1"): {"L", "N"}}


def test_a_clamped_leg_splits_at_its_inner_nets() -> None:
    ends = {
        "Q1": ("P", "A"),
        "Q2": ("A", "SW"),
        "Q3": ("SW", "B"),
        "Q4": ("B", "N"),
        "D5": ("O", "A"),
        "D6": ("B", "O"),
    }
    found = pieces(ends, "P O N SW")
    assert sorted(found) == [("D5",), ("D6",), ("Q1",), ("Q2",), ("Q3",), ("Q4",)]


def test_series_devices_inside_a_clamped_leg_stay_together() -> None:
    ends = {
        "Q1": ("P", "M"),
        "Q7": ("M", "A"),
        "Q2": ("A", "SW"),
        "D5": ("O", "A"),
    }
    found = pieces(ends, "P O SW")
    assert found[("Q1", "Q7")] == {"P", "A"}


def test_a_device_with_a_loose_end_is_dangling() -> None:
    grouping = group_devices({"Q1": ("BUS", "X")}, frozenset({"BUS"}))
    assert grouping.pieces == ()
    assert grouping.dangling == ("Q1",)


NETS = st.sampled_from("ABCDEF")
DEVICES = st.dictionaries(
    st.integers(1, 30).map(lambda n: f"Q{n}"),
    st.tuples(NETS, NETS).filter(lambda pair: pair[0] != pair[1]),
    min_size=1,
    max_size=9,
)


@given(DEVICES, st.frozensets(NETS, min_size=1))
def test_every_device_is_in_one_piece_or_dangling(
    ends: dict[str, tuple[str, str]], joints: frozenset[str]
) -> None:
    grouping = group_devices(ends, joints)
    placed = [name for piece in grouping.pieces for name in piece.parts] + [*grouping.dangling]
    assert sorted(placed) == sorted(ends)
    pairs = [frozenset(piece.terminals) for piece in grouping.pieces]
    assert len(pairs) == len(set(pairs))


@given(DEVICES, st.frozensets(NETS, min_size=1))
def test_no_joint_lies_inside_a_piece(
    ends: dict[str, tuple[str, str]], joints: frozenset[str]
) -> None:
    for piece in group_devices(ends, joints).pieces:
        inside = {net for name in piece.parts for net in ends[name]} - set(piece.terminals)
        assert not inside & joints
