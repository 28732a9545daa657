"""Small power stages for property tests: drawn at random, and rewritten without a change.

A stage is a tuple of cards and a tuple of ports, so that a test can shuffle, rename, turn or
split them and compare what the analysis says before and after.
"""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field, replace
from typing import Any

from hypothesis import Phase, settings
from hypothesis import strategies as st

from tests.kit.published import MODELS, Study

Rename = Callable[[str], str]
FEW = settings(
    max_examples=12, deadline=None, derandomize=True, phases=(Phase.generate, Phase.shrink)
)
"""Each example is some whole analyses; the same examples in every run."""


@dataclass(frozen=True)
class Card:
    name: str
    nets: tuple[str, ...]
    word: str
    ratings: Mapping[str, float] = field(default_factory=dict)

    def text(self) -> str:
        ratings = [f"{key}={value:.9g}" for key, value in self.ratings.items()]
        return " ".join([self.name, *self.nets, self.word, *ratings])


@dataclass(frozen=True)
class PortLine:
    name: str
    ends: tuple[str, str]
    items: Mapping[str, str]

    def text(self) -> str:
        words = [f"{key}: {value}" for key, value in self.items.items()]
        between = f"between: [{', '.join(self.ends)}]"
        return f"  {self.name}: {{{', '.join([between, *words])}}}"


@dataclass(frozen=True)
class SmallStage:
    cards: tuple[Card, ...]
    ports: tuple[PortLine, ...]
    switching: str = "switching: {frequency: 100 kHz}"

    def sheet(self) -> str:
        return "\n".join(["ports:", *(port.text() for port in self.ports), self.switching, ""])

    def study(self) -> Study:
        return Study("\n".join(card.text() for card in self.cards), self.sheet())

    def renamed(self, part: Rename, net: Rename) -> "SmallStage":
        cards = (
            replace(card, name=part(card.name), nets=tuple(map(net, card.nets)))
            for card in self.cards
        )
        ports = (replace(port, ends=(net(port.ends[0]), net(port.ends[1]))) for port in self.ports)
        return replace(self, cards=tuple(cards), ports=tuple(ports))

    def turned(self) -> "SmallStage":
        """Every device and every port the other way round: the same stage upside down."""
        ports = (replace(port, ends=(port.ends[1], port.ends[0])) for port in self.ports)
        return replace(self, cards=tuple(map(_turned, self.cards)), ports=tuple(ports))

    def with_card(self, old: Card, *new: Card) -> "SmallStage":
        cards = tuple(entry for card in self.cards for entry in (new if card is old else (card,)))
        return replace(self, cards=cards)

    def data(self) -> list["SmallStage"]:
        """The stage once for each datum it has, without that datum."""
        fewer = [
            self.with_card(card, replace(card, ratings=_without(card.ratings, key)))
            for card in self.cards
            for key in card.ratings
        ]
        for port in self.ports:
            for key in port.items:
                less = replace(port, items=_without(port.items, key))
                ports = tuple(less if entry is port else entry for entry in self.ports)
                fewer.append(replace(self, ports=ports))
        return [*fewer, replace(self, switching="")]


def _turned(card: Card) -> Card:
    order = {"M": (2, 1, 0, 0), "Q": (2, 1, 0), "D": (1, 0), "S": (1, 0, 2, 3)}
    picked = order.get(card.name[0])
    return card if picked is None else replace(card, nets=tuple(card.nets[k] for k in picked))


def _without(items: Mapping[str, Any], key: str) -> dict[str, Any]:
    return {name: value for name, value in items.items() if name != key}


def mosfet(name: str, drain: str, source: str, **ratings: float) -> Card:
    return Card(name, (drain, f"g{name}", source, source), "FET", ratings)


def bare(name: str, collector: str, emitter: str, **ratings: float) -> Card:
    return Card(name, (collector, f"b{name}", emitter), "NPX", ratings)


def diode(name: str, anode: str, cathode: str, **ratings: float) -> Card:
    return Card(name, (anode, cathode), "DX", ratings)


def ideal(name: str, plus: str, minus: str, **ratings: float) -> Card:
    return Card(name, (plus, minus, f"c{name}", "0"), "SWX", ratings)


def coil(name: str, start: str, end: str, henry: str = "100u") -> Card:
    return Card(name, (start, end), henry)


@st.composite
def ratings(draw: st.DrawFn) -> dict[str, float]:
    """Blocking and current, each stated or not, some of them too low."""
    choice = {
        "blocking": draw(st.sampled_from([None, 40.0, 80.0, 150.0, 400.0])),
        "current": draw(st.sampled_from([None, 5.0, 60.0, 300.0])),
    }
    return {key: value for key, value in choice.items() if value is not None}


@st.composite
def switches(draw: st.DrawFn, number: int, start: str, end: str) -> tuple[Card, ...]:
    """One position between two nets, in one of the usual realisations."""
    rated, again = draw(ratings()), draw(ratings())
    k, inside = number, f"x{number}"
    kinds: list[tuple[Card, ...]] = [
        (mosfet(f"M{k}", start, end, **rated),),
        (bare(f"Q{k}", start, end, **rated),),
        (bare(f"Q{k}", start, end, **rated), diode(f"D{k}", end, start, **again)),
        (mosfet(f"M{k}", start, inside, **rated), diode(f"D{k}", inside, end, **again)),
        (ideal(f"S{k}", start, end, **rated),),
    ]
    return draw(st.sampled_from(kinds))


def _span(low: float, high: float, unit: str) -> str:
    return f"[{low:g} {unit}, {high:g} {unit}]"


@st.composite
def legs(draw: st.DrawFn) -> SmallStage:
    """A battery behind a coil on a leg of a bus, charged, discharged or both."""
    low, high = sorted(draw(st.tuples(st.integers(-60, 60), st.integers(-60, 60))))
    battery = {"voltage": _span(42, 58, "V"), "supplies": _span(low, high + 1, "A")}
    cards = (
        *draw(switches(1, "BUS", "SW")),
        *draw(switches(2, "SW", "0")),
        coil("L1", "BAT", "SW"),
        Card("C1", ("BUS", "0"), "470u"),
    )
    bus = {"voltage": _span(90, draw(st.integers(91, 120)), "V")}
    ports = PortLine("battery", ("BAT", "0"), battery), PortLine("bus", ("BUS", "0"), bus)
    return SmallStage(cards, ports)


@st.composite
def choppers(draw: st.DrawFn) -> SmallStage:
    """A buck, boost or inverting cell from 48 V."""
    kind = draw(st.sampled_from(["buck", "boost", "inverting"]))
    rated = draw(ratings())
    if kind == "buck":
        cards = (*draw(switches(1, "IN", "SW")), diode("D9", "0", "SW", **rated))
        cards, out, volts = (*cards, coil("L1", "SW", "OUT")), ("OUT", "0"), 20
    elif kind == "boost":
        cards = (*draw(switches(1, "SW", "0")), diode("D9", "SW", "OUT", **rated))
        cards, out, volts = (*cards, coil("L1", "IN", "SW")), ("OUT", "0"), 100
    else:
        cards = (*draw(switches(1, "IN", "SW")), diode("D9", "OUT", "SW", **rated))
        cards, out, volts = (*cards, coil("L1", "SW", "0")), ("0", "OUT"), 36
    load = {"voltage": f"{volts} V", "draws": _span(draw(st.integers(5, 10)), 20, "A")}
    capacitor = Card("C1", ("OUT", "0"), "470u")
    source = PortLine("in", ("IN", "0"), {"voltage": "48 V"})
    return SmallStage((*cards, capacitor), (source, PortLine("out", out, load)))


@st.composite
def bridges(draw: st.DrawFn) -> SmallStage:
    """An H-bridge on an AC load."""
    cards = tuple(
        card
        for number, (start, end) in enumerate(
            [("P", "A"), ("A", "0"), ("P", "B"), ("B", "0")], start=1
        )
        for card in draw(switches(number, start, end))
    )
    load = {"draws": f"{draw(st.integers(3, 60))} A peak", "frequency": "50 Hz"}
    bus = {"voltage": f"{draw(st.integers(40, 100))} V"}
    ports = PortLine("bus", ("P", "0"), bus), PortLine("load", ("A", "B"), load)
    return SmallStage(cards, ports)


def stages() -> st.SearchStrategy[SmallStage]:
    return st.one_of(legs(), choppers(), bridges())


def positions(study: Study) -> dict[str, dict[str, Any]]:
    """By name: demand, capability and nets of every position."""
    return {entry["name"]: entry for entry in study.table["positions"]}


def verdicts(study: Study) -> dict[tuple[str, str, str], str]:
    """By rule, subject and the parts concerned: broken or undecided; the rest holds."""
    return {
        (finding["rule"], finding["subject"], " ".join(finding["parts"])): finding["verdict"]
        for finding in study.lint["findings"]
    }


def in_a_box(stage: SmallStage) -> Study:
    """The same stage with its switches inside a subcircuit."""
    outside = {net for card in stage.cards if card.name[0] in "LC" for net in card.nets}
    outside |= {net for port in stage.ports for net in port.ends}
    inside = [card for card in stage.cards if card.name[0] not in "LC"]
    pins = sorted(outside & {net for card in inside for net in card.nets} - {"0"})
    numbered = {net: f"n{k}" for k, net in enumerate(pins)}
    body = [
        replace(card, nets=tuple(numbered.get(net, net) for net in card.nets)).text()
        for card in inside
    ]
    box = [".subckt stagebox " + " ".join(numbered.values()), *body, MODELS.strip(), ".ends"]
    rest = [card.text() for card in stage.cards if card.name[0] in "LC"]
    call = "X1 " + " ".join(pins) + " stagebox"
    return Study("\n".join([*rest, call, *box]), stage.sheet())
