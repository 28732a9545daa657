"""Every sound stage with one device turned, reversed, missing or too weak is found out.

The faulty twins are chosen by hand; these are all of their kind in a few stages.
"""

import shutil
from collections.abc import Callable
from pathlib import Path

import pytest

from tests.kit.corpus import ANY, CIRCUITS, Case

STAGES = (
    "aux-buck-12", "battery-leg-380", "bus-tie-four-switch", "mains-totem-pole",
    "pv-boost", "radio-inverting-48", "zeta-dispatch",
)  # fmt: skip
Words = list[str]
MUTATIONS: dict[str, dict[str, Callable[[Words], Words]]] = {
    "diode": {
        "reversed": lambda words: [words[0], words[2], words[1], *words[3:]],
        "missing": lambda words: ["*", *words],
        "weak": lambda words: [*words, "blocking=3"],
    },
    "transistor": {
        "turned": lambda words: [words[0], *words[3:0:-1], *words[4:]],
        "weak": lambda words: [*words, "blocking=3"],
    },
}


def mutations() -> list[tuple[str, str, str, str]]:
    """(stage, part, kind, mutation) of each position's namesake that carries power current."""
    found = []
    for stage in STAGES:
        positions = Case(CIRCUITS / "sound" / f"{stage}.cir").expected["positions"]
        for name, wanted in positions.items():
            kind = "diode" if name.startswith("D") else "transistor"
            if wanted["on_current"] != ANY:
                found += [(stage, name, kind, mutation) for mutation in MUTATIONS[kind]]
    return found


@pytest.mark.parametrize(("stage", "part", "kind", "mutation"), mutations())
def test_a_mutation_is_found(
    stage: str, part: str, kind: str, mutation: str, tmp_path: Path
) -> None:
    mutant = _copy(stage, tmp_path)
    change = MUTATIONS[kind][mutation]
    lines = mutant.netlist.read_text(encoding="latin-1").splitlines()
    (index,) = [i for i, line in enumerate(lines) if line.split()[:1] == [part]]
    lines[index] = " ".join(change(lines[index].partition(";")[0].split()))
    mutant.netlist.write_text("\n".join(lines), encoding="latin-1")
    assert mutant.broken(), f"{part} {mutation}: nothing found"


def _copy(stage: str, folder: Path) -> Case:
    for source in (CIRCUITS / "sound").glob("*.yaml"):
        if source.name.startswith(stage) or source.name in (
            "board.parts.yaml",
            "passives.parts.yaml",
        ):
            shutil.copy(source, folder)
    shutil.copy(CIRCUITS / "sound" / f"{stage}.cir", folder)
    return Case(folder / f"{stage}.cir")
