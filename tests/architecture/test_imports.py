"""Imports run up the list of layers in pyproject.toml only."""

from pathlib import Path

import pytest

from tests.architecture.imports import Layers, layer_of, read_layers, wrong_imports

ROOT = Path(__file__).resolve().parents[2]
SMALL = Layers({"values": 0, "left": 1, "right": 1, "cli": 2}, {"numpy": ("right",)})


def test_no_import_runs_against_the_order():
    assert wrong_imports(ROOT / "rulecheck", read_layers(ROOT / "pyproject.toml")) == []


def test_every_folder_has_its_layer():
    layers = read_layers(ROOT / "pyproject.toml")
    package = ROOT / "rulecheck"
    folders = {layer_of(path, package) for path in package.rglob("*.py")} - {""}
    assert folders == set(layers.rank)


@pytest.mark.parametrize(
    ("file", "source", "complaint"),
    [
        ("values/a.py", "from rulecheck.left import b", "values imports left"),
        ("values/a.py", "import rulecheck.cli", "values imports cli"),
        ("values/a.py", "from rulecheck import cli", "values imports cli"),
        ("values/a.py", "from ..left import b", "values imports left"),
        ("values/a.py", "from .. import left", "values imports left"),
        ("left/a.py", "def f():\n    from rulecheck.cli import x", "left imports cli"),
        ("left/a.py", "def f():\n    import rulecheck.values", "inside a function"),
        ("left/a.py", "def f():\n    import json", "inside a function"),
        ("left/a.py", "from rulecheck.right import x", "beside it"),
        ("left/a.py", "import numpy as np", "left imports numpy"),
        ("left/a.py", "import requests", "no dependency"),
        ("left/a.py", "import rulecheck.nowhere", "no layer"),
        ("left/a.py", "NAME = 'rulecheck.cli'", "left imports cli"),
        ("__init__.py", "import rulecheck.values", "own file"),
    ],
)
def test_a_wrong_import_is_found(tmp_path, file, source, complaint):
    assert complaint in " ".join(_checked(tmp_path, file, source))


@pytest.mark.parametrize(
    ("file", "source"),
    [
        ("left/a.py", "from rulecheck.values import x\nimport json\nfrom .b import y"),
        ("right/a.py", "import numpy.linalg"),
        ("cli/a.py", "from rulecheck import __version__\nNAMES = ['rulecheck.left']"),
        ("__main__.py", "from rulecheck.cli import main"),
    ],
)
def test_a_right_import_is_let_pass(tmp_path, file, source):
    assert _checked(tmp_path, file, source) == []


def _checked(tmp_path: Path, file: str, source: str) -> list[str]:
    package = tmp_path / "rulecheck"
    for folder in ("values", "left", "right", "cli"):
        (package / folder).mkdir(parents=True)
    (package / file).write_text(source, encoding="utf-8")
    return wrong_imports(package, SMALL)
