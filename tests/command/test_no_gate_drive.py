"""A stage of power parts alone: its gate drive is neither found fault with nor passed."""

import json
from pathlib import Path

import pytest
import yaml

from rulecheck.rulebook import shipped_pack
from tests.command.running import run

NETLIST = """* power parts only
C1 BAT 0 470u voltage=100
L1 BAT SW 33u current=150
M1 BUS GH SW SW FET blocking=200 current=120 peak-current=400
M2 SW GL 0 0 FET blocking=200 current=120 peak-current=400
C2 BUS 0 470u voltage=200
.model FET NMOS
"""
SHEET = """ports:
  battery: {between: [BAT, 0], voltage: [42 V, 58 V], supplies: [-80 A, 80 A]}
  bus: {between: [BUS, 0], voltage: [90 V, 120 V]}
switching: {frequency: 50 kHz, dead-time: 300 ns}
"""


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    (tmp_path / "power.cir").write_text(NETLIST)
    (tmp_path / "power.stage.yaml").write_text(SHEET)
    return tmp_path


def rules_of_pack(name: str) -> set[str]:
    pack = shipped_pack(name)
    assert pack is not None
    return {rule["id"] for rule in yaml.safe_load(pack.text)["rules"]}


def test_the_drive_is_undecided(folder: Path) -> None:
    done = run("lint", "power.cir", "--format", "json", folder=folder)
    ours = rules_of_pack("gate-drive") - {"gate-on-own-return", "gate-resistor-shared"}
    found = [f for f in json.loads(done.stdout)["findings"] if f["rule"] in ours]
    assert {f["verdict"] for f in found} == {"undecided"}
    assert {f["rule"] for f in found} >= {"gate-undriven", "gate-hold-resistor", "induced-turn-on"}
    assert {f["subject"] for f in found} == {"GH", "GL"}
    assert all(
        any("the drivers in the netlist" in m["settle_with"] for m in f["missing"])
        or "FET" in str(f["missing"])
        for f in found
    )


@pytest.mark.parametrize(("policy", "status"), [("pass", 0), ("fail", 1)])
def test_undecided_decides_the_exit_status(folder: Path, policy: str, status: int) -> None:
    assert run("lint", "power.cir", "--undecided", policy, folder=folder).returncode == status
