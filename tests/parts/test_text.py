"""The product prints itself as one canonical text."""

from rulecheck.parts import parts_text
from tests.kit.parts import card, identified, model

EXPECTED = """\
M1 mosfet drain=BUS gate=G source=SW
  drain->source gated blocks 100 carries ?
  source->drain free blocks 0 carries ?
  ratings.blocking 100 V (model FET)
C1 capacitor 1e-05 plus=BUS minus=0
  ratings.voltage 200 V (card)
  ratings.dielectric film
F1 fuse plus=BAT minus=BUS
  ratings.current 125 A (card)
U1 unknown 1=G
not understood: U1
assumed: F1 read as a fuse of 125 A
"""


def test_the_text_of_a_part_list() -> None:
    elements = [
        card("M1", "BUS G SW", "FET", kind=model("FET", "VDMOS", vds=100.0)),
        card("C1", "BUS 0", "10u", 1e-5, voltage=200.0, dielectric="film"),
        card("F1", "BAT BUS", "125A"),
        card("U1", "G", "HUT-CTRL-1"),
    ]
    assert parts_text(identified(elements)) == EXPECTED
