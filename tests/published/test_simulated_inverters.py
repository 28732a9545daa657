"""Inverters simulated over a period of their output, pulse by pulse, against the demand.

Parameters are drawn from a seeded generator. Every leg is modulated by comparing a sine with a
triangle (two triangles, one above the other, in the clamped leg); the coil's current follows
exactly, as an exponential between two edges of the triangle's fine grid. The sheet is given the
fundamental of the simulated output, and the ripple is small beside it.
"""

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
import pytest
from numpy.typing import NDArray

from tests.kit.published import Study, ac, dc, phases, sheet

Array = NDArray[np.float64]
GRID, PULSES = 60, 120
ENCLOSED, TIGHT = 0.005, 0.05


@dataclass(frozen=True)
class Drawn:
    bus: float
    index: float
    load: float
    coil: float
    frequency: float = 50.0

    @property
    def carrier(self) -> float:
        return self.frequency * PULSES


def draw(
    converter: int, number: int, reactance_by_load: tuple[float, float] = (0.35, 0.6)
) -> Drawn:
    generator = np.random.default_rng([11, converter, number])
    bus, load = generator.uniform(100, 900), generator.uniform(5, 40)
    reactance = generator.uniform(*reactance_by_load) * load
    return Drawn(bus, generator.uniform(0.6, 0.95), load, reactance / (2 * np.pi * 50))


def angles(p: Drawn, shift: float = 0.0) -> Array:
    steps = np.arange(PULSES * GRID)
    return 2 * np.pi * (steps + 0.5) / (PULSES * GRID) - shift


def triangle() -> Array:
    """From 0 to 1 and back, once a pulse."""
    ramp = (np.arange(PULSES * GRID) + 0.5) % GRID / GRID
    return np.asarray(1 - np.abs(2 * ramp - 1))


def current(p: Drawn, voltage: Array) -> Array:
    """Through coil and load from a staircase voltage that repeats, at each grid point."""
    decay = np.exp(-p.load / p.coil / (p.carrier * GRID))
    first = _follow(p, voltage, decay, 0.0)[-1] / (1 - decay ** len(voltage))
    return _follow(p, voltage, decay, first)[:-1]


def _follow(p: Drawn, voltage: Array, decay: float, start: float) -> Array:
    result = np.full(len(voltage) + 1, start)
    for index, volts in enumerate(voltage):
        result[index + 1] = volts / p.load + (result[index] - volts / p.load) * decay
    return result


def amplitude(values: Array) -> float:
    """Of the fundamental."""
    return float(2 * np.abs(np.fft.rfft(values)[1]) / len(values))


def check(study: Study, off: Mapping[str, Array], on: Mapping[str, Array]) -> None:
    """Every sample enclosed; each sign's extreme within 5 % of the demanded one."""
    for name in off:
        demand = study.position(name)["demand"]
        for has, wave in ((demand["off_voltage"], off[name]), (demand["on_current"], on[name])):
            assert has is not None, (name, study.table["undetermined"])
            size = np.abs(wave).max()
            assert has[0] <= wave.min() + ENCLOSED * size, (name, has, wave.min())
            assert has[1] >= wave.max() - ENCLOSED * size, (name, has, wave.max())
            extremes = [min(wave.min(), 0.0), max(wave.max(), 0.0)]
            demanded = [min(has[0], 0.0), max(has[1], 0.0)]
            assert demanded == pytest.approx(extremes, abs=TIGHT * size), name


@pytest.mark.parametrize("number", range(3))
def test_half_bridge(number: int) -> None:
    p = draw(1, number)
    high = p.index * np.sin(angles(p)) > 2 * triangle() - 1
    flowing = current(p, np.where(high, p.bus / 2, -p.bus / 2))
    on = {"M1": flowing[high], "M2": -flowing[~high]}
    off = {name: np.array([p.bus]) for name in ("M1", "M2")}
    peak = amplitude(flowing)
    load = ac("load", "OUT", "M", voltage=f"{peak * p.load:.6g} V peak", draws=f"{peak:.6g} A peak")
    halves = dc("u", "P", "M", voltage=p.bus / 2), dc("l", "M", "N", voltage=p.bus / 2)
    cards = f"M1 P g1 A A FET\nM2 A g2 N N FET\nL1 A OUT {p.coil:.9g}"
    check(Study(cards, sheet(*halves, load, frequency=p.carrier)), off, on)


@pytest.mark.parametrize("number", range(3))
def test_three_phase_bridge(number: int) -> None:
    p = draw(2, number)
    highs = [p.index * np.sin(angles(p, k * 2 * np.pi / 3)) > 2 * triangle() - 1 for k in range(3)]
    legs = np.array([np.where(high, p.bus, 0.0) for high in highs])
    flows = [current(p, volts) for volts in legs - legs.mean(axis=0)]
    on: dict[str, Array] = {}
    for k, (high, flow) in enumerate(zip(highs, flows, strict=True)):
        on[f"M{2 * k + 1}"] = flow[high]
        on[f"M{2 * k + 2}"] = -flow[~high]
    off = {name: np.array([p.bus]) for name in on}
    cards = "".join(
        f"M{2 * k + 1} P h{k} A{k} A{k} FET\nM{2 * k + 2} A{k} l{k} 0 0 FET\n"
        f"L{k} A{k} {net} {p.coil:.9g}\n"
        for k, net in enumerate("UVW")
    )
    peak = max(amplitude(flow) for flow in flows)
    values = {"voltage": f"{peak * p.load:.6g} V peak", "draws": f"{peak:.6g} A peak"}
    pump = phases("pump", "U", "V", "W", **values)
    study = Study(cards, sheet(dc("bus", "P", voltage=p.bus), pump, frequency=p.carrier))
    check(study, off, on)


@pytest.mark.parametrize("number", range(3))
def test_clamped_leg(number: int) -> None:
    """Which of two paths carries the middle level depends on the sign of the current.

    The sheet does not state a power factor; a reactive load shows every combination of signs.
    """
    p = draw(3, number, (5.0, 8.0))
    sine = p.index * np.sin(angles(p))
    level = (sine > triangle()).astype(int) - (-sine > triangle()).astype(int)
    flow = current(p, level * p.bus / 2)
    up, middle, down = level > 0, level == 0, level < 0
    forward, backward = middle & (flow > 0), middle & (flow < 0)
    on = {
        "M1": flow[up],
        "M2": np.concatenate([flow[up], flow[forward]]),
        "M3": np.concatenate([-flow[down], -flow[backward]]),
        "M4": -flow[down],
        "D1": flow[forward],
        "D2": -flow[backward],
    }
    half = np.array([p.bus / 2])
    off = {name: half for name in ("M1", "M2", "M3", "M4")} | {"D1": -half, "D2": -half}
    peak = amplitude(flow)
    load = ac("load", "OUT", "M", voltage=f"{peak * p.load:.6g} V peak", draws=f"{peak:.6g} A peak")
    cards = f"""
    C1 P M 1m
    C2 M N 1m
    M1 P g1 X X FET
    M2 X g2 A A FET
    M3 A g3 Y Y FET
    M4 Y g4 N N FET
    D1 M X DX
    D2 Y M DX
    L1 A OUT {p.coil:.9g}
    """
    bus = dc("bus", "P", "N", voltage=p.bus)
    check(Study(cards, sheet(bus, load, frequency=p.carrier)), off, on)
