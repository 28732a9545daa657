"""Currents whose ripple or mean nobody can compute: left open, never taken as smaller."""

import math

import pytest

from rulecheck.demand import Demands
from rulecheck.values import Interval, Quadrant, QuadrantSet, Unknown
from tests.kit.published import Study, dc, sheet
from tests.kit.stages import demands_of

FREQUENCY = "switching: {frequency: 100 kHz}"
BUS = "  bus: {between: [BUS, 0], voltage: [90 V, 91 V]}"
BOTH_WAYS = QuadrantSet.of((Quadrant.I, Quadrant.IV))


def battery(supplies: str = "[0 A, 1 A]", voltage: str = "voltage: [42 V, 58 V], ") -> str:
    return f"  battery: {{between: [BAT, 0], {voltage}supplies: {supplies}}}"


def leg(low: str = "M2 SW g2 0 0 FET", coil: str = "100u") -> str:
    return f"M1 BUS g1 SW SW FET\n{low}\nL1 BAT SW {coil}\nC1 BUS 0 470u"


def stage_sheet(*ports: str, switching: str = FREQUENCY) -> str:
    return "\n".join(["ports:", *ports, switching, ""])


LESS = {
    "switching: {frequency: ...}": (leg(), stage_sheet(battery(), BUS, switching="")),
    "the inductance of L1": (leg(coil=""), stage_sheet(battery(), BUS)),
    "ports: {battery: {voltage: ...}}": (leg(), stage_sheet(battery(voltage=""), BUS)),
}


@pytest.mark.parametrize("datum", LESS)
def test_ripple_of_unknown_size_may_reverse_a_current(datum: str) -> None:
    cards, less = LESS[datum]
    demand = demands_of(cards, less).positions["M2"]
    assert isinstance(demand.on_current, Unknown)
    assert isinstance(demand.quadrants, Unknown)
    assert datum in demand.on_current.settle


@pytest.mark.parametrize("datum", LESS)
def test_what_the_ripple_waits_for_is_listed(datum: str) -> None:
    cards, less = LESS[datum]
    open_points = {item.what: item.settle_with for item in demands_of(cards, less).undetermined}
    assert open_points["current of L1"] == datum


@pytest.mark.parametrize("datum", LESS)
def test_a_bare_transistor_is_no_longer_found_sound_without_the_datum(datum: str) -> None:
    cards, less = LESS[datum]
    bare = cards.replace("M2 SW g2 0 0 FET", "Q2 SW g2 0 NPX")
    whole = cards_with_everything("Q2 SW g2 0 NPX")
    assert verdict(whole, "reverse-current-path", "Q2") == "broken"
    assert verdict(Study(bare, less), "reverse-current-path", "Q2") == "undecided"


def cards_with_everything(low: str) -> Study:
    return Study(leg(low), stage_sheet(battery(), BUS))


def verdict(study: Study, rule: str, subject: str) -> str:
    found = {(f["rule"], f["subject"]): f["verdict"] for f in study.lint["findings"]}
    return str(found.get((rule, subject), "silent"))


def test_both_signs_stay_known_where_the_mean_has_both() -> None:
    less = stage_sheet(battery("[-80 A, 80 A]"), BUS, switching="")
    demand = demands_of(leg(), less).positions["M2"]
    assert demand.on_current == Interval(-math.inf, math.inf)
    assert demand.quadrants == BOTH_WAYS


def test_a_small_share_of_the_other_sign_does_not_settle_it() -> None:
    """Beside a larger ripple it may count as none."""
    less = stage_sheet(battery("[-0.1 A, 80 A]"), BUS, switching="")
    assert isinstance(demands_of(leg(), less).positions["M2"].quadrants, Unknown)


CHOPPER = "M1 IN g SW SW FET\nD1 0 SW DX\nL1 SW OUT 100u\nC1 OUT 0 100u"
INPUT = "  in: {between: [IN, 0], voltage: 48 V}"


@pytest.mark.parametrize(
    "less",
    [
        stage_sheet(INPUT, "  out: {between: [OUT, 0], voltage: 24 V, draws: 9 A}", switching=""),
        stage_sheet(INPUT, "  out: {between: [OUT, 0], draws: 9 A}"),
    ],
    ids=["no frequency", "no output voltage"],
)
def test_a_diode_alone_fixes_the_sign(less: str) -> None:
    found = demands_of(CHOPPER, less)
    assert found.positions["M1"].on_current == Interval(0.0, math.inf)
    assert found.positions["D1"].on_current == Interval(0.0, math.inf)


def test_a_line_rectifier_has_no_switching_ripple() -> None:
    """Nothing there follows a gate: the mean stays, and what it leaves out is said."""
    cards = "D1 a X DX\nD2 b X DX\nD3 c X DX\nD4 0 a DX\nD5 0 b DX\nD6 0 c DX\nL1 X OUT 1m"
    less = stage_sheet(
        "  mains: {phases: [a, b, c], line-voltage: 400 V rms, frequency: 50 Hz}",
        "  out: {between: [OUT, 0], voltage: 540 V, draws: 20 A}",
        switching="",
    )
    found = demands_of(cards, less)
    demand = found.positions["D1"].on_current
    assert isinstance(demand, Interval)
    assert demand.high == pytest.approx(20.0)
    assert any("ripple not included" in line for line in found.not_covered)


def test_a_magnetising_current_of_unknown_ripple_is_open() -> None:
    """A clamp capacitor of unknown voltage resets the core: the current may well reverse."""
    cards = (
        "L1 IN A 300u\nM1 A g1 0 0 FET\nM2 CL g2 A A FET\nC1 CL IN 1u\nL2 SG S 12u\nK1 L1 L2 1\n"
        "D1 S OUT DX\nC2 OUT SG 470u"
    )
    ports = dc("in", "IN", voltage=(90, 120)), dc("out", "OUT", "SG", voltage=12, draws=(1, 5))
    demand = demands_of(cards, sheet(*ports)).positions["M1"]
    assert isinstance(demand.on_current, Unknown)
    assert "C1" in demand.on_current.settle


WITHOUT_A_DIODE = "Q1 BUS bQ1 SW NPX\nD1 SW BUS DX\nS2 SW 0 cS2 0 SWX\nL1 BAT SW 100u\nC1 BUS 0 1m"
UNKNOWN_CURRENT = stage_sheet("  battery: {between: [BAT, 0], voltage: [42 V, 58 V]}", BUS)


def interruptions(found: Demands) -> dict[str, Interval | Unknown]:
    return {item.direction: item.within for item in found.interrupted}


def test_a_current_of_unknown_sign_may_be_interrupted() -> None:
    found = interruptions(demands_of(WITHOUT_A_DIODE, UNKNOWN_CURRENT))
    assert list(found) == ["SW -> BAT"]
    within = found["SW -> BAT"]
    assert isinstance(within, Unknown)
    assert "L1" in within.settle


def test_both_directions_of_an_unknown_current_are_tried() -> None:
    cards = WITHOUT_A_DIODE.replace("D1 SW BUS DX\n", "")
    assert set(interruptions(demands_of(cards, UNKNOWN_CURRENT))) == {"SW -> BAT", "BAT -> SW"}


def test_nothing_of_an_unknown_current_is_interrupted_where_both_ways_are_free() -> None:
    assert not demands_of(leg(), UNKNOWN_CURRENT).interrupted


@pytest.mark.parametrize(
    ("rule", "subject"), [("anti-parallel-path", "S2"), ("interrupted-current", "L1 SW -> BAT")]
)
def test_an_unknown_interruption_is_undecided(rule: str, subject: str) -> None:
    assert verdict(Study(WITHOUT_A_DIODE, UNKNOWN_CURRENT), rule, subject) == "undecided"


def test_a_port_of_unknown_voltage_does_not_hide_an_interruption() -> None:
    less = stage_sheet(battery("[-45 A, 61 A]", voltage=""), BUS)
    assert list(interruptions(demands_of(WITHOUT_A_DIODE, less))) == ["SW -> BAT"]
    assert verdict(Study(WITHOUT_A_DIODE, less), "anti-parallel-path", "S2") == "broken"


def test_a_diode_still_recovers_into_an_unknown_voltage() -> None:
    cards = "M1 IN g SW SW FET\nD9 OUT SW DX\nL1 SW 0 100u\nC1 OUT 0 470u"
    found = demands_of(cards, stage_sheet(INPUT, "  out: {between: [0, OUT], draws: 10 A}"))
    (item,) = found.hard_commutations
    assert (item.position, item.by) == ("D9", "M1")
    assert isinstance(item.voltage, Unknown)
    assert isinstance(item.current, Unknown)


def test_recovery_at_an_unknown_current_keeps_its_known_voltage() -> None:
    found = demands_of(WITHOUT_A_DIODE, UNKNOWN_CURRENT)
    (item,) = found.hard_commutations
    assert (item.position, item.voltage) == ("Q1", 91.0)
    assert isinstance(item.current, Unknown)
    assert "L1" in item.current.settle
