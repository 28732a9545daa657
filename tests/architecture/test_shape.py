"""The measures that DEVELOPERS.md promises: short modules, short functions, plain names."""

import ast
from pathlib import Path

import pytest

PACKAGE = Path(__file__).resolve().parents[2] / "rulecheck"
MODULES = sorted(PACKAGE.rglob("*.py"))
MOST_MODULE_LINES = 350
MOST_FUNCTION_LINES = 50
USUAL_FUNCTION_LINES = 20
VAGUE_NAMES = {"util", "utils", "helper", "helpers", "misc", "common", "manager"}


def function_lengths(tree: ast.AST) -> list[tuple[int, str]]:
    return [
        ((node.end_lineno or node.lineno) - node.lineno + 1, node.name)
        for node in ast.walk(tree)
        if isinstance(node, ast.FunctionDef | ast.AsyncFunctionDef)
    ]


@pytest.fixture(scope="module")
def trees() -> dict[Path, ast.Module]:
    return {path: ast.parse(path.read_text(encoding="utf-8")) for path in MODULES}


def test_no_module_is_long():
    long = {
        path.name: count
        for path in MODULES
        if (count := len(path.read_text(encoding="utf-8").splitlines())) > MOST_MODULE_LINES
    }
    assert long == {}


def test_no_function_is_long_and_most_are_short(trees):
    lengths = sorted(pair for tree in trees.values() for pair in function_lengths(tree))
    assert lengths[-1] <= (MOST_FUNCTION_LINES, "~")
    assert lengths[len(lengths) * 9 // 10][0] <= USUAL_FUNCTION_LINES


def test_every_module_says_what_it_is(trees):
    assert [str(path) for path, tree in trees.items() if not ast.get_docstring(tree)] == []


def test_no_module_has_a_vague_name():
    assert [path for path in MODULES if path.stem in VAGUE_NAMES] == []
