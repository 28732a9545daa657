"""Limits are raised by name, mistakes in them told, and a flood of errors is counted."""

import pytest

from rulecheck.values import BOUNDS
from tests.command.running import run

LEG = "leg\nV1 BUS 0 58\nR1 BUS 0 1\n"


def test_a_netlist_beyond_a_limit_is_unusable_and_the_option_makes_it_usable(tmp_path):
    (tmp_path / "a.cir").write_text(LEG, encoding="utf-8")
    low = run("lint", "a.cir", "--limit", "file-bytes=10", folder=tmp_path)
    assert low.returncode == 2
    assert "--limit file-bytes=N" in low.stderr
    assert run("lint", "a.cir", "--limit", "file-bytes=100", folder=tmp_path).returncode == 0


@pytest.mark.parametrize(
    ("written", "said"),
    [
        ("elments=5", "no limit 'elments'; the limits are file-bytes,"),
        ("elements", "'elements' takes a number from 1 to"),
        ("elements=0", "'elements' takes a number from 1 to"),
        ("elements=1e9", "'elements' takes a number from 1 to"),
        ("include-depth=101", "'include-depth' takes a number from 1 to 100"),
        ("elements=٣", "'elements' takes a number from 1 to"),
    ],
)
def test_a_mistake_in_a_limit_is_told(written, said, tmp_path):
    done = run("lint", "a.cir", "--limit", written, folder=tmp_path)
    assert done.returncode == 2
    assert said in done.stderr


def test_every_limit_is_a_word_of_the_help(tmp_path):
    done = run("lint", "--help", folder=tmp_path)
    words = "".join(done.stdout.split())
    assert all(name in words for name in BOUNDS)


def errors(count):
    return "hut\nR1 a b 1\n" + "".join(f"D{k} a\n" for k in range(count))


def test_many_errors_are_printed_in_order_and_the_rest_counted(tmp_path):
    (tmp_path / "a.cir").write_text(errors(70), encoding="utf-8")
    lines = run("lint", "a.cir", "--quiet", folder=tmp_path).stderr.splitlines()
    assert [line.split(":")[1] for line in lines[:-1]] == [str(number) for number in range(3, 53)]
    assert (
        lines[-1] == "rulecheck: error: 20 more errors are not shown; --limit errors=N shows more"
    )
    more = run("lint", "a.cir", "--limit", "errors=70", folder=tmp_path).stderr.splitlines()
    assert len(more) == 70
    one = run("lint", "a.cir", "--limit", "errors=69", folder=tmp_path).stderr.splitlines()
    assert one[-1].startswith("rulecheck: error: 1 more error is not shown")


def test_an_included_folder_is_allowed_by_option_or_by_the_project_below_it(tmp_path):
    stage = tmp_path / "stage"
    (stage / "lib").mkdir(parents=True)
    (tmp_path / "above.lib").write_text(".param k=1\n", encoding="utf-8")
    (stage / "lib" / "own.lib").write_text(".param m=1\n", encoding="utf-8")
    netlist = LEG + ".lib above.lib\n.lib own.lib\nR2 BUS 0 {k+m}\n"
    (stage / "a.cir").write_text(netlist, encoding="utf-8")
    assert run("lint", "a.cir", folder=stage).returncode == 2
    (stage / "rulecheck.yaml").write_text("include-dirs: [lib]\n", encoding="utf-8")
    done = run("lint", "a.cir", "--include-dir", "..", folder=stage)
    assert (done.returncode, done.stderr) == (0, "")
    (stage / "rulecheck.yaml").write_text("include-dirs: [lib, ..]\n", encoding="utf-8")
    refused = run("lint", "a.cir", folder=stage)
    assert refused.returncode == 2
    assert refused.stderr.startswith("rulecheck.yaml:1:21: error: '..' is not below the project")


@pytest.mark.parametrize(
    ("pattern", "said"),
    [
        ("../*.cir", "leads out of the project file's folder"),
        ("/etc/*", "leads out of the project file's folder"),
        ("**/**/*.cir", "searches all folders twice"),
        ("**x", "is no pattern"),
        ("no*.cir", "no file matches"),
    ],
)
def test_a_pattern_of_netlists_stays_below_the_project(pattern, said, tmp_path):
    (tmp_path / "rulecheck.yaml").write_text(f"netlists: ['{pattern}']\n", encoding="utf-8")
    done = run("lint", folder=tmp_path)
    assert done.returncode == 2
    assert said in done.stderr


def test_a_pattern_that_matches_too_much_is_refused(tmp_path):
    for number in range(4):
        (tmp_path / f"{number}.cir").write_text(LEG, encoding="utf-8")
    (tmp_path / "rulecheck.yaml").write_text("netlists: ['*.cir']\n", encoding="utf-8")
    done = run("lint", "--limit", "netlists=3", folder=tmp_path)
    assert done.returncode == 2
    assert "--limit netlists=N" in done.stderr
    assert run("lint", "--limit", "netlists=4", folder=tmp_path).returncode == 0
