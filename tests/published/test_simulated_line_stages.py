"""Matrix, current-source and three-level stages stepped through their states, against the demand.

Line voltages and load currents are sines at a random angle to each other; at each step a state is
drawn from all that the two interconnection rules allow (no short of lines, no open current), and
what every switch sees is read off. Parameters come from a seeded generator.
"""

from collections import defaultdict

import numpy as np
import pytest

from tests.kit.published import Study, dc, phases, sheet

STEPS = 2000
ENCLOSED, TIGHT = 0.005, 0.05


class Seen:
    """The smallest and largest off voltage and on current of every switch."""

    def __init__(self) -> None:
        self.off: dict[str, list[float]] = defaultdict(lambda: [np.inf, -np.inf])
        self.on: dict[str, list[float]] = defaultdict(lambda: [np.inf, -np.inf])

    def note(self, kind: str, name: str, value: float) -> None:
        span = getattr(self, kind)[name]
        span[:] = [min(span[0], value), max(span[1], value)]

    def hold_against(self, study: Study) -> None:
        for kind, key in (("off", "off_voltage"), ("on", "on_current")):
            for name, span in getattr(self, kind).items():
                position = study.position(name)
                has = position["demand"][key]
                size = max(abs(end) for end in span)
                assert has[0] <= span[0] + ENCLOSED * size, (name, key, has, span)
                assert has[1] >= span[1] - ENCLOSED * size, (name, key, has, span)
                assert has == pytest.approx(span, abs=TIGHT * size), (name, key)


def three(amplitude: float, angle: float) -> list[float]:
    return [amplitude * np.cos(angle - 2 * np.pi * k / 3) for k in range(3)]


@pytest.mark.parametrize("number", range(3))
def test_matrix_converter(number: int) -> None:
    generator = np.random.default_rng([21, number])
    volts, amperes = generator.uniform(100, 600), generator.uniform(5, 60)
    seen = Seen()
    for _ in range(STEPS):
        lines = three(volts, generator.uniform(0, 2 * np.pi))
        loads = three(amperes, generator.uniform(0, 2 * np.pi))
        chosen = generator.integers(0, 3, size=3)
        for motor, line in enumerate(chosen):
            for other in range(3):
                name = f"Z{2 * (3 * other + motor) + 1}"
                if other == line:
                    seen.note("on", name, loads[motor])
                else:
                    seen.note("off", name, lines[other] - lines[line])
    cards = [
        f"Z{2 * (3 * i + j) + 1} {line} g e{i}{j} IGD\nZ{2 * (3 * i + j) + 2} {motor} g e{i}{j} IGD"
        for i, line in enumerate("abc")
        for j, motor in enumerate("UVW")
    ]
    mains = phases("mains", "a", "b", "c", voltage=f"{volts:.6g} V peak")
    pump = phases("pump", "U", "V", "W", draws=f"{amperes:.6g} A peak")
    seen.hold_against(Study("\n".join(cards), sheet(mains, pump, frequency=10e3)))


@pytest.mark.parametrize("number", range(3))
def test_current_source_bridge(number: int) -> None:
    """One upper and one lower switch on; a leg with both is the freewheeling state."""
    generator = np.random.default_rng([22, number])
    volts, amperes = generator.uniform(100, 600), generator.uniform(5, 60)
    seen = Seen()
    for _ in range(STEPS):
        lines = three(volts, generator.uniform(0, 2 * np.pi))
        upper, lower = generator.integers(0, 3, size=2)
        for k in range(3):
            up, down = f"M{k + 1}", f"M{k + 4}"
            if k == upper:
                seen.note("on", up, amperes)
            else:
                seen.note("off", up, lines[upper] - lines[k])
            if k == lower:
                seen.note("on", down, amperes)
            else:
                seen.note("off", down, lines[k] - lines[lower])
    upper_cards = [f"M{k} P g{k} x{k} x{k} FET\nD{k} x{k} {n} DX" for k, n in enumerate("abc", 1)]
    lower_cards = [f"M{k} {n} g{k} x{k} x{k} FET\nD{k} x{k} 0 DX" for k, n in enumerate("abc", 4)]
    grid = phases("grid", "a", "b", "c", voltage=f"{volts:.6g} V peak")
    source = dc("dc", "IN", voltage=(0, 1.5 * volts), supplies=amperes)
    cards = "\n".join([*upper_cards, *lower_cards, "L1 IN P 1"])
    seen.hold_against(Study(cards, sheet(source, grid)))


@pytest.mark.parametrize("number", range(3))
def test_three_legs_of_the_t_type(number: int) -> None:
    generator = np.random.default_rng([23, number])
    bus, amperes = generator.uniform(200, 900), generator.uniform(5, 60)
    seen = Seen()
    for _ in range(STEPS):
        loads = three(amperes, generator.uniform(0, 2 * np.pi))
        for k, level in enumerate(generator.integers(0, 3, size=3)):
            v, i = level * bus / 2, loads[k]
            names = [f"M{4 * k + 2}", f"M{4 * k + 3}", f"M{4 * k + 1}"]
            across = [v, v - bus / 2, bus - v]
            along = [-i, -i, i]
            for other in range(3):
                if other == level:
                    seen.note("on", names[other], along[other])
                else:
                    seen.note("off", names[other], across[other])
    cards = ["C1 P M 1m", "C2 M 0 1m"]
    for k, net in enumerate("UVW"):
        first = 4 * k + 1
        cards += [f"M{first} P g{first} {net} {net} FET",
                  f"M{first + 1} {net} g{first + 1} 0 0 FET",
                  f"M{first + 2} {net} g{first + 2} x{k} x{k} FET",
                  f"M{first + 3} M g{first + 2} x{k} x{k} FET"]  # fmt: skip
    pump = phases("pump", "U", "V", "W", draws=f"{amperes:.6g} A peak")
    seen.hold_against(Study("\n".join(cards), sheet(dc("bus", "P", voltage=bus), pump)))
