"""Recognise a subcircuit that models one device, so that it is read as that device.

    .subckt SW-650 D G S Tj      ports drain, gate, source, and a thermal one
    Gch dd ss value={...}        the channel is a source, not a transistor
    Dbody ss dd DB               -> mosfet, and a note that it was assumed

Ports that are named by numbers say nothing; a body of plain devices is flattened instead.
"""

from collections.abc import Iterable, Mapping, Sequence

from rulecheck.netlist import Element, Subcircuit
from rulecheck.parts.edges import POLARITY
from rulecheck.parts.models import is_p_channel
from rulecheck.parts.part import Kind
from rulecheck.parts.part_reading import PartReading
from rulecheck.parts.roles import PINOUTS, role_of
from rulecheck.values import Unknown
from rulecheck.values.record import Record

_EXTRAS = frozenset({"kelvin", "body", "thermal", "substrate"})
_FOLLOWING = frozenset("EGBFHA")
_DEVICES = frozenset("DMQJZSW")
_SMALL: Mapping[str, float] = {"R": 0.1, "L": 50e-9, "V": 0.0}
"""Ohm, henry, volts up to which an element inside a model is a lead."""


class _Macro(Record):
    """An instance's pins by role and its body with leads merged."""

    pins: Mapping[str, str]
    body: Sequence[Element]
    leads: Mapping[str, str]

    def joins(self, net: str, role: str) -> bool:
        pin = self.pins[role]
        return self.leads.get(net, net) == self.leads.get(pin, pin)

    def has_diode(self, anode: str, cathode: str) -> bool:
        return any(
            element.letter == "D"
            and len(element.nets) >= 2
            and self.joins(element.nets[0], anode)
            and self.joins(element.nets[1], cathode)
            for element in self.body
        )

    def has_model(self, *types: str) -> bool:
        return any(e.model is not None and e.model.type in types for e in self.body)


def read_macro(
    instance: Element, definition: Subcircuit, body: Sequence[Element]
) -> PartReading | None:
    """The device that the subcircuit stands for; None where it is to be flattened."""
    for family, settle in _FAMILIES.items():
        roles = tuple(role_of(port, family) for port in definition.ports)
        if not _fits(roles, family) or len(roles) != len(instance.nets):
            continue
        if not _models_one_device(body, family):
            return None
        pins = dict(zip(roles, instance.nets, strict=True))
        kind, facts, remark = settle(_Macro(pins, body, _merge_leads(body)))
        ports = " ".join(definition.ports)
        assumed = f"read as {kind.called}{remark} from the ports of {definition.name}: {ports}"
        return PartReading(kind, roles, facts, assumed)
    return None


def _fits(roles: tuple[str, ...], family: Kind) -> bool:
    needed = set(PINOUTS[family].needed)
    return needed <= set(roles) and set(roles) <= needed | _EXTRAS and len(set(roles)) == len(roles)


def _models_one_device(body: Sequence[Element], family: Kind) -> bool:
    """Behind internal sources, or without any device; of an empty body only a diode is plain."""
    if not body:
        return family is Kind.DIODE
    letters = {element.letter for element in body}
    return bool(letters & _FOLLOWING) or not letters & _DEVICES


_Settled = tuple[Kind, Mapping[str, str], str]


def _field_effect(macro: _Macro) -> _Settled:
    p_channel = any(e.model is not None and is_p_channel(e.model) for e in macro.body)
    if p_channel or macro.has_diode("drain", "source"):
        return Kind.P_MOSFET, {}, ""
    if macro.has_model("NMOS", "VDMOS") or macro.has_diode("source", "drain"):
        return Kind.MOSFET, {}, ""
    return Kind.MOSFET, {}, " (n-channel: nothing in it says otherwise)"


def _insulated_gate(macro: _Macro) -> _Settled:
    if macro.has_diode("emitter", "collector"):
        return Kind.IGBT_WITH_DIODE, {}, ""
    return Kind.IGBT, {}, " (no diode from emitter to collector in it)"


def _bipolar(macro: _Macro) -> _Settled:
    if macro.has_model("PNP", "LPNP"):
        return Kind.BJT, {POLARITY: "pnp"}, ""
    return Kind.BJT, {}, ""


def _thyristor(macro: _Macro) -> _Settled:
    return Kind.THYRISTOR, {}, ""


def _diode(macro: _Macro) -> _Settled:
    return Kind.DIODE, {}, ""


_FAMILIES = {
    Kind.MOSFET: _field_effect,
    Kind.IGBT: _insulated_gate,
    Kind.BJT: _bipolar,
    Kind.THYRISTOR: _thyristor,
    Kind.DIODE: _diode,
}


def _merge_leads(body: Iterable[Element]) -> dict[str, str]:
    """Net -> the net that stands for it, after the leads of the package are taken as wires."""
    parent: dict[str, str] = {}

    def root(net: str) -> str:
        while parent.get(net, net) != net:
            net = parent[net]
        return net

    for element in body:
        if _is_lead(element):
            parent[root(element.nets[0])] = root(element.nets[1])
    return {net: root(net) for net in parent}


def _is_lead(element: Element) -> bool:
    limit = _SMALL.get(element.letter)
    if limit is None or isinstance(element.value, Unknown) or len(element.nets) != 2:
        return False
    return element.waveform is None and abs(element.value) <= limit
