"""The schematic of a leg, or of positions that stand alone, as lines, symbols and labels."""

from collections.abc import Mapping, Sequence

from rulecheck.report.review.drawing import (
    Label,
    Line,
    Mark,
    PlacedMark,
    PlacedSymbol,
    Schematic,
    Symbol,
)
from rulecheck.report.review.layout import Layout, Place, TwoTerminal, lay_out
from rulecheck.report.review.symbols import LENGTH
from rulecheck.values.record import Record

_ROW = 84.0
_LEFT, _TOP, _RIGHT = 78.0, 26.0, 12.0
_LETTER = 6.3
"""Width of a letter of a label."""
_GATE_REACH, _DIODE_ROOM, _PLAIN_ROOM = 36.0, 42.0, 16.0
_WITH_DIODES = ("mosfet", "p-mosfet", "igbt-with-diode")
_LONGEST = 16
_STUB = 34.0
_STACK = 30.0
_MARK_STEP = 30.0


class Device(Record):
    """A part between two nets: its symbol, its words, its gate's net and what was found on it."""

    part: TwoTerminal
    symbol: str
    text: str
    gate: str
    standing: str
    marks: tuple[Mark, ...] = ()


class Outlet(Record):
    """What carries current away from a midpoint: an inductor, a winding, a port."""

    at: str
    """The midpoint."""
    name: str
    to: str
    coil: bool
    marks: tuple[Mark, ...] = ()


class Subject(Record):
    """What one schematic shows."""

    name: str
    title: str
    devices: tuple[Device, ...]
    heights: Mapping[str, float]
    """The nets that are drawn as rails, by height."""
    named: frozenset[str]
    """The nets between positions."""
    outlets: tuple[Outlet, ...]
    marks: tuple[Mark, ...]
    """Findings on the leg as a whole."""
    notes: tuple[str, ...]


def draw_schematic(subject: Subject, symbols: Mapping[str, Symbol]) -> Schematic:
    """Lay the devices out and draw wires, symbols, labels and marks around them."""
    layout = lay_out([device.part for device in subject.devices], subject.heights, subject.named)
    gate_room = _gate_room(subject.devices)
    pitch = gate_room + _room_beside(subject.devices)
    sheet = _Sheet(layout, gate_room, pitch, _reach(subject.outlets))
    placed = [_placed(device, layout.places[device.part.name], symbols, sheet)
              for device in subject.devices]  # fmt: skip
    nets = _nets(subject, layout, sheet)
    outlets = [
        _outlets([outlet for outlet in subject.outlets if outlet.at == net], sheet.y(row), sheet)
        for net, row in layout.rows.items()
    ]
    drawn = [*placed, nets, *outlets]
    return Schematic(
        subject.name,
        subject.title,
        _description(subject),
        sheet.width,
        sheet.height,
        tuple(line for part in drawn for line in part.lines),
        tuple(dict.fromkeys(dot for part in drawn for dot in part.dots)),
        tuple(symbol for part in drawn for symbol in part.symbols),
        tuple(label for part in drawn for label in part.labels),
        tuple(mark for part in drawn for mark in part.marks),
        subject.marks,
        subject.notes,
    )


class _Drawn(Record):
    lines: tuple[Line, ...] = ()
    dots: tuple[tuple[float, float], ...] = ()
    symbols: tuple[PlacedSymbol, ...] = ()
    labels: tuple[Label, ...] = ()
    marks: tuple[PlacedMark, ...] = ()


class _Sheet(Record):
    """Columns and rows in drawing units."""

    layout: Layout
    gate_room: float
    pitch: float
    reach: float
    """Room to the right of the last column."""

    def x(self, column: int) -> float:
        return _LEFT + self.gate_room + column * self.pitch

    def y(self, row: int) -> float:
        return _TOP + row * _ROW

    @property
    def edge(self) -> float:
        return self.x(max(self.layout.columns - 1, 0)) + self.pitch - self.gate_room

    @property
    def width(self) -> float:
        return self.edge + self.reach + _RIGHT

    @property
    def height(self) -> float:
        return self.y(max(self.layout.rows.values(), default=0)) + _TOP


def _gate_room(devices: Sequence[Device]) -> float:
    """Room to the left of a symbol, for the net of its gate."""
    return _GATE_REACH + max((_width(device.gate) for device in devices), default=0.0)


def _width(text: str) -> float:
    return min(len(text), _LONGEST) * _LETTER


def _room_beside(devices: Sequence[Device]) -> float:
    """Room to the right of a symbol, for name and model."""
    rooms = [
        _side_room(device) + max(_width(device.part.name), _width(device.text))
        for device in devices
    ]
    return max(rooms, default=_DIODE_ROOM) + 8.0


def _side_room(device: Device) -> float:
    return _DIODE_ROOM if device.symbol in _WITH_DIODES else _PLAIN_ROOM


def _reach(outlets: Sequence[Outlet]) -> float:
    if not outlets:
        return 0.0
    return max(_STUB + (LENGTH if outlet.coil else 0.0) + _width(outlet.to) for outlet in outlets)


def _placed(device: Device, place: Place, symbols: Mapping[str, Symbol], sheet: _Sheet) -> _Drawn:
    x, top, bottom = sheet.x(place.column), sheet.y(place.top), sheet.y(place.bottom)
    # between two rows, so that no other net's line runs through the symbol
    gap = (place.bottom - place.top - 1) // 2
    start = top + gap * _ROW + (_ROW - LENGTH) / 2
    transform = (
        f"translate({x:g} {start + LENGTH:g}) scale(1 -1)" if place.turned
        else f"translate({x:g} {start:g})"
    )  # fmt: skip
    leads = f"M{x:g} {top:g}V{start:g}M{x:g} {start + LENGTH:g}V{bottom:g}"
    gate = _gate(device, symbols[device.symbol], x, start, place.turned)
    side = x + _side_room(device)
    middle = start + LENGTH / 2
    marks = tuple(
        PlacedMark(side + k * _MARK_STEP, middle - 24.0, mark)
        for k, mark in enumerate(device.marks[:3])
    )
    return _Drawn(
        (Line(leads, "wire"), *gate.lines),
        (),
        (PlacedSymbol(device.symbol, transform, device.standing),),
        (
            _label(side, middle - 2.0, device.part.name, "start", "name"),
            _label(side, middle + 12.0, device.text, "start", "model"),
            *gate.labels,
        ),
        marks,
    )


def _gate(device: Device, symbol: Symbol, x: float, start: float, turned: bool) -> _Drawn:
    """The drive as a mark: a pulse at the gate, and the net that it is on."""
    if not device.gate or symbol.gate is None:
        return _Drawn()
    right = symbol.gate[0] > 0
    gate_x = x + symbol.gate[0]
    y = start + (LENGTH - symbol.gate[1] if turned else symbol.gate[1])
    if right:
        return _Drawn(labels=(_label(gate_x + 3, y + 12, device.gate, "start", "gate"),))
    pulse = f"M{gate_x:g} {y:g}h-5M{gate_x - 19:g} {y + 4:g}h3v-8h6v8h3"
    return _Drawn((Line(pulse, "pulse"),), labels=(
        _label(gate_x - 5, y - 8, device.gate, "end", "gate"),
    ))  # fmt: skip


def _nets(subject: Subject, layout: Layout, sheet: _Sheet) -> _Drawn:
    lines: list[Line] = []
    dots: list[tuple[float, float]] = []
    labels: list[Label] = []
    for net, row in layout.rows.items():
        taps = _taps(net, subject, layout, sheet)
        rail, y = net in subject.heights, sheet.y(row)
        if net in layout.inside or not taps:
            continue
        out = any(outlet.at == net for outlet in subject.outlets)
        left = _LEFT - 8.0 if rail else taps[0]
        right = sheet.edge if rail or out else taps[-1]
        lines.append(Line(f"M{left:g} {y:g}H{right:g}", "rail" if rail else "wire"))
        inner = taps if rail or len(taps) > 2 or out else taps[:0]
        dots += [(x, y) for x in dict.fromkeys(inner)]
        if rail:
            labels.append(_label(left - 6.0, y + 4.0, net, "end", "net"))
        else:
            labels.append(_label(taps[0] - 8.0, y + 4.0, net, "end", "net"))
    return _Drawn(tuple(lines), tuple(dots), (), tuple(labels))


def _taps(net: str, subject: Subject, layout: Layout, sheet: _Sheet) -> list[float]:
    return sorted(
        sheet.x(layout.places[device.part.name].column)
        for device in subject.devices
        for end in (device.part.start, device.part.end)
        if end == net
    )


def _outlets(outlets: Sequence[Outlet], y: float, sheet: _Sheet) -> _Drawn:
    """Stubs to the right of a midpoint, one below the other."""
    x, last = sheet.edge, y + (len(outlets) - 1) * _STACK
    lines = [Line(f"M{x:g} {y:g}V{last:g}", "wire")] if last > y else []
    symbols, labels, marks = [], [], []
    for k, outlet in enumerate(outlets):
        at = y + k * _STACK
        end = x + _STUB + (LENGTH if outlet.coil else 0.0)
        lines.append(Line(f"M{x:g} {at:g}h{_STUB:g}", "wire"))
        if outlet.coil:
            symbols.append(PlacedSymbol("inductor", f"translate({x + _STUB:g} {at:g})", ""))
            labels.append(_label(x + _STUB + LENGTH / 2, at - 11.0, outlet.name, "middle", "name"))
        labels.append(_label(end + 5.0, at + 4.0, outlet.to, "start", "net"))
        marks += [
            PlacedMark(x + 2.0 + j * _MARK_STEP, at - 10.0, mark)
            for j, mark in enumerate(outlet.marks[:1])
        ]
    return _Drawn(tuple(lines), (), tuple(symbols), tuple(labels), tuple(marks))


def _label(x: float, y: float, text: str, anchor: str, kind: str) -> Label:
    short = text if len(text) <= _LONGEST else f"{text[: _LONGEST - 1]}…"
    return Label(round(x, 2), round(y, 2), short, text, anchor, kind)


def _description(subject: Subject) -> str:
    """What the drawing shows, in words."""
    devices = "; ".join(
        f"{device.part.name} {device.text} from {device.part.start} to {device.part.end}".replace(
            "  ", " "
        )
        for device in subject.devices
    )
    outlets = "; ".join(f"{outlet.name} from {outlet.at} {outlet.to}" for outlet in subject.outlets)
    away = f"; {outlets}" if outlets else ""
    return f"{subject.title}: {devices}{away}"
