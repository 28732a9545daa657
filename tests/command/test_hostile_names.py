"""What a file says never steers a terminal, hides text or turns it round, in any output."""

import json
import re
import unicodedata

import pytest

from tests.command.running import run

ESCAPE, TURN, HIDDEN, CSI = "\x1b[31m", "‮", "​", "\x9b2J"
SIGNS = ESCAPE + TURN + HIDDEN + CSI
NETLIST = f"""leg {SIGNS}
V1 BUS 0 58
M1 BUS G1 S{TURN}W S{TURN}W FE{HIDDEN}T
M2 S{TURN}W G2 0 0 FE{HIDDEN}T
L1 S{TURN}W OUT 10u
R1 OUT 0 1{CSI}
Q{TURN}9 BUS
.model FE{HIDDEN}T VDMOS(Vds=20)
"""
PACK = r"""pack: "hut\e[8m"
rules:
  - id: "loud\u202e"
    subject: part
    level: warning
    requires: model matches "none\e[31m"
    message: "{name} \e]0;title\a is \u202e not {model}"
    why: "w\e[31m"
    remedy: "r\u2028"
    source: "s\x9b"
    examples:
      - {expect: broken, netlist: "* t\nR1 a b 1\n"}
      - {expect: broken, netlist: "* t\nR2 a b 1\n"}
"""
PROJECT = r"""netlists: ["*.cir"]
packs: [p.rules.yaml]
deviations:
  - {rule: "loud\u202e", subject: R1, reason: "\e[5mdim", accepted-by: "m\u202ee"}
"""
SHEET = 'ports:\n  "b\\e[31m":\n    between: [BUS, "0"]\n    voltage: 58 V\n'
COMMANDS = [
    *(["lint", "--format", name] for name in ("table", "lines", "json", "sarif", "junit")),
    ["lint", "--format", "markdown"],
    *(["quadrants", "{}", "--format", name] for name in ("table", "json", "csv", "markdown")),
    ["explain", "{}", "M1"],
    *(["explain", "{}", "--step", step] for step in ("circuit", "stage", "facts")),
    ["report", "{}"],
    ["rules"],
    ["rules", "loud‮"],
    ["rules", "--try", "p.rules.yaml"],
]


@pytest.fixture
def hostile(tmp_path):
    name = "leg\x1b[31m.cir"
    (tmp_path / name).write_text(NETLIST, encoding="utf-8")
    (tmp_path / name.replace(".cir", ".stage.yaml")).write_text(SHEET, encoding="utf-8")
    (tmp_path / "p.rules.yaml").write_text(PACK, encoding="utf-8")
    (tmp_path / "rulecheck.yaml").write_text(PROJECT, encoding="utf-8")
    return tmp_path, name


def steering(text):
    """The signs in a text that no output may hold."""
    return {
        hex(ord(sign))
        for sign in text
        if not sign.isprintable() and sign not in "\n\t" and unicodedata.category(sign) != "Zs"
    }


@pytest.mark.parametrize("command", COMMANDS, ids=" ".join)
def test_no_output_holds_a_sign_that_steers(command, hostile):
    folder, name = hostile
    done = run(*(word.format(name) for word in command), folder=folder)
    assert done.returncode in (0, 1, 2)
    assert "internal error" not in done.stderr
    assert done.stdout + done.stderr
    assert steering(done.stdout) == set()
    assert steering(done.stderr) == set()


def test_colour_codes_are_ours_alone(hostile):
    folder, _ = hostile
    done = run("lint", "--format", "table", "--color", "always", folder=folder)
    assert "\x1b[" in done.stdout
    assert steering(re.sub(r"\x1b\[[0-9;]*m", "", done.stdout)) == set()
    assert "\x1b[31mW" not in done.stdout
    assert "\x1b[5m" not in done.stdout


def test_machines_still_read_the_names_as_they_are(hostile):
    folder, _ = hostile
    found = json.loads(run("lint", "--format", "json", folder=folder).stdout)
    assert any("‮" in str(finding["subject"]) for finding in found["findings"])
    log = json.loads(run("lint", "--format", "sarif", folder=folder).stdout)
    texts = [result["message"]["text"] for result in log["runs"][0]["results"]]
    assert texts
    assert all(steering(text) == set() for text in texts)
