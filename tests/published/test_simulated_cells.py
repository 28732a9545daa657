"""Direct converters simulated in the time domain: the demand encloses every sample, tightly.

Parameters are drawn from a seeded generator; each converter stays in continuous conduction and
its capacitors are large, as the assumption of stiff quantities asks. The sheet is given what an
engineer would know: the input voltage and the mean output voltage and current.
"""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
import pytest

from tests.kit.published import Study, dc, sheet
from tests.kit.simulation import Interval, Waveforms, mean, steady_state

ENCLOSED, TIGHT = 0.005, 0.05


@dataclass(frozen=True)
class Drawn:
    """One set of parameters: volt, ohm, henry, farad, hertz."""

    v_in: float
    duty: float
    load: float
    coil: float
    frequency: float
    capacitor: float = 20e-3

    @property
    def intervals(self) -> tuple[float, float]:
        return self.duty / self.frequency, (1 - self.duty) / self.frequency


Cycle = tuple[Interval, Interval]


def draw(generator: np.random.Generator, current: Callable[[float, float], float]) -> Drawn:
    """`current` is the least coil current over v_in / load at a duty ratio; ripple 10 to 80 %."""
    v_in, duty = generator.uniform(20, 400), generator.uniform(0.2, 0.75)
    load, frequency = generator.uniform(2, 40), generator.uniform(20e3, 300e3)
    ripple = generator.uniform(0.1, 0.8) * current(duty, v_in / load)
    return Drawn(v_in, duty, load, v_in * duty / (frequency * ripple), frequency)


def buck(p: Drawn) -> tuple[str, Cycle]:
    down = [1 / p.capacitor, -1 / (p.load * p.capacitor), 0]
    on_time, off_time = p.intervals
    on = Interval(on_time, [[0, -1 / p.coil, p.v_in / p.coil], down],
                  {"D1": [0, 0, -p.v_in]}, {"M1": [1, 0, 0]})  # fmt: skip
    off = Interval(off_time, [[0, -1 / p.coil, 0], down],
                   {"M1": [0, 0, p.v_in]}, {"D1": [1, 0, 0]})  # fmt: skip
    return f"M1 IN g SW SW FET\nD1 0 SW DX\nL1 SW OUT {p.coil:.9g}", (on, off)


def boost(p: Drawn) -> tuple[str, Cycle]:
    leak = [0, -1 / (p.load * p.capacitor), 0]
    feed = [1 / p.capacitor, *leak[1:]]
    on_time, off_time = p.intervals
    on = Interval(on_time, [[0, 0, p.v_in / p.coil], leak],
                  {"D1": [0, -1, 0]}, {"M1": [1, 0, 0]})  # fmt: skip
    off = Interval(off_time, [[0, -1 / p.coil, p.v_in / p.coil], feed],
                   {"M1": [0, 1, 0]}, {"D1": [1, 0, 0]})  # fmt: skip
    return f"L1 IN SW {p.coil:.9g}\nM1 SW g 0 0 FET\nD1 SW OUT DX", (on, off)


def inverting(p: Drawn) -> tuple[str, Cycle]:
    """The output's state is its magnitude: net 0 over net OUT."""
    leak = [0, -1 / (p.load * p.capacitor), 0]
    feed = [1 / p.capacitor, *leak[1:]]
    on_time, off_time = p.intervals
    on = Interval(on_time, [[0, 0, p.v_in / p.coil], leak],
                  {"D1": [0, -1, -p.v_in]}, {"M1": [1, 0, 0]})  # fmt: skip
    off = Interval(off_time, [[0, -1 / p.coil, 0], feed],
                   {"M1": [0, 1, p.v_in]}, {"D1": [1, 0, 0]})  # fmt: skip
    return f"M1 IN g SW SW FET\nL1 SW 0 {p.coil:.9g}\nD1 OUT SW DX", (on, off)


def sepic(p: Drawn) -> tuple[str, Cycle]:
    """States: coil 1, coil 2 (from 0 to B), coupling capacitor A over B, output."""
    c, coil, leak = p.capacitor, p.coil, -1 / (p.load * p.capacitor)
    on_time, off_time = p.intervals
    on = Interval(
        on_time,
        [[0, 0, 0, 0, p.v_in / coil], [0, 0, 1 / coil, 0, 0], [0, -1 / c, 0, 0, 0],
         [0, 0, 0, leak, 0]],
        {"D1": [0, 0, -1, -1, 0]}, {"M1": [1, 1, 0, 0, 0]},
    )  # fmt: skip
    off = Interval(
        off_time,
        [[0, 0, -1 / coil, -1 / coil, p.v_in / coil], [0, 0, 0, -1 / coil, 0],
         [1 / c, 0, 0, 0, 0], [1 / c, 1 / c, 0, leak, 0]],
        {"M1": [0, 0, 1, 1, 0]}, {"D1": [1, 1, 0, 0, 0]},
    )  # fmt: skip
    value = f"{coil:.9g}"
    cards = f"L1 IN A {value}\nM1 A g 0 0 FET\nC1 A B {c}\nL2 0 B {value}\nD1 B OUT DX"
    return cards, (on, off)


def cuk(p: Drawn) -> tuple[str, Cycle]:
    """States: coil 1, coil 2 (from OUT to B), coupling capacitor A over B, 0 over OUT."""
    c, coil, leak = p.capacitor, p.coil, -1 / (p.load * p.capacitor)
    on_time, off_time = p.intervals
    out = [0, 1 / c, 0, leak, 0]
    on = Interval(
        on_time,
        [[0, 0, 0, 0, p.v_in / coil], [0, 0, 1 / coil, -1 / coil, 0], [0, -1 / c, 0, 0, 0], out],
        {"D1": [0, 0, -1, 0, 0]}, {"M1": [1, 1, 0, 0, 0]},
    )  # fmt: skip
    off = Interval(
        off_time,
        [[0, 0, -1 / coil, 0, p.v_in / coil], [0, 0, 0, -1 / coil, 0], [1 / c, 0, 0, 0, 0], out],
        {"M1": [0, 0, 1, 0, 0]}, {"D1": [1, 1, 0, 0, 0]},
    )  # fmt: skip
    value = f"{coil:.9g}"
    cards = f"L1 IN A {value}\nM1 A g 0 0 FET\nC1 A B {c}\nD1 B 0 DX\nL2 OUT B {value}"
    return cards, (on, off)


def flyback(p: Drawn, ratio: float = 4.0) -> tuple[str, Cycle]:
    """States: magnetising current on the primary, output voltage; `ratio` turns to one."""
    leak = [0, -1 / (p.load * p.capacitor), 0]
    feed = [ratio / p.capacitor, *leak[1:]]
    on_time, off_time = p.intervals
    on = Interval(on_time, [[0, 0, p.v_in / p.coil], leak],
                  {"D1": [0, -1, -p.v_in / ratio]}, {"M1": [1, 0, 0]})  # fmt: skip
    off = Interval(off_time, [[0, -ratio / p.coil, 0], feed],
                   {"M1": [0, ratio, p.v_in]}, {"D1": [ratio, 0, 0]})  # fmt: skip
    windings = f"L1 IN A {p.coil:.9g}\nL2 0 S {p.coil / ratio**2:.9g}\nK1 L1 L2 1"
    return f"{windings}\nM1 A g 0 0 FET\nD1 S OUT DX", (on, off)


def up_down(duty: float, unit: float) -> float:
    """The least coil current of a cell with v_out = D / (1 - D) v_in."""
    return unit * duty / (1 - duty) * min(1.0, duty / (1 - duty))


CONVERTERS: dict[str, tuple[Callable[[Drawn], tuple[str, Cycle]],
                            Callable[[float, float], float]]] = {
    "buck": (buck, lambda duty, unit: unit * duty),
    "boost": (boost, lambda duty, unit: unit / (1 - duty) ** 2),
    "inverting": (inverting, lambda duty, unit: unit * duty / (1 - duty) ** 2),
    "SEPIC": (sepic, up_down),
    "Cuk": (cuk, up_down),
    "flyback": (flyback, lambda duty, unit: unit * duty / (1 - duty) ** 2 / 16),
}  # fmt: skip


def study_of(p: Drawn, cards: str, cycle: Cycle, waves: Waveforms) -> Study:
    v_out = mean(waves, cycle, len(cycle[0].rates) - 1)
    nets = ("0", "OUT") if "OUT SW DX" in cards or "L2 OUT" in cards else ("OUT", "0")
    output = dc("out", *nets, voltage=v_out, draws=v_out / p.load)
    smoothing = f"\nC9 OUT 0 {p.capacitor:.9g}"
    ports = dc("in", "IN", voltage=p.v_in), output
    return Study(cards + smoothing, sheet(*ports, frequency=p.frequency))


@pytest.mark.parametrize("draw_number", range(3))
@pytest.mark.parametrize("name", CONVERTERS)
def test_every_sample_is_demanded_and_no_more(name: str, draw_number: int) -> None:
    converter, current = CONVERTERS[name]
    generator = np.random.default_rng([7, list(CONVERTERS).index(name), draw_number])
    p = draw(generator, current)
    cards, cycle = converter(p)
    waves = steady_state(cycle)
    assert min(wave.min() for wave in waves.on.values()) > 0, "not in continuous conduction"
    study = study_of(p, cards, cycle, waves)
    for switch in ("M1", "D1"):
        demand = study.position(switch)["demand"]
        for has, wave in ((demand["off_voltage"], waves.off[switch]),
                          (demand["on_current"], waves.on[switch])):  # fmt: skip
            assert has is not None, (switch, study.table["undetermined"])
            size = np.abs(wave).max()
            assert has[0] <= wave.min() + ENCLOSED * size, (switch, has, wave.min(), p)
            assert has[1] >= wave.max() - ENCLOSED * size, (switch, has, wave.max(), p)
            assert has == pytest.approx([wave.min(), wave.max()], abs=TIGHT * size), (switch, p)
