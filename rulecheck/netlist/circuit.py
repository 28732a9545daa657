"""The reader's product: one flat list of elements with nets, values and where they stand."""

from collections.abc import Mapping

from rulecheck.values import Problem, Span, Unknown
from rulecheck.values.record import Record, field

GROUND = "0"


class Waveform(Record):
    """A source's time function.

    `kind` is the lower-case keyword (`sin`, `pulse`, `pwl`, `exp`, `behavioural`, ...);
    `values` its numeric arguments in order, SI units; `text` what was written.
    """

    kind: str
    values: tuple[float, ...]
    text: str
    repeats_from: float | None = None
    """Of a `pwl`: from this time to its last one it repeats, seconds; None: it does not."""


class Model(Record):
    """A `.model` card, found in the scope of the element that names it.

    `type` is upper-case (`D`, `NPN`, `VDMOS`, ...); parameter names are lower-case; a
    parameter without a readable number keeps its text.
    """

    name: str
    type: str
    parameters: Mapping[str, float | str]
    span: Span


class Element(Record):
    """One element, after parameters are computed and subcircuits expanded.

    An instance of a subcircuit stays in the list as an element of letter X, followed by its
    contents, whose `instance` is its name; whoever knows the part takes the one or the other.
    """

    name: str
    """As first written, with the path of instances: `X1.M3`."""
    letter: str
    """The device letter in upper case; `?` where no class could be told."""
    nets: tuple[str, ...]
    """In card order; ground is `0`; nets inside an instance carry its path (`X1.mid`)."""
    value: float | Unknown
    """R, L, C, coupling, or a source's DC value, in SI units."""
    text: str
    """Model, subcircuit or value text as written; empty where there is none."""
    span: Span
    """The element's card; inside an instance, the card in the definition."""
    parameters: Mapping[str, float | str] = field(default_factory=dict)
    """Lower-case names, underscore for hyphen; initial conditions and ratings on the card too."""
    model: Model | None = None
    waveform: Waveform | None = None
    controls: tuple[str, ...] = ()
    """Controlling nets (E, G, S), sources (F, H, W) or the coupled inductors (K)."""
    instance: str = ""
    """The enclosing instance's name; empty at the top level."""
    instance_chain: tuple[Span, ...] = ()
    """The cards of the enclosing instances, outermost first."""


class Subcircuit(Record):
    """A definition that some instance uses."""

    name: str
    ports: tuple[str, ...]
    span: Span


class Circuit(Record):
    """A whole netlist, read and flattened."""

    file: str
    title: str
    elements: tuple[Element, ...]
    subcircuits: Mapping[str, Subcircuit]
    """By lower-case name."""
    grounds: tuple[str, ...]
    """Nets that look like another ground (`GND`, `AGND`); none is merged with `0`."""
    unread: tuple[str, ...]
    """Names of elements on cards that could not be read: missing from the analysis."""
    problems: tuple[Problem, ...]
    """Errors and notes in the order of the file."""
    files: tuple[str, ...] = ()
    """The netlist and all that it includes, in the order in which they were opened."""
