"""Instances: described by part data, models of one device, modules, or flattened."""

import pytest

from rulecheck.netlist import Element
from rulecheck.parts import Kind, PartList
from tests.kit.parts import card, identified, model

FOLLOWS = card("X1.E1", "X1.g G", "", 1.0)
N_CHANNEL = card("X1.M1", "X1.d X1.g S S", "MN", kind=model("MN", "NMOS"))
P_CHANNEL = card("X1.M1", "X1.d X1.g S S", "MP", kind=model("MP", "PMOS"))
LEAD = card("X1.R1", "X1.a E", "5m", 5e-3)
DIODE = card("X1.D1", "X1.a C", "DB", kind=model("DB", "D", bv=600.0))


def kinds(found: PartList) -> dict[str, str]:
    return {part.name: part.kind.value for part in found.parts}


MACROS = {
    "n-channel": ("D G S", "d g s", [N_CHANNEL, FOLLOWS], "mosfet"),
    "p-channel": ("D G S", "drain gate source", [P_CHANNEL, FOLLOWS], "p-mosfet"),
    "p-channel by its diode": (
        "D G S",
        "D G S",
        [card("X1.D1", "D S", "DB", kind=model("DB", "D")), FOLLOWS],
        "p-mosfet",
    ),
    "with a thermal port": ("D G S T", "d g s tj", [N_CHANNEL, FOLLOWS], "mosfet"),
    "with a Kelvin port, in another order": ("G D K S", "G D KS S", [FOLLOWS], "mosfet"),
    "transistor without diode": ("C G E", "c g e", [FOLLOWS], "igbt"),
    "with a diode from emitter to collector": (
        "C G E",
        "collector gate emitter",
        [FOLLOWS, LEAD, DIODE],
        "igbt-with-diode",
    ),
    "bipolar": ("C B E", "c b e", [FOLLOWS], "bjt"),
    "thyristor": ("A G K", "anode gate cathode", [FOLLOWS], "thyristor"),
    "diode": ("A K", "a k", [FOLLOWS], "diode"),
    "diode with an unread body": ("A K", "a c", [], "diode"),
    "no device in its body": ("C G E", "c g e", [card("X1.C1", "C E", "1n", 1e-9)], "igbt"),
}


@pytest.mark.parametrize("name", MACROS)
def test_model_of_one_device_is_read_as_that_device_and_said_so(name: str) -> None:
    nets, ports, body, kind = MACROS[name]
    found = identified([card("X1", nets, "SUB"), *body], SUB=ports)
    assert kinds(found) == {"X1": kind}
    assert found.assumed[0].startswith(f"X1 read as {Kind(kind).called} ")


FLATTENED = {
    "ports named by numbers": ("1 2 3", [N_CHANNEL, FOLLOWS]),
    "a plain device inside": ("d g s", [N_CHANNEL]),
    "a port that is no pin of a device": ("d g s vcc", [N_CHANNEL, FOLLOWS]),
}


@pytest.mark.parametrize("name", FLATTENED)
def test_other_subcircuits_are_read_as_their_contents(name: str) -> None:
    ports, body = FLATTENED[name]
    nets = " ".join("DGSV"[: len(ports.split())])
    found = identified([card("X1", nets, "SUB"), *body], SUB=ports)
    assert list(kinds(found)) == [element.name for element in body]


def test_an_empty_body_is_not_understood_whatever_its_ports() -> None:
    """Whether there is a diode in it, or which channel it has, nobody says."""
    for ports in ("d g s", "c g e", "1 2 3"):
        found = identified([card("X1", "A B C", "SUB")], SUB=ports)
        assert (kinds(found), found.not_understood) == ({"X1": "unknown"}, ("X1",))


def test_contents_of_a_described_instance_are_not_looked_at() -> None:
    nested = [
        card("X1", "D G S", "SW-7"),
        card("X1.X2", "D G S", "CORE"),
        card("X1.X2.M1", "D G S S", "MN", kind=model("MN", "NMOS")),
    ]
    entry = 'parts:\n  "SW-7": {kind: gan-hemt, pins: [drain, gate, source]}\n'
    found = identified(nested, entry, **{"SW-7": "1 2 3", "CORE": "1 2 3"})
    assert kinds(found) == {"X1": "gan-hemt"}


def test_nested_instances_are_flattened_all_the_way() -> None:
    nested = [
        card("X1", "D G S", "OUTER"),
        card("X1.X2", "D G S", "INNER"),
        card("X1.X2.M1", "D G S S", "MN", kind=model("MN", "NMOS")),
    ]
    found = identified(nested, OUTER="1 2 3", INNER="1 2 3")
    assert kinds(found) == {"X1.X2.M1": "mosfet"}


MODULE = """\
parts:
  "HB-1200-*":
    kind: module
    pins: [plus, mid, minus, gate-high, gate-low]
    devices:
      high:
        kind: igbt-with-diode
        pins: {collector: plus, gate: gate-high, emitter: mid}
        ratings: {blocking: 1200 V, current: 200 A}
      low: {kind: igbt-with-diode, pins: {collector: mid, gate: gate-low, emitter: minus}}
"""


def module(**parameters: float | str) -> PartList:
    element: Element = card("X1", "BUS SW PGND GH GL", "HB-1200-200", **parameters)
    return identified([element], MODULE)


def test_a_module_becomes_its_devices_between_its_pins() -> None:
    found = module()
    assert kinds(found) == {
        "X1": "module",
        "X1.high": "igbt-with-diode",
        "X1.low": "igbt-with-diode",
    }
    high = found.by_name["X1.high"]
    assert (high.module, high.net("collector"), high.net("emitter")) == ("X1", "BUS", "SW")
    assert (high.edges[0].blocks, high.edges[0].current) == (1200.0, 200.0)
    assert found.by_name["X1"].edges == ()


def test_what_is_missing_in_a_module_names_the_device() -> None:
    blocks = module().by_name["X1.low"].edges[0].blocks
    assert getattr(blocks, "settle", "") == (
        "ratings.blocking of low of part HB-1200-* (in hut.parts.yaml)"
    )


def test_modules_in_parallel_multiply_their_devices() -> None:
    assert module(m=2.0).by_name["X1.high"].edges[0].current == 400.0


def test_a_module_with_too_few_nets_is_an_error() -> None:
    found = identified([card("X1", "BUS SW PGND", "HB-1200-200")], MODULE)
    assert found.by_name["X1"].kind is Kind.UNKNOWN
    assert "lists 5 pins" in found.problems[0].what


TRANSFORMER = """\
parts:
  "TX-48-*":
    kind: winding-set
    pins: [p1, p2, s1, s2, s3]
    windings:
      primary: {pins: [p1, p2], turns: 4}
      upper: {pins: [s1, s2], turns: 32}
      lower: {pins: [s2, s3], turns: 32}
    inductance: 40 uH
    ratings: {current: 90 A}
"""


def test_a_winding_set_becomes_inductors_on_a_core() -> None:
    found = identified([card("T1", "A B C D E", "TX-48-400")], TRANSFORMER)
    (core,) = found.cores
    assert (core.name, core.turns) == ("T1", (1.0, 8.0, 8.0))
    upper = found.by_name["T1.upper"]
    assert (core.windings[1], upper.kind, upper.nets) == ("T1.upper", Kind.INDUCTOR, ("C", "D"))
    assert (found.by_name["T1.primary"].value, upper.value) == (40e-6, 64 * 40e-6)


def test_a_winding_set_without_inductance_says_what_is_missing() -> None:
    entry = TRANSFORMER.replace("    inductance: 40 uH\n", "")
    found = identified([card("T1", "A B C D E", "TX-48-400")], entry)
    value = found.by_name["T1.upper"].value
    assert getattr(value, "settle", "") == "inductance of part TX-48-* (in hut.parts.yaml)"
