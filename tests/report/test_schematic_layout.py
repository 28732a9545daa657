"""Schematics: every part between its own nets, none over another; symbols with standard ends."""

from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck.report.review.layout import TwoTerminal, lay_out
from rulecheck.report.review.symbols import LENGTH, SYMBOLS, draw_symbol

NETS = ("TOP", "SW", "x", "y", "z", "BOTTOM")
RAILS = {"TOP": 1.0, "BOTTOM": 0.0}


@st.composite
def circuits(draw):
    pairs = st.tuples(st.sampled_from(NETS), st.sampled_from(NETS)).filter(lambda p: p[0] != p[1])
    ends = draw(st.lists(pairs, min_size=1, max_size=12))
    return [TwoTerminal(f"Q{k}", *pair) for k, pair in enumerate(ends)]


@given(circuits(), st.sets(st.sampled_from(NETS)))
@settings(max_examples=150, deadline=None, derandomize=True)
def test_no_part_covers_another_and_each_stands_between_its_nets(parts, named):
    layout = lay_out(parts, RAILS, frozenset(named))
    taken = set()
    for part in parts:
        place = layout.places[part.name]
        ends = (layout.rows[part.start], layout.rows[part.end])
        assert (place.top, place.bottom) == (min(ends), max(ends))
        assert place.turned is (ends[0] > ends[1])
        gaps = {(place.column, row) for row in range(place.top, place.bottom)}
        assert gaps
        assert not gaps & taken
        taken |= gaps


@given(circuits())
@settings(max_examples=100, deadline=None, derandomize=True)
def test_two_nets_touch_in_a_row_of_one_column_only_where_they_are_one(parts):
    layout = lay_out(parts, RAILS, frozenset())
    at = {}
    for part in parts:
        place = layout.places[part.name]
        for net in (part.start, part.end):
            assert at.setdefault((place.column, layout.rows[net]), net) == net


def chain(*ends):
    return [TwoTerminal(f"Q{k}", *pair) for k, pair in enumerate(ends, 1)]


def test_a_half_bridge_of_parallel_devices_has_two_columns():
    parts = chain(("TOP", "SW"), ("TOP", "SW"), ("SW", "BOTTOM"), ("SW", "BOTTOM"))
    layout = lay_out(parts, RAILS, frozenset({"SW"}))
    assert (layout.columns, layout.rows) == (2, {"TOP": 0, "SW": 1, "BOTTOM": 2})


def test_a_device_drawn_the_other_way_up_is_turned():
    layout = lay_out(chain(("x", "SW"), ("x", "BOTTOM")), {"SW": 1.0, "BOTTOM": 0.0}, frozenset())
    assert layout.places["Q1"].turned
    assert not layout.places["Q2"].turned
    assert layout.inside == {"x"}


def test_every_symbol_reaches_from_pin_to_pin():
    for name in SYMBOLS:
        paths = " ".join(shape.path for shape in draw_symbol(name).shapes)
        end = f"{LENGTH:g},0" if name == "inductor" else f"0,{LENGTH:g}"
        assert "0,0" in paths, name
        assert end in paths, name


def test_a_kind_without_a_symbol_is_a_box():
    assert draw_symbol("module").gate is None
    assert draw_symbol("module").shapes
