"""The wheel is complete: installed in an empty environment it lints the demo from anywhere."""

import os
import subprocess
import sys
import venv
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[2]


def run(*command: object, folder: Path) -> subprocess.CompletedProcess[str]:
    clean = {name: value for name, value in os.environ.items() if not name.startswith("PYTHON")}
    return subprocess.run(
        [str(word) for word in command],
        cwd=folder,
        env={**clean, "PIP_DISABLE_PIP_VERSION_CHECK": "1"},
        capture_output=True,
        text=True,
        check=False,
    )


@pytest.fixture(scope="module")
def installed(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The `bin` folder of a new environment with nothing in it but the built wheel's needs."""
    folder = tmp_path_factory.mktemp("wheel")
    built = run(
        sys.executable, "-m", "build", "--wheel", "--no-isolation", "--outdir", folder, ROOT,
        folder=folder,
    )  # fmt: skip
    assert built.returncode == 0, built.stderr
    (wheel,) = folder.glob("*.whl")
    venv.create(folder / "empty", with_pip=True)
    programs = folder / "empty" / "bin"
    fetched = run(programs / "python", "-m", "pip", "install", "--quiet", wheel, folder=folder)
    assert fetched.returncode == 0, fetched.stderr
    return programs


def files_below(folder: Path) -> set[str]:
    return {str(path.relative_to(folder)) for path in folder.rglob("*") if path.is_file()}


def test_grammar_rules_and_demo_travel_in_the_wheel(installed):
    (package,) = installed.parent.glob("lib/python*/site-packages/rulecheck")
    for kind in ("grammar", "rules"):
        assert files_below(ROOT / kind) == files_below(package / "_data" / kind)
        assert files_below(ROOT / kind)
    assert files_below(ROOT / "rulecheck" / "demo_data") == files_below(package / "demo_data")
    templates = Path("report", "review", "templates")
    assert files_below(ROOT / "rulecheck" / templates) == files_below(package / templates)
    assert files_below(package / templates)
    assert not (package.parent / "tests").exists()


def test_the_installed_command_lints_the_demo_from_another_folder(installed, tmp_path):
    wrote = run(installed / "rulecheck", "demo", "hut", folder=tmp_path)
    assert (wrote.returncode, wrote.stderr) == (0, "")
    sound = run(installed / "rulecheck", "lint", "hut/battery-bus.cir", folder=tmp_path)
    assert (sound.returncode, sound.stderr) == (0, "")
    faulty = run(installed / "rulecheck", "lint", "hut/battery-bus-faulty.cir", folder=tmp_path)
    assert faulty.returncode == 1
    assert "error: " in faulty.stdout
    told = run(installed / "rulecheck", "report", "hut/battery-bus.cir", folder=tmp_path)
    assert (told.returncode, told.stderr) == (0, "")
    assert told.stdout.startswith("<!DOCTYPE html>")
