"""Say what each element of a circuit is.

Part data decides first, then the card and its model. An instance of a subcircuit is one part
where part data describes it or its ports and body show a model of one device; else its contents
are read in its place.
"""

from collections.abc import Iterable, Mapping, Sequence

from rulecheck.netlist import GROUND, Circuit, Element, Subcircuit
from rulecheck.parts.assumptions import Assumptions
from rulecheck.parts.build import build_part, multiplicity_of
from rulecheck.parts.classify import classify
from rulecheck.parts.cores import find_cores
from rulecheck.parts.macro import read_macro
from rulecheck.parts.models import read_as_stated
from rulecheck.parts.part import Core, Kind, Part, PartList
from rulecheck.parts.part_data import NO_PART_DATA, PartData, StatedPart
from rulecheck.parts.part_reading import PartReading, not_understood
from rulecheck.parts.pinning import find_roles, split_nets
from rulecheck.values import Problem, error, note
from rulecheck.values.record import Mutable, field, replace

_UNMATCHED = frozenset("VIEGHBK")
"""Letters that no part data can describe: sources and couplings."""
_PASSIVE_KINDS: Mapping[str, frozenset[Kind]] = {
    "R": frozenset(
        {Kind.RESISTOR, Kind.FUSE, Kind.SENSOR, Kind.ZENER, Kind.OTHER}
        | {Kind.NTC, Kind.VARISTOR, Kind.RELAY}
    ),
    "C": frozenset(
        {Kind.CAPACITOR, Kind.DIODE, Kind.OTHER, Kind.CONNECTOR, Kind.CONTROLLER}
        | {Kind.CIRCUIT_BREAKER, Kind.CURRENT_TRANSFORMER}
    ),
    "L": frozenset(
        {Kind.INDUCTOR, Kind.DIODE, Kind.FUSE, Kind.SENSOR, Kind.OTHER}
        | {Kind.COMMON_MODE_CHOKE, Kind.CURRENT_TRANSFORMER}
    ),
}
"""What part data may make of a passive's card."""


def identify_parts(circuit: Circuit, part_data: PartData = NO_PART_DATA) -> PartList:
    """All parts of the circuit; `problems` are those of part data, of its use, and of cards."""
    search = _Search(circuit, part_data, _bodies(circuit.elements))
    for element in circuit.elements:
        search.read(element)
    cores = find_cores(search.couplings, {part.name.lower(): part for part in search.parts})
    unknown = [part.name for part in search.parts if part.kind is Kind.UNKNOWN]
    return PartList(
        file=circuit.file,
        parts=tuple(search.parts),
        cores=(*search.cores, *cores.cores),
        ground=GROUND,
        grounds=circuit.grounds,
        not_understood=(*unknown, *circuit.unread),
        assumed=(*search.assumed.sentences(), *cores.assumed),
        by_name={part.name: part for part in search.parts},
        problems=(*part_data.problems, *search.problems, *cores.problems, *search.unused()),
    )


class _Search(Mutable):
    """Goes through the elements in netlist order; what was found so far is its state."""

    circuit: Circuit
    part_data: PartData
    bodies: Mapping[str, Sequence[Element]]
    parts: list[Part] = field(default_factory=list)
    couplings: list[Element] = field(default_factory=list)
    cores: list[Core] = field(default_factory=list)
    """Of winding sets that part data describes."""
    problems: list[Problem] = field(default_factory=list)
    assumed: Assumptions = field(default_factory=Assumptions)
    instances: dict[str, Element] = field(default_factory=dict)
    opaque: set[str] = field(default_factory=set)
    """Instances whose contents are not looked at."""
    times_used: dict[str, int] = field(default_factory=dict)
    """By lower-case name."""
    fits: dict[tuple[str, str, str], StatedPart | None] = field(default_factory=dict)

    def read(self, element: Element) -> None:
        element = _with_control_pair(element)
        if element.letter == "X":
            self.instances[element.name] = element
        if element.instance in self.opaque:
            self.opaque.add(element.name)
            return
        if element.letter == "K" and element.controls:
            self.couplings.append(element)
            return
        stated = self._stated(element)
        reading = self._by_data(element, stated) if stated else self._by_card(element)
        if reading is None:
            return
        if element.letter == "X":
            self.opaque.add(element.name)
        self._add(element, reading, stated)

    def unused(self) -> Iterable[Problem]:
        """Entries of part data that fit no text of the netlist."""
        texts = {text for element in self.circuit.elements for text in _texts(element) if text}
        for part in self.part_data.parts:
            if not any(part.fits(text) for text in texts):
                what = f"part '{part.key}' fits no element of {self.circuit.file}"
                yield note(part.span, what, "compare it with the model or value texts there")

    def _stated(self, element: Element) -> StatedPart | None:
        if element.letter in _UNMATCHED or (element.letter == "F" and element.controls):
            return None
        texts = _texts(element)
        if texts not in self.fits:
            self.fits[texts] = self.part_data.best_fit(texts)
        stated = self.fits[texts]
        kinds = _PASSIVE_KINDS.get(element.letter)
        if stated is None or kinds is None or stated.kind in kinds:
            return stated
        what = f"part '{stated.key}' is {stated.kind.called}, but {element.name} is none"
        remedy = f"make the key fit only the texts of such parts; {element.span} is not changed"
        self.problems.append(error(stated.span, what, remedy))
        return None

    def _by_data(self, element: Element, stated: StatedPart) -> PartReading:
        roles = find_roles(element, stated, self._definition(element))
        problem = roles if isinstance(roles, Problem) else split_nets(element, roles, stated)
        if problem is not None or isinstance(roles, Problem):
            self.problems += [problem] if problem else []
            return not_understood(element)
        return read_as_stated(element, stated.kind, roles)

    def _by_card(self, element: Element) -> PartReading | None:
        definition = self._definition(element)
        if definition is None:
            return classify(element)
        body = self.bodies.get(element.name, ())
        device = read_macro(element, definition, body)
        return device or (None if body else not_understood(element))

    def _definition(self, element: Element) -> Subcircuit | None:
        if element.letter != "X":
            return None
        return self.circuit.subcircuits.get(element.text.lower())

    def _add(self, element: Element, reading: PartReading, stated: StatedPart | None) -> None:
        times = multiplicity_of(element, self._around(element))
        element = self._once(element)
        built = build_part(element, reading, stated, times)
        self.parts += built.parts
        self.problems += built.problems
        self.cores += built.cores
        self.assumed.add(element.name, reading.assumed)
        if times != 1.0:
            self.assumed.add(element.name, f"read as {times:g} devices in parallel (m)")

    def _once(self, element: Element) -> Element:
        """Two cards of one name stay two parts: no later step may lose one of them."""
        key = element.name.lower()
        count = self.times_used[key] = self.times_used.get(key, 0) + 1
        if count == 1:
            return element
        name = f"{element.name}#{count}"
        self.assumed.add(name, f"so named because {element.name} is the name of more than one card")
        return replace(element, name=name)

    def _around(self, element: Element) -> Iterable[Element]:
        name = element.instance
        while name in self.instances:
            yield self.instances[name]
            name = self.instances[name].instance


def _with_control_pair(element: Element) -> Element:
    """A switch's controlling nets are its gate: pins like the others."""
    if element.letter != "S" or not element.controls or len(element.nets) != 2:
        return element
    return replace(element, nets=(*element.nets, *element.controls[:2]))


def _texts(element: Element) -> tuple[str, str, str]:
    """What part data may name: the text, the model, and a passive's type behind its value."""
    behind = element.text.partition(" ")[2].strip() if element.letter in _PASSIVE_KINDS else ""
    return element.text, element.model.name if element.model else "", behind


def _bodies(elements: Iterable[Element]) -> dict[str, list[Element]]:
    """Everything inside each instance, inner instances' contents included."""
    around: dict[str, str] = {}
    bodies: dict[str, list[Element]] = {}
    for element in elements:
        if element.letter == "X":
            around[element.name] = element.instance
        name = element.instance
        while name:
            bodies.setdefault(name, []).append(element)
            name = around.get(name, "")
    return bodies
