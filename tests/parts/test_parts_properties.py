"""What must be true of every part list."""

from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck.netlist import Element
from rulecheck.parts import PartList
from rulecheck.values.record import replace
from tests.kit.parts import card, identified, model

DATA = """\
parts:
  "SW-*": {kind: mosfet, ratings: {blocking: 100 V, current: 20 A}}
  "HB-*":
    kind: module
    pins: [plus, mid, minus]
    devices: {d: {kind: diode, pins: {anode: minus, cathode: plus}}}
"""
FET = model("FET", "VDMOS", vds=80.0)
MAKERS = {
    "M": lambda name: card(name, f"D{name} G S", "FET", kind=FET, blocking=60.0),
    "Q": lambda name: card(name, f"D{name} G S", "SW-N100-7"),
    "D": lambda name: card(name, f"A K{name}", "DI-600-15"),
    "R": lambda name: card(name, "A B", "10k", 1e4, power=2.0),
    "C": lambda name: card(name, "A B", "1u", 1e-6),
    "U": lambda name: card(name, "A B C", "HB-7"),
    "TP": lambda name: card(name, "A"),
}


@st.composite
def drawn(draw: st.DrawFn) -> list[Element]:
    prefixes = draw(st.lists(st.sampled_from(sorted(MAKERS)), min_size=1, max_size=8))
    return [MAKERS[prefix](f"{prefix}{number}") for number, prefix in enumerate(prefixes, 1)]


def by_name(found: PartList) -> dict[str, object]:
    return dict(found.by_name)


@given(drawn(), st.randoms())
@settings(max_examples=40, deadline=None)
def test_the_order_of_cards_changes_no_part(elements: list[Element], random: object) -> None:
    shuffled = list(elements)
    random.shuffle(shuffled)  # type: ignore[attr-defined]
    once, twice = identified(elements, DATA), identified(shuffled, DATA)
    assert by_name(once) == by_name(twice)
    assert sorted(once.assumed) == sorted(twice.assumed)


@given(drawn())
@settings(max_examples=40, deadline=None)
def test_the_case_of_texts_changes_nothing_but_the_texts(elements: list[Element]) -> None:
    lower = [replace(element, text=element.text.lower()) for element in elements]
    as_written, in_lower = identified(elements, DATA), identified(lower, DATA)
    assert [(p.kind, p.pins, p.data) for p in as_written.parts] == [
        (p.kind, p.pins, p.data) for p in in_lower.parts
    ]


@given(drawn(), st.sampled_from(["A", "G", "S"]), st.sampled_from(["N1", "net-7"]))
@settings(max_examples=40, deadline=None)
def test_renaming_a_net_renames_it_everywhere(elements: list[Element], old: str, new: str) -> None:
    def renamed(element: Element) -> Element:
        return replace(element, nets=tuple(new if net == old else net for net in element.nets))

    before, after = identified(elements, DATA), identified(map(renamed, elements), DATA)
    for was, now in zip(before.parts, after.parts, strict=True):
        assert [new if net == old else net for net in was.nets] == list(now.nets)
        assert [edge.blocks for edge in was.edges] == [edge.blocks for edge in now.edges]
