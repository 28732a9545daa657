"""Stages of any size: a chain of half-bridge cells with gate drives, and a selector of taps."""

from pathlib import Path

CARDS_OF_A_CELL = """\
Q1{u} P{n} GA{n} {top} SW-1700
Q2{u} {top} GB{n} {bottom} SW-1700
C1{u} P{n} {bottom} 4m CF-1200
R1{u} P{n} {bottom} 47k
R2{u} OA{n} GA{n} 4.7
R3{u} GA{n} {top} 10k
R4{u} OB{n} GB{n} 4.7
R5{u} GB{n} {bottom} 10k
XU1{u} VA{n} {top} PA{n} 0 OA{n} {top} DR-1
XU2{u} VB{n} {bottom} PB{n} 0 OB{n} {bottom} DR-1
C2{u} VA{n} {top} 1u CK-50
C3{u} VB{n} {bottom} 1u CK-50
R6{u} P{n} SA{n} 10
C4{u} SA{n} {top} 10n CK-1200
R7{u} {top} SB{n} 10
C5{u} SB{n} {bottom} 10n CK-1200"""
ELEMENTS_OF_A_CELL = len(CARDS_OF_A_CELL.splitlines())

PARTS = """\
parts:
  SW-1700:
    kind: igbt-with-diode
    pins: [collector, gate, emitter]
    ratings: {blocking: 1700 V, current: 200 A, peak-current: 400 A, gate: [-20 V, 20 V]}
  DR-1:
    kind: driver
    pins: [supply, ground, input, supply-in, output, return]
    driver: {dead-time: 500 ns, output-current: 4 A, sink-resistance: 1.2 ohm}
  "* CF-1200": {kind: capacitor, ratings: {voltage: 1200 V, dielectric: film}}
  "* CK-50": {kind: capacitor, ratings: {voltage: 50 V, dielectric: ceramic}}
  "* CK-1200": {kind: capacitor, ratings: {voltage: 1200 V, dielectric: film}}
"""
SHEET = """\
ports:
  arm: {between: [IN, '0'], supplies: [-100 A, 100 A]}
switching: {frequency: 200 Hz, dead-time: 2 us, edge: 100 ns}
parts: [chain.parts.yaml]
set:
"""


def write_flat_chain(folder: Path, cells: int) -> Path:
    cards = [
        CARDS_OF_A_CELL.format(n=n, u=f"_{n}", top=f"N{n}", bottom=_below(n, cells))
        for n in range(cells)
    ]
    return _write(folder, ["* chain", "L1 IN N0 10m", *cards], [f"C1_{n}" for n in range(cells)])


def write_hierarchical_chain(folder: Path, cells: int) -> Path:
    body = CARDS_OF_A_CELL.format(n="", u="", top="TOP", bottom="BOTTOM")
    calls = [f"XC{n} N{n} {_below(n, cells)} PA{n} PB{n} CELL" for n in range(cells)]
    cell = [".subckt CELL TOP BOTTOM PA PB", body, ".ends CELL"]
    lines = ["* chain", *cell, "L1 IN N0 10m", *calls]
    return _write(folder, lines, [f"XC{n}.C1" for n in range(cells)])


def write_selector(folder: Path, taps: int) -> Path:
    """One group of so many positions, each from a tap of its own to one inductor."""
    lines = ["* selector", ".model SW SW", "L1 MID OUT 1m", "C1 OUT 0 1m"]
    lines += [f"S{n} T{n} MID G{n} MID SW" for n in range(taps)]
    ports = [
        f"  tap{n}: {{between: [T{n}, '0'], voltage: [{10 * n + 1} V, {10 * n + 2} V]}}"
        for n in range(taps)
    ]
    load = "  load: {between: [OUT, '0'], draws: [1 A, 9 A], voltage: 50 V}"
    folder.mkdir(parents=True)
    (folder / "selector.stage.yaml").write_text("\n".join(["ports:", *ports, load, ""]))
    netlist = folder / "selector.cir"
    netlist.write_text("\n".join([*lines, ""]))
    return netlist


def _below(cell: int, cells: int) -> str:
    return f"N{cell + 1}" if cell + 1 < cells else "0"


def _write(folder: Path, lines: list[str], capacitors: list[str]) -> Path:
    folder.mkdir(parents=True)
    stated = "".join(f"  {name}: {{voltage: [900 V, 1100 V]}}\n" for name in capacitors)
    (folder / "chain.stage.yaml").write_text(SHEET + stated)
    (folder / "chain.parts.yaml").write_text(PARTS)
    netlist = folder / "chain.cir"
    netlist.write_text("\n".join([*lines, ".end", ""]))
    return netlist
