"""Whole stages as realistic exports, with what they ask and what must be found in them.

One stage is four files in `tests/circuits/sound` or `tests/circuits/faulty`:

    NAME.cir            the export; in `faulty` its first line names the one mistake
    NAME.stage.yaml     its sheet, found beside it; `parts:` lists NAME.parts.yaml and
                        what the boards share (board.parts.yaml, passives.parts.yaml)
    NAME.parts.yaml     the stage's own part data (a faulty twin may use its sound one's:
                        `parts: [../sound/NAME.parts.yaml, ../sound/board.parts.yaml]`)
    NAME.expect.yaml    what the textbook says, one line of reasoning in a comment beside it:

        twin: NAME                      # faulty only: the sound stage that it was made from
        positions:                      # sound: every position, no more; faulty: those listed
          Q1:
            from: BUS                   # drain, collector or anode net; optional, as `to`
            to: SW
            quadrants: [I, IV]          # null where even the signs are left open; see `any`
            off_voltage: [90, 120]      # v(from) - v(to) while off; null, or an end of null,
            on_current: [-86, 86]       # where undetermined; positive from -> to
            covered: true               # optional; sound: true unless stated
            tolerance: 0.05             # of the larger end; the default
        legs:                           # sound: all, as midpoint and kind; optional in faulty
          - {midpoint: SW, kind: half-bridge leg}
        undetermined: []                # the names (`what`) that the sheet truly leaves open
        findings:                       # broken at error or warning, exactly these
          - {rule: reverse-current-path, subject: Q1}

`any` in place of quadrants, a range, an end or the legs is not compared: where the textbook
leaves it to taste, such as the off voltage of a switch while the current has stopped.
The numbers come from hand calculation, never from a run of the program.
"""

import contextlib
import io
import json
from dataclasses import dataclass
from functools import cached_property
from pathlib import Path
from typing import Any

import yaml

from rulecheck.cli import main

CIRCUITS = Path(__file__).resolve().parent.parent / "circuits"
TOLERANCE = 0.05
ANY = "any"
RATED = ("error", "warning")
CORE = (
    *("forward-current-path", "reverse-current-path", "forward-blocking", "reverse-blocking"),
    *("blocking-rating", "current-rating", "interrupted-current", "free-short", "shared-gate"),
)
"""Rules that a stage with full part data must decide."""


@dataclass(frozen=True)
class Case:
    """One stage of the corpus; each command runs once, when something of it is asked for."""

    netlist: Path

    def __str__(self) -> str:
        return f"{self.netlist.parent.name}/{self.netlist.stem}"

    @property
    def sound(self) -> bool:
        return self.netlist.parent.name == "sound"

    @cached_property
    def expected(self) -> dict[str, Any]:
        text = self.netlist.with_suffix(".expect.yaml").read_text(encoding="utf-8")
        return dict(yaml.safe_load(text))

    @cached_property
    def table(self) -> dict[str, Any]:
        return _run("quadrants", self.netlist)

    @cached_property
    def lint(self) -> dict[str, Any]:
        return _run("lint", self.netlist)

    @property
    def positions(self) -> dict[str, dict[str, Any]]:
        return {entry["name"]: entry for entry in self.table["positions"]}

    def broken(self) -> list[tuple[str, str]]:
        """(rule, subject) of each broken error or warning, sorted.

        A current that is interrupted counts once, under its inductor, whatever its direction;
        the whole stage is called `stage`, whatever its file.
        """
        return sorted(
            {
                (finding["rule"], _short_subject(finding, self.netlist))
                for finding in self.lint["findings"]
                if finding["level"] in RATED and finding["verdict"] == "broken"
            }
        )

    def undecided(self) -> list[tuple[str, str]]:
        """(rule, subject) of each core rule that waits for a datum."""
        return sorted(
            (finding["rule"], finding["subject"])
            for finding in self.lint["findings"]
            if finding["rule"] in CORE and finding["verdict"] == "undecided"
        )


def cases(folder: str) -> list[Case]:
    return [Case(path) for path in sorted((CIRCUITS / folder).glob("*.cir"))]


def position_differences(case: Case) -> list[str]:
    """What the table says other than expected; empty where it agrees."""
    expected: dict[str, Any] = case.expected.get("positions") or {}
    if not expected and not case.sound:
        return []
    missing = [f"no position {name}" for name in expected if name not in case.positions]
    extra = [f"unexpected position {name}" for name in case.positions if name not in expected]
    found = missing + (extra if case.sound else [])
    for name in expected:
        if name in case.positions:
            found += _compare(name, expected[name], case.positions[name], case.sound)
    return found


def leg_differences(case: Case) -> list[str]:
    if "legs" not in case.expected:
        return ["no legs stated"] if case.sound else []
    if case.expected["legs"] == ANY:
        return []
    wanted = sorted((leg["midpoint"], leg["kind"]) for leg in case.expected["legs"])
    has = sorted((leg["midpoint"], leg["kind"]) for leg in case.table["legs"])
    return [] if wanted == has else [f"legs {has}, expected {wanted}"]


def undetermined_differences(case: Case) -> list[str]:
    if not case.sound and "undetermined" not in case.expected:
        return []
    wanted = sorted(case.expected.get("undetermined") or [])
    has = sorted(entry["what"] for entry in case.table["undetermined"])
    return [] if wanted == has else [f"undetermined {has}, expected {wanted}"]


def finding_differences(case: Case) -> list[str]:
    wanted = sorted((item["rule"], item["subject"]) for item in case.expected["findings"])
    has = case.broken()
    missed = [
        f"not found: {rule} at {subject}" for rule, subject in wanted if (rule, subject) not in has
    ]
    false = [
        f"wrongly found: {rule} at {subject}"
        for rule, subject in has
        if (rule, subject) not in wanted
    ]
    return missed + false


def _short_subject(finding: dict[str, Any], netlist: Path) -> str:
    subject = str(finding["subject"])
    if subject == str(netlist):
        return "stage"
    return subject.split()[0] if finding["rule"] == "interrupted-current" else subject


def _compare(name: str, wanted: dict[str, Any], has: dict[str, Any], sound: bool) -> list[str]:
    demand = has["demand"]
    pairs = [
        *((key, has[key], wanted[key]) for key in ("from", "to") if key in wanted),
        ("quadrants", demand["quadrants"], wanted["quadrants"]),
    ]
    if sound or "covered" in wanted:
        pairs.append(("covered", has["covered"], wanted.get("covered", True)))
    found = [
        f"{name} {what}: {got}, expected {want}"
        for what, got, want in pairs
        if want not in (got, ANY)
    ]
    tolerance = wanted.get("tolerance", TOLERANCE)
    for key in ("off_voltage", "on_current"):
        if not _near(demand[key], wanted[key], tolerance):
            found.append(f"{name} {key}: {demand[key]}, expected {wanted[key]}")
    return found


def _near(has: Any, wanted: Any, tolerance: float) -> bool:
    """Both ends within the tolerance of the larger expected one; unknown only where expected."""
    if wanted == ANY:
        return True
    ends_wanted, ends_has = wanted or [None, None], has or [None, None]
    scale = max((abs(end) for end in ends_wanted if isinstance(end, int | float)), default=0.0)
    pairs = zip(ends_has, ends_wanted, strict=True)
    return all(_end_near(got, want, tolerance * scale) for got, want in pairs)


def _end_near(has: float | None, wanted: float | str | None, within: float) -> bool:
    if wanted == ANY:
        return True
    if has is None or wanted is None:
        return has is wanted
    return abs(has - float(wanted)) <= within


def _run(command: str, netlist: Path) -> dict[str, Any]:
    output, complaint = io.StringIO(), io.StringIO()
    with contextlib.redirect_stdout(output), contextlib.redirect_stderr(complaint):
        status = main([command, str(netlist), "--format", "json"])
    assert status in (0, 1), complaint.getvalue()
    return dict(json.loads(output.getvalue()))
