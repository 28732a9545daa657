"""Idle inductors behind diodes, and rectifiers of one core that conduct together."""

import pytest

from rulecheck.demand import Demands, Witness
from tests.kit.published import Study, dc, sheet

BOOST = "L1 IN SW 100u\nM1 SW g 0 0 FET\nD1 SW OUT DX\nC9 OUT 0 100u"
BUCK = "M1 IN g SW SW FET\nD1 0 SW DX\nL1 SW OUT 100u\nC9 OUT 0 100u"
SYNCHRONOUS = "M1 IN g SW SW FET\nM2 SW h 0 0 FET\nL1 SW OUT 100u\nC9 OUT 0 100u"
SEPIC = "L1 IN A 100u\nM1 A g 0 0 FET\nC1 A B 100u\nL2 0 B 100u\nD1 B OUT DX\nC9 OUT 0 100u"
FLYBACK = "L1 IN A 1m\nL2 0 S 1m\nK1 L1 L2 0.99\nM1 A g 0 0 FET\nD1 S OUT DX\nC9 OUT 0 100u"
INPUT = dc("in", "IN", voltage=48)


def of(cards: str, v_out: float, draws: float | tuple[float, float]) -> Study:
    return Study(cards, sheet(INPUT, dc("out", "OUT", voltage=v_out, draws=draws)))


def demands_of(study: Study) -> Demands:
    return study.analysis.demands


def on_of(witness: Witness | None) -> tuple[str, ...]:
    assert witness is not None
    return witness.on


@pytest.mark.parametrize(
    ("cards", "v_out", "draws", "transistor", "diode"),
    [
        (BOOST, 80, 0.1, (48, 80), (-80, -32)),
        (BUCK, 12, 0.1, (36, 48), (-48, -12)),
        (BUCK, 12, (0, 5), (36, 48), (-48, -12)),
        (SEPIC, 32, 0.3, (48, 80), (-80, -32)),
        (FLYBACK, 32, 0.01, (48, 80), (-80, -32)),
    ],
)
def test_an_idle_coil_has_no_voltage(
    cards: str, v_out: float, draws: float, transistor: tuple[float, float],
    diode: tuple[float, float],
) -> None:  # fmt: skip
    """While the coil rests the switch node is where the coil's far end is."""
    study = of(cards, v_out, draws)
    study.expect("M1", off=transistor)
    study.expect("D1", off=diode)
    positions = demands_of(study).positions
    assert on_of(positions["M1"].off_low) == ()
    assert on_of(positions["D1"].off_high) == ()


@pytest.mark.parametrize(
    ("cards", "v_out", "draws", "others"),
    [
        (BOOST, 80, 10, "D1"),
        (BUCK, 12, 5, "D1"),
        (SEPIC, 32, 6.4, "D1"),
        (FLYBACK, 32, 1, "D1"),
        (SYNCHRONOUS, 12, (0, 5), "M2"),
    ],
)
def test_a_coil_that_no_diode_stops_is_never_idle(
    cards: str, v_out: float, draws: float, others: str
) -> None:
    positions = demands_of(of(cards, v_out, draws)).positions
    for name in ("M1", others):
        assert on_of(positions[name].off_low) != ()
        assert on_of(positions[name].off_high) != ()


def test_a_coil_is_idle_only_where_no_diode_is_forward_biased() -> None:
    """A boost cell at 42 V from 36 ... 58 V: at rest the input is at most the output."""
    port = dc("in", "IN", voltage=(36, 58))
    study = Study(BOOST, sheet(port, dc("out", "OUT", voltage=42, draws=0.1)))
    study.expect("M1", off=(36, 42))
    study.expect("D1", off=(-42, 0))


OUTPUTS = """
L1 IN A 1.5m
L2 0 S 60u
L3 0 S2 {auxiliary}
K1 L1 L2 L3 0.99
M1 A g 0 0 FET
D2 S OUT DX
D3 S2 OUT2 DX
C8 OUT2 0 100u
C9 OUT 0 100u
"""
V_IN, RATIO, V_OUT, LF = 100.0, 5.0, 12.0, 150.0
DUTY = RATIO * V_OUT / (V_IN + RATIO * V_OUT)
HALF_RIPPLE = V_IN * DUTY / LF / 2


def two_outputs(
    main: float | tuple[float, float], own: float | tuple[float, float] | None,
    auxiliary: str = "60u", v_own: float = V_OUT,
) -> Study:  # fmt: skip
    ports = (
        dc("in", "IN", voltage=V_IN),
        dc("out", "OUT", voltage=V_OUT, draws=main),
        dc("own", "OUT2", "0", voltage=v_own, **({} if own is None else {"draws": own})),
    )
    return Study(OUTPUTS.format(auxiliary=auxiliary), sheet(*ports))


def test_rectifiers_of_one_core_share_its_current_by_their_means() -> None:
    """While it conducts a diode carries its draw over 1 - D, and its share of the ripple."""
    study = two_outputs(3, 0.05)
    for name, draw in (("D2", 3), ("D3", 0.05)):
        peak = draw / (1 - DUTY) + draw / 3.05 * RATIO * HALF_RIPPLE
        study.expect(name, on=(None, peak), quadrants="II")
    study.expect("D3", on=(0, None))
    told = demands_of(study)
    assert "D2 and D3 share the current of K1 in proportion to their mean currents" in told.assumed
    assert any("D3: how leakage inductances move" in line for line in told.not_covered)


def test_the_split_does_not_lose_current() -> None:
    """At its peak the core's current is carried by the two together."""
    study = two_outputs(3, 1)
    total = sum(study.position(name)["demand"]["on_current"][1] for name in ("D2", "D3"))
    assert total == pytest.approx(RATIO * study.variable("i(magnetising K1)")[1], rel=1e-6)


def test_a_witness_of_the_split_gives_its_number() -> None:
    positions = demands_of(two_outputs(3, 0.05)).positions
    for name in ("D2", "D3"):
        for witness in (positions[name].on_low, positions[name].on_high):
            assert set(on_of(witness)) == {"D2", "D3"}
    high = positions["D3"].on_high
    assert high is not None
    assert high.form.names in ((), ("i(magnetising K1)",))


def test_the_share_grows_where_the_main_output_may_be_idle() -> None:
    """Alone on the core in discontinuous conduction: m = L f peak^2 / (2 v2) on the primary."""
    peak = RATIO * (2 * RATIO * V_OUT * 0.05 / RATIO / LF) ** 0.5
    two_outputs((0, 3), 0.05).expect("D3", on=(0, peak))


def test_turns_that_miss_the_stated_voltages_a_little_still_share() -> None:
    """A 12 V winding wound for 12.5 V: both outputs draw, so both diodes conduct."""
    study = two_outputs(3, 0.05, auxiliary="65u")
    study.expect("D2", on=(None, 3 / (1 - DUTY) + RATIO * HALF_RIPPLE), within=0.05)
    low, high = study.position("D3")["demand"]["on_current"]
    assert low == 0
    assert 0.05 / (1 - DUTY) < high < 0.2


@pytest.mark.parametrize("v_own", [5.0, 24.0])
def test_outputs_that_the_turns_do_not_tie_are_left_alone(v_own: float) -> None:
    told = demands_of(two_outputs(3, 0.05, v_own=v_own))
    assert not any("share the current" in line for line in told.assumed)


@pytest.mark.parametrize("own", [0.0, None])
def test_without_a_known_draw_the_rectifier_may_carry_all(own: float | None) -> None:
    """Power balance gives no draw where two ports leave theirs open."""
    study = two_outputs(3, own)
    told = demands_of(study)
    assert not any("share the current" in line for line in told.assumed)
    high = study.position("D3")["demand"]["on_current"][1]
    assert high is None or high == pytest.approx(RATIO * study.variable("i(magnetising K1)")[1])
