"""Isolated converters: blocking voltages, rectifier voltages and currents.

Source of the relations: Mohan, Undeland and Robbins, Power Electronics, chapter on switching
supplies (from memory). n is the ratio of primary to secondary turns; the forward drop of the
rectifier is added to the output voltage, as the relations do. Windings that share a core are
given large, so that the magnetising current does not blur the load's.
"""

from tests.kit.published import Study, dc, sheet

CENTRE_TAP = """
L3 S1 SG {inductance}
L4 SG S2 {inductance}
D1 S1 X DX
D2 S2 X DX
L5 X OUT 10m
"""


def milli(value: float) -> str:
    return f"{value:.9g}m"


def test_flyback() -> None:
    """375 V, 19.5 V with the drop, ratio 6: 492 V, D 0.2378; rectifier V_o + V_in / n."""
    v_in, v_out, ratio, load = 375.0, 19.5, 6.0, 3.0
    duty = ratio * v_out / (v_in + ratio * v_out)
    magnetising = 3e-3
    cards = f"L1 IN A 3m\nM1 A g 0 0 FET\nL2 SG S {milli(3 / ratio**2)}\nK1 L1 L2 1\nD1 S OUT DX"
    ports = dc("in", "IN", voltage=v_in), dc("out", "OUT", "SG", voltage=v_out, draws=load)
    study = Study(cards, sheet(*ports))
    middle, half = load / ratio / (1 - duty), v_in * duty / (magnetising * 100e3) / 2
    low, high = middle - half, middle + half
    study.expect("M1", off=(None, 492), on=(low, high), quadrants="I")
    rectifier = -(v_out + v_in / ratio)
    study.expect("D1", off=(rectifier, None), on=(low * ratio, high * ratio), quadrants="II")


def test_second_published_flyback() -> None:
    """400 V, 12.7 V with the drop, ratio 20: 654 V and about 32 V."""
    cards = "L1 IN A 40m\nM1 A g 0 0 FET\nL2 SG S 100u\nK1 L1 L2 1\nD1 S OUT DX"
    ports = dc("in", "IN", voltage=400), dc("out", "OUT", "SG", voltage=12.7, draws=5)
    study = Study(cards, sheet(*ports))
    study.expect("M1", off=(None, 654), quadrants="I")
    study.expect("D1", off=(-32.7, None), quadrants="II")


def test_forward_with_reset_winding() -> None:
    """48 V, reset winding of 1/1.5 of the primary: 120 V, reset diode 80 V, rectifier 36 V."""
    v_in, reset, ratio, duty = 48.0, 1.5, 2.0, 0.4
    v_out = duty * v_in / ratio
    cards = f"""
    L1 IN A 100m
    M1 A g 0 0 FET
    L2 0 R {milli(100 / reset**2)}
    D3 R IN DX
    L3 S SG {milli(100 / ratio**2)}
    K1 L1 L2 L3 1
    D1 S X DX
    D2 SG X DX
    L4 X OUT 1m
    """
    ports = dc("in", "IN", voltage=v_in), dc("out", "OUT", "SG", voltage=v_out, draws=10)
    study = Study(cards, sheet(*ports))
    high = 10 + v_out * (1 - duty) / (1e-3 * 100e3) / 2
    study.expect("M1", off=(None, v_in * (1 + reset)), on=(None, high / ratio), quadrants="I")
    study.expect("D1", off=(-v_in * reset / ratio, None), on=(None, high), quadrants="II")
    study.expect("D2", off=(-v_in / ratio, None), on=(None, high), quadrants="II")
    study.expect("D3", off=(-v_in * (1 + 1 / reset), None), quadrants="II")


def test_two_switch_forward() -> None:
    """400 V: both transistors and both clamp diodes 400 V, both rectifiers V_in / n."""
    v_in, ratio, duty = 400.0, 10.0, 0.4
    cards = f"""
    M1 IN g1 P P FET
    L1 P Q 100m
    M2 Q g2 0 0 FET
    D3 0 P DX
    D4 Q IN DX
    L2 S SG {milli(100 / ratio**2)}
    K1 L1 L2 1
    D1 S X DX
    D2 SG X DX
    L3 X OUT 1m
    """
    output = dc("out", "OUT", "SG", voltage=duty * v_in / ratio, draws=10)
    study = Study(cards, sheet(dc("in", "IN", voltage=v_in), output))
    high = 10 + duty * v_in / ratio * (1 - duty) / (1e-3 * 100e3) / 2
    for name in ("M1", "M2"):
        study.expect(name, off=(None, v_in), on=(None, high / ratio), quadrants="I", within=0.03)
    for name in ("D3", "D4"):
        study.expect(name, off=(-v_in, None), quadrants="II")
    for name in ("D1", "D2"):
        study.expect(name, off=(-v_in / ratio, None), on=(None, high), quadrants="II")


def test_push_pull() -> None:
    """48 V, ratio 4, D 0.4 each: 9.6 V out, transistors 96 V, diodes 24 V."""
    v_in, ratio, load = 48.0, 4.0, 20.0
    cards = """
    L1 IN A 100m
    L2 B IN 100m
    M1 A g1 0 0 FET
    M2 B g2 0 0 FET
    K1 L1 L2 L3 L4 1
    """ + CENTRE_TAP.format(inductance=milli(100 / ratio**2))
    output = dc("out", "OUT", "SG", voltage=2 * 0.4 * v_in / ratio, draws=load)
    study = Study(cards, sheet(dc("in", "IN", voltage=v_in), output))
    for name in ("M1", "M2"):
        study.expect(name, off=(None, 2 * v_in), on=(None, load / ratio), within=0.02)
        assert "I" in study.position(name)["demand"]["quadrants"]
    for name in ("D1", "D2"):
        study.expect(name, off=(-2 * v_in / ratio, None), on=(None, load), quadrants="II",
                     within=0.02)  # fmt: skip


def isolated_bridge(primary: str, v_out: float, ratio: float, load: float) -> Study:
    secondary = CENTRE_TAP.format(inductance=milli(100 / ratio**2))
    output = dc("out", "OUT", "SG", voltage=v_out, draws=load)
    cards = primary + "\nK1 L1 L3 L4 1" + secondary
    return Study(cards, sheet(dc("in", "IN", voltage=400), output))


def test_isolated_half_bridge() -> None:
    """400 V, ratio 10, D 0.4: 16 V out, transistors 400 V, diodes V_in / n, half the bus on C."""
    primary = """
    C1 IN M 10u
    C2 M 0 10u
    M1 IN g1 A A FET
    M2 A g2 0 0 FET
    L1 A M 100m
    """
    study = isolated_bridge(primary, 0.4 * 400 / 10, 10, 20)
    for name in ("M1", "M2"):
        study.expect(name, off=(None, 400), on=(None, 2), within=0.02)
        assert "I" in study.position(name)["demand"]["quadrants"]
    for name in ("D1", "D2"):
        study.expect(name, off=(-40, None), on=(None, 20), quadrants="II", within=0.02)
    assert abs(study.mean("v(C1)") - 200) < 1


def test_isolated_full_bridge() -> None:
    """400 V, ratio 10, D 0.4: 32 V out, transistors 400 V, diodes of a centre tap 2 V_in / n."""
    primary = """
    M1 IN g1 A A FET
    M2 A g2 0 0 FET
    M3 IN g3 B B FET
    M4 B g4 0 0 FET
    L1 A B 100m
    """
    study = isolated_bridge(primary, 2 * 0.4 * 400 / 10, 10, 20)
    for name in ("M1", "M2", "M3", "M4"):
        study.expect(name, off=(None, 400), on=(None, 2), within=0.02)
        assert "I" in study.position(name)["demand"]["quadrants"]
    for name in ("D1", "D2"):
        study.expect(name, off=(-80, None), on=(None, 20), quadrants="II", within=0.02)


def test_full_bridge_with_a_bridge_rectifier() -> None:
    """The same with four diodes on one winding: V_in / n each."""
    cards = """
    M1 IN g1 A A FET
    M2 A g2 0 0 FET
    M3 IN g3 B B FET
    M4 B g4 0 0 FET
    L1 A B 100m
    L2 S1 S2 1m
    K1 L1 L2 1
    D1 S1 X DX
    D2 S2 X DX
    D3 SG S1 DX
    D4 SG S2 DX
    L3 X OUT 10m
    """
    output = dc("out", "OUT", "SG", voltage=32, draws=20)
    study = Study(cards, sheet(dc("in", "IN", voltage=400), output))
    for name in ("D1", "D2", "D3", "D4"):
        study.expect(name, off=(-40, None), on=(None, 20), quadrants="II", within=0.02)


def test_dual_active_bridge() -> None:
    """Every position blocks its own bus and carries both directions, each side of the coil."""
    bridge = """
    M{0} {bus} g{0} {a} {a} FET
    M{1} {a} g{1} {low} {low} FET
    M{2} {bus} g{2} {b} {b} FET
    M{3} {b} g{3} {low} {low} FET
    """
    first = bridge.format(1, 2, 3, 4, bus="HV", low="0", a="A", b="B")
    second = bridge.format(5, 6, 7, 8, bus="LV", low="SG", a="S", b="T")
    cards = first + second + "L1 A P 20u\nL2 P B 4m\nL3 S T 1m\nK1 L2 L3 1"
    ports = (
        dc("high", "HV", voltage=400),
        dc("low", "LV", "SG", voltage=200, supplies=(-20, 20)),
    )
    study = Study(cards, sheet(*ports))
    for number in range(1, 9):
        study.expect(f"M{number}", off=(None, 400 if number < 5 else 200), quadrants="I+IV")
