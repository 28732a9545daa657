"""Whole netlists through the public interface, for checks against published figures.

>>> cards = "M1 IN g SW SW FET\\nD1 0 SW DX\\nL1 SW OUT 1m"
>>> study = Study(cards, sheet(dc("in", "IN", voltage=48)))
>>> study.expect("M1", off=(48, 48), quadrants="I")

A card list needs no title, no models and no `.end`; `sheet` joins ports written with `dc`, `ac`
and `phases`.
"""

import contextlib
import io
import json
import math
import tempfile
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from pathlib import Path
from typing import Any

from rulecheck.cli import main
from rulecheck.pipeline import Analysis, Unusable, analyse_text
from rulecheck.reading import SourceText
from rulecheck.values import Interval

MODELS = """
.model FET VDMOS(Rd=1m)
.model DX D(Is=1p)
.model SWX SW(Ron=1m)
.model NPX NPN(Bf=50)
"""
PARTS = """
parts:
  "IGX": {kind: igbt}
  "IGD": {kind: igbt-with-diode}
  "RBX": {kind: reverse-blocking-igbt}
  "SCX": {kind: thyristor}
"""
Bounds = tuple[float | None, float | None]
Number = float | tuple[float, float] | str


def dc(name: str, plus: str, minus: str = "0", **items: Number) -> str:
    """One port of a sheet; a number is written as it is, a pair as a range."""
    return _port(name, f"between: [{plus}, {minus}]", items)


def ac(name: str, plus: str, minus: str, **items: Number) -> str:
    return _port(name, f"between: [{plus}, {minus}]", {"frequency": "50 Hz", **items})


def phases(name: str, *nets: str, **items: Number) -> str:
    return _port(name, f"phases: [{', '.join(nets)}]", {"frequency": "50 Hz", **items})


def sheet(*ports: str, frequency: float = 100e3, extra: str = "") -> str:
    """A stage sheet of ports, one switching frequency and further lines as they are."""
    lines = ["ports:", *ports, f"switching: {{frequency: {frequency!r}}}", extra]
    return "\n".join(lines) + "\n"


def _port(name: str, where: str, items: Mapping[str, Number]) -> str:
    words = [f"{key.replace('_', '-')}: {_text(value)}" for key, value in items.items()]
    return f"  {name}: {{{', '.join([where, *words])}}}"


def _text(value: Number) -> str:
    if isinstance(value, tuple):
        return f"[{', '.join(_text(end) for end in value)}]"
    return value if isinstance(value, str) else f"{value:.9g}"


@dataclass(frozen=True)
class Study:
    """One stage; the commands run once, when something of theirs is asked for."""

    cards: str
    sheet: str = ""
    parts: str = PARTS

    @property
    def netlist(self) -> str:
        return f"* a stage of the mountain hut\n{self.cards}\n{MODELS}.end\n"

    @cached_property
    def table(self) -> dict[str, Any]:
        """What `quadrants --format json` prints."""
        return self._run("quadrants", "--format", "json")

    @cached_property
    def lint(self) -> dict[str, Any]:
        """What `lint --format json` prints."""
        return self._run("lint", "--format", "json")

    @cached_property
    def result(self) -> Analysis | Unusable:
        sheet = SourceText("hut.stage.yaml", self.sheet) if self.sheet else None
        parts = [SourceText("hut.parts.yaml", self.parts)]
        return analyse_text(SourceText("hut.cir", self.netlist), sheet, parts)

    @property
    def analysis(self) -> Analysis:
        """The products of the steps, for the quantities that the table does not print."""
        result = self.result
        assert isinstance(result, Analysis), result.problems
        return result

    @property
    def usable(self) -> bool:
        """Whether sheet and netlist can be analysed at all."""
        return isinstance(self.result, Analysis)

    def position(self, name: str) -> dict[str, Any]:
        found = [entry for entry in self.table["positions"] if entry["name"] == name]
        names = [entry["name"] for entry in self.table["positions"]]
        assert found, f"no position {name} among {names}"
        return dict(found[0])

    def expect(
        self, name: str, off: Bounds | None = None, on: Bounds | None = None,
        quadrants: str | None = None, within: float = 0.005,
    ) -> None:  # fmt: skip
        """Assert the demand of a position; a bound of None is left open."""
        demand = self.position(name)["demand"]
        self._close(f"{name} off voltage", demand["off_voltage"], off, within)
        self._close(f"{name} on current", demand["on_current"], on, within)
        if quadrants is not None:
            assert demand["quadrants"] == quadrants.split("+"), (name, demand)

    def variable(self, name: str) -> tuple[float, float]:
        """The range of `v(C1)` or `i(L1)`."""
        found = {entry.name: entry.range for entry in self.analysis.demands.variables}
        assert name in found, f"no variable {name} among {sorted(found)}"
        span = found[name]
        assert isinstance(span, Interval), (name, span)
        return span.low, span.high

    def mean(self, name: str) -> float:
        return sum(self.variable(name)) / 2

    def legs(self) -> dict[str, dict[str, Any]]:
        return {leg["name"]: leg for leg in self.table["legs"]}

    def broken(self) -> set[tuple[str, str]]:
        """(rule, subject) of each broken error or warning."""
        findings = [f for f in self.lint["findings"] if f["level"] in ("error", "warning")]
        return {(f["rule"], f["subject"]) for f in findings if f["verdict"] == "broken"}

    def _close(self, what: str, has: Any, bounds: Bounds | None, within: float) -> None:
        if bounds is None:
            return
        assert has is not None, f"{what} is unknown; {self.table['undetermined']}"
        scale = max(abs(end) for end in (*has, *bounds) if end is not None)
        for end, wanted in zip(has, bounds, strict=True):
            if wanted is not None:
                assert end is not None, f"{what} is {has}, not {bounds}"
                near = math.isclose(end, wanted, rel_tol=0, abs_tol=within * scale + 1e-9)
                assert near, f"{what} is {has}, not {bounds}"

    def _run(self, command: str, *options: str) -> dict[str, Any]:
        with tempfile.TemporaryDirectory() as folder:
            files = self._write(Path(folder))
            output, complaint = io.StringIO(), io.StringIO()
            with contextlib.redirect_stdout(output), contextlib.redirect_stderr(complaint):
                status = main([command, *files, *options])
        assert status in (0, 1), complaint.getvalue()
        return dict(json.loads(output.getvalue()))

    def _write(self, folder: Path) -> Sequence[str]:
        (folder / "hut.cir").write_text(self.netlist)
        (folder / "hut.parts.yaml").write_text(self.parts)
        options = [str(folder / "hut.cir"), "--parts", str(folder / "hut.parts.yaml")]
        if self.sheet:
            (folder / "hut.stage.yaml").write_text(self.sheet)
        return options
