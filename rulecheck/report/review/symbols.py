"""The standard symbols of the drawings, in the style of IEC 60617, from schemdraw.

Each stands with one pin at (0, 0) and the other 60 units below it, or to the right of it where it
lies; the current of the device's first edge enters at (0, 0). The library draws the shapes alone:
labels are the page's own text, because the library reads them as markup, and colours come from
the page, because the library writes them into every shape.
"""

import re
from collections.abc import Callable, Mapping
from xml.etree import ElementTree

import schemdraw
import schemdraw.elements as elm

from rulecheck.report.review.drawing import Shape, Symbol

LENGTH = 60.0
"""From pin to pin, in drawing units."""
_UNIT = 36.0
"""Drawing units that the library makes of one of its own."""
_SIDE = 0.85
"""Where an anti-parallel diode stands beside its transistor, in the library's units."""
_NUMBER = re.compile(r"-?\d+(?:\.\d+)?(?:e-?\d+)?")

# taken as classes of known type: the library leaves their makers untyped
_DIODE: type[elm.Element2Term] = elm.Diode
_BOX: type[elm.Element2Term] = elm.ResistorIEC

Sketch = Callable[[schemdraw.Drawing], tuple[float, float] | None]
"""Draws a symbol and answers where its gate is, in the library's units."""


def draw_symbol(name: str) -> Symbol:
    """The symbol of that name; of a kind that has no symbol of its own, a plain box."""
    schemdraw.use("svg")
    drawing = schemdraw.Drawing(show=False)
    gate = SYMBOLS.get(name, _box)(drawing)
    shapes = tuple(_shapes(drawing.get_imagedata("svg")))
    place = (round(gate[0] * _UNIT, 2), round(-gate[1] * _UNIT, 2)) if gate else None
    return Symbol(name, shapes, place)


def _shapes(image: bytes) -> list[Shape]:
    root = ElementTree.fromstring(image)
    found = []
    for node in root.iter():
        tag = node.tag.rpartition("}")[2]
        if tag == "path":
            found.append(Shape(_rounded(node.get("d", "")), _fill(node)))
        elif tag == "polygon":
            found.append(Shape(_rounded(f"M {node.get('points', '')} Z"), _fill(node)))
        elif tag == "circle":
            found.append(Shape(_ring(node), _fill(node)))
    return found


def _fill(node: ElementTree.Element) -> str:
    match = re.search(r"fill:(\w+)", node.get("style", ""))
    return {"black": "solid", "white": "hollow"}.get(match[1] if match else "", "none")


def _ring(node: ElementTree.Element) -> str:
    x, y, r = (float(node.get(key, "0")) for key in ("cx", "cy", "r"))
    return _rounded(f"M {x - r} {y} a {r} {r} 0 1 0 {2 * r} 0 a {r} {r} 0 1 0 {-2 * r} 0 Z")


def _rounded(path: str) -> str:
    return _NUMBER.sub(lambda match: f"{round(float(match[0]), 2) + 0.0:g}", path)


def _upright(element: type[elm.Element2Term]) -> Sketch:
    def sketch(drawing: schemdraw.Drawing) -> tuple[float, float] | None:
        placed = drawing.add(element().at((0, 0)).down().length(LENGTH / _UNIT))
        gate = placed.absanchors.get("gate")
        return (gate[0], gate[1]) if gate is not None else None

    return sketch


def _lying(element: type[elm.Element2Term]) -> Sketch:
    def sketch(drawing: schemdraw.Drawing) -> None:
        drawing.add(element().at((0, 0)).right().length(LENGTH / _UNIT))

    return sketch


def _transistor(
    element: Callable[[], elm.Element], top: str, gate: str, free: bool = False
) -> Sketch:
    """A transistor from its pin `top` downwards, with leads to full length."""

    def sketch(drawing: schemdraw.Drawing) -> tuple[float, float]:
        lead = LENGTH / _UNIT / 2 - abs(element().anchors[top][1])
        placed = drawing.add(element().anchor(top).at((0, -lead)))
        drawing.add(elm.Line().at((0, 0)).to((0, -lead)))
        drawing.add(elm.Line().at((0, lead - LENGTH / _UNIT)).to((0, -LENGTH / _UNIT)))
        if free:
            _diode_beside(drawing)
        at = placed.absanchors[gate]
        return at[0], at[1]

    return sketch


def _field_effect(element: Callable[[], elm.Element], top: str, free: bool) -> Sketch:
    def sketch(drawing: schemdraw.Drawing) -> tuple[float, float]:
        placed = drawing.add(element().anchor(top).at((0, 0)))
        if free:
            _diode_beside(drawing)
        gate = placed.absanchors["gate"]
        return gate[0], gate[1]

    return sketch


def _diode_beside(drawing: schemdraw.Drawing) -> None:
    """A diode that carries from the lower pin to the upper one, inside the two leads."""
    length, inset = LENGTH / _UNIT, 0.22
    top, bottom = (_SIDE, -inset), (_SIDE, inset - length)
    drawing.add(_DIODE().at(bottom).to(top))
    drawing.add(elm.Line().at((0, -inset)).to(top))
    drawing.add(elm.Line().at((0, inset - length)).to(bottom))


def _box(drawing: schemdraw.Drawing) -> None:
    drawing.add(_BOX().at((0, 0)).down().length(LENGTH / _UNIT))


SYMBOLS: Mapping[str, Sketch] = {
    "diode": _upright(elm.Diode),
    "zener": _upright(elm.Zener),
    "thyristor": _upright(elm.SCR),
    "triac": _upright(elm.Triac),
    "ideal-switch": _upright(elm.Switch),
    "capacitor": _upright(elm.Capacitor),
    "inductor": _lying(elm.Inductor),
    "mosfet": _field_effect(elm.NMos, "drain", True),
    "mosfet-without-diode": _field_effect(elm.NMos, "drain", False),
    "p-mosfet": _field_effect(elm.PMos, "source", True),
    "p-mosfet-without-diode": _field_effect(elm.PMos, "source", False),
    "gan-hemt": _field_effect(elm.NMos, "drain", False),
    "bjt": _transistor(elm.BjtNpn, "collector", "base"),
    "bjt-pnp": _transistor(elm.BjtPnp, "emitter", "base"),
    "igbt": _transistor(elm.IgbtN, "collector", "base"),
    "igbt-with-diode": _transistor(elm.IgbtN, "collector", "base", True),
    "reverse-blocking-igbt": _transistor(elm.IgbtN, "collector", "base"),
}
"""By kind and variant of part; `inductor` alone lies."""
