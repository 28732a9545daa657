"""Anything at all ends with status 0, 1 or 2: bounded by time, or for hours.

    FUZZ_SECONDS=14400 FUZZ_SEED=7 python -m pytest tests/fuzz

FUZZ_SECONDS is the time of the whole suite, 120 where it is not set; FUZZ_SEED begins elsewhere.
"""

import os
import time
from collections.abc import Callable

import pytest
from hypothesis import HealthCheck, given, seed, settings
from hypothesis import strategies as st

from tests.command.running import run
from tests.fuzz import strategies
from tests.fuzz.mutation import damaged
from tests.fuzz.targets import BETWEEN, TARGETS, seeds

SECONDS = float(os.environ.get("FUZZ_SECONDS", "120"))
FIRST = int(os.environ.get("FUZZ_SEED", "0"))
EXAMPLES = 20
STAGES = st.tuples(strategies.NETLISTS, strategies.SHEETS, strategies.PARTS).map(BETWEEN.join)
NEARLY_RIGHT = {
    "netlist": strategies.NETLISTS,
    "condition": strategies.CONDITIONS,
    "yaml": st.one_of(
        strategies.SHEETS.map("S{}".format),
        strategies.PARTS.map("P{}".format),
        strategies.PROJECTS.map("Q{}".format),
        strategies.RULES.map("R{}".format),
    ),
    "whole": STAGES,
}
TESTS = len(NEARLY_RIGHT) + 1
FORMATS = ["table", "lines", "json", "sarif", "junit", "markdown"]


def hammer(check: Callable[[bytes], None], inputs: st.SearchStrategy[bytes]) -> int:
    """Draw inputs, a few at a time, until this test's share of the time is over."""
    end = time.monotonic() + SECONDS / TESTS
    rounds = 0
    while time.monotonic() < end:
        quiet = settings(
            max_examples=EXAMPLES,
            deadline=None,
            database=None,
            suppress_health_check=list(HealthCheck),
        )
        seed(FIRST + rounds)(quiet(given(inputs)(lambda data: check(data))))()
        rounds += 1
    return rounds * EXAMPLES


@pytest.mark.parametrize("target", sorted(TARGETS))
def test_no_input_breaks_a_target(target: str) -> None:
    inputs = damaged(seeds(target)) | NEARLY_RIGHT[target].map(str.encode)
    assert hammer(TARGETS[target], inputs) > 0


def test_no_project_breaks_the_command(tmp_path_factory: pytest.TempPathFactory) -> None:
    texts = [strategies.NETLISTS, strategies.SHEETS, strategies.PARTS, strategies.RULES]
    sound = st.tuples(*texts, strategies.PROJECTS).map(BETWEEN.join).map(str.encode)

    def check(data: bytes) -> None:
        folder = tmp_path_factory.mktemp("hut")
        names = ["hut.cir", "hut.stage.yaml", "hut.parts.yaml", "hut.rules.yaml", "rulecheck.yaml"]
        for name, text in zip(names, data.split(BETWEEN.encode()), strict=False):
            (folder / name).write_bytes(text)
        before = sorted(path.name for path in folder.iterdir())
        done = run("lint", "--format", FORMATS[len(data) % len(FORMATS)], folder=folder)
        assert done.returncode in (0, 1, 2)
        assert "internal error" not in done.stderr, done.stderr
        assert "Traceback" not in done.stderr
        assert sorted(path.name for path in folder.iterdir()) == before

    pieces = st.lists(sound, min_size=1, max_size=1).flatmap(lambda files: damaged(files))
    assert hammer(check, sound | pieces) > 0
