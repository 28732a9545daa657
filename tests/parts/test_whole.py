"""From a netlist's text to its parts: what a realistic export is read as."""

from rulecheck.parts import Kind, parts_text
from tests.kit.parts import parts_of

PARTS = """\
parts:
  "SW-N100-*":
    kind: mosfet
    pins: [drain, gate, source]
    ratings: {blocking: 100 V, current: 120 A}
    gate: {charge: 90 nC}
  "DR-HB-2": {kind: driver, pins: [VCC, HIN, LIN, COM, LO, VS, HO, VB]}
  "CTRL-*": {kind: controller, pins: [supply, ground, pwm1, pwm2, sense1]}
"""
LEG = """\
battery leg of the hut
J1 BAT PGND pack
F1 BAT BATF 125A
V1 BATF BUS 0
Q1 BUS G1 SW SW-N100-7
Q2 SW G2 PGND SW-N100-7
U1 VDD PWMH PWML PGND LO SW HO VB DR-HB-2
U2 VDD PGND PWMH PWML SNS CTRL-7
R1 HO G1 4R7 power=0.25
R2 G1 SW 10k
D1 VDD VB BOOT
C1 VB SW 100n voltage=25
C2 BUS PGND 20u voltage=200 ripple_current=20 dielectric=film
L1 SW OUT 22u current=90 rms_current=70
TP1 SW
.model BOOT D(bv=200)
"""
EXPECTED = """\
J1 connector 1=BAT 2=PGND
F1 fuse plus=BAT minus=BATF
  ratings.current 125 A (card)
V1 voltage-source 0 plus=BATF minus=BUS
Q1 mosfet drain=BUS gate=G1 source=SW
  drain->source gated blocks 100 carries 120
  source->drain free blocks 0 carries 120
  gate.charge 9e-08 C (part data SW-N100-*)
  ratings.blocking 100 V (part data SW-N100-*)
  ratings.current 120 A (part data SW-N100-*)
Q2 mosfet drain=SW gate=G2 source=PGND
  drain->source gated blocks 100 carries 120
  source->drain free blocks 0 carries 120
  gate.charge 9e-08 C (part data SW-N100-*)
  ratings.blocking 100 V (part data SW-N100-*)
  ratings.current 120 A (part data SW-N100-*)
U1 driver supply=VDD input-high=PWMH input-low=PWML ground=PGND output-low=LO return-high=SW \
output-high=HO bootstrap=VB
U2 controller supply=VDD ground=PGND pwm1=PWMH pwm2=PWML sense1=SNS
R1 resistor 4.7 plus=HO minus=G1
  ratings.power 0.25 W (card)
R2 resistor 10000 plus=G1 minus=SW
D1 diode anode=VDD cathode=VB
  anode->cathode free blocks 0 carries ?
  cathode->anode never blocks 200 carries 0
  ratings.blocking 200 V (model BOOT)
C1 capacitor 1e-07 plus=VB minus=SW
  ratings.voltage 25 V (card)
C2 capacitor 2e-05 plus=BUS minus=PGND
  ratings.ripple-current 20 A (card)
  ratings.voltage 200 V (card)
  ratings.dielectric film
L1 inductor 2.2e-05 plus=SW minus=OUT
  ratings.current 90 A (card)
  ratings.rms-current 70 A (card)
TP1 other 1=SW
assumed: F1 read as a fuse of 125 A
assumed: TP1 read as carrying no power current
"""


def test_a_battery_leg() -> None:
    assert parts_text(parts_of(LEG, PARTS)) == EXPECTED


def test_a_transformer_in_a_subcircuit() -> None:
    found = parts_of(
        "t\nX1 A B C D TX\n.subckt TX p1 p2 s1 s2\nLP p1 p2 40u\nLS s1 s2 2560u\n"
        "K1 LP LS 0.998\n.ends\nR1 A B 1\nR2 C D 1\n"
    )
    (core,) = found.cores
    assert (core.windings, [round(t, 6) for t in core.turns]) == (("X1.LP", "X1.LS"), [1.0, 8.0])


def test_flat_and_hierarchical_forms_agree_but_for_names() -> None:
    body = "M1 BUS GH SW SW FET\nM2 SW GL 0 0 FET\nC1 BUS 0 1u voltage=100\n"
    tail = ".model FET VDMOS(Vds=100)\nV1 BUS 0 48\nR1 GH GL 1\nR2 SW GL 1\n"
    flat = parts_of(f"t\n{body}{tail}")
    cell = f".subckt CELL BUS GH SW GL\n{body}.ends\n"
    deep = parts_of(f"t\nX1 BUS GH SW GL CELL\n{cell}{tail}")
    assert {p.name.removeprefix("X1."): (p.kind, p.pins) for p in deep.parts} == {
        p.name: (p.kind, p.pins) for p in flat.parts
    }


def test_a_model_of_one_device_inside_a_deck() -> None:
    found = parts_of(
        "t\nX1 BUS G SW SW-650\n.subckt SW-650 D G S\nGCH D S VALUE={V(G,S)*9}\nDB S D DBODY\n"
        ".model DBODY D(bv=650)\n.ends\nR1 BUS SW 1\nR2 G SW 1\n"
    )
    assert found.by_name["X1"].kind is Kind.MOSFET
    assert found.assumed == ("X1 read as a mosfet from the ports of SW-650: D G S",)
