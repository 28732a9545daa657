"""Find every import of a source tree that runs against the order of its layers."""

import ast
import re
import sys
import tomllib
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from pathlib import Path

_MODULE_NAME = re.compile(r"rulecheck(\.\w+)+\Z")
_ABOVE_ALL = "cli"


@dataclass(frozen=True)
class Layers:
    """Where each folder stands, and which folders may use which library."""

    rank: Mapping[str, int]
    third_party: Mapping[str, tuple[str, ...]]


@dataclass(frozen=True)
class Import:
    """One imported module, wherever in the file it is named."""

    line: int
    module: str
    inside_function: bool


def read_layers(pyproject: Path) -> Layers:
    table = tomllib.loads(pyproject.read_text(encoding="utf-8"))["tool"]["rulecheck"]["layers"]
    rank = {name: number for number, tier in enumerate(table["order"]) for name in tier}
    return Layers(rank, {name: tuple(folders) for name, folders in table["third_party"].items()})


def wrong_imports(package: Path, layers: Layers) -> list[str]:
    """One line for each import that points downward, sideways, inward of a function or outside."""
    wrong: list[str] = []
    for path in sorted(package.rglob("*.py")):
        layer = layer_of(path, package)
        for found in imports_of(path, package):
            reason = _fault(layer, found, layers)
            if reason:
                wrong.append(f"{path.relative_to(package.parent)}:{found.line}: {reason}")
    return wrong


def layer_of(path: Path, package: Path) -> str:
    """The folder, or the module where it stands alone; the package's own file is below all."""
    first = path.relative_to(package).parts[0].removesuffix(".py")
    return {"__main__": _ABOVE_ALL, "__init__": ""}.get(first, first)


def imports_of(path: Path, package: Path) -> list[Import]:
    tree = ast.parse(path.read_text(encoding="utf-8"))
    inner = {
        id(node)
        for function in ast.walk(tree)
        if isinstance(function, ast.FunctionDef | ast.AsyncFunctionDef | ast.Lambda)
        for node in ast.walk(function)
    }
    return [
        Import(node.lineno, module, id(node) in inner)
        for node in ast.walk(tree)
        for module in _modules_named(node, path, package)
    ]


def _modules_named(node: ast.AST, path: Path, package: Path) -> Iterator[str]:
    if isinstance(node, ast.Import):
        yield from (alias.name for alias in node.names)
    elif isinstance(node, ast.ImportFrom):
        base = _absolute(node, path, package)
        yield from (f"{base}.{alias.name}" if base == "rulecheck" else base for alias in node.names)
    elif isinstance(node, ast.Constant) and _is_module(node.value, package):
        # a module named in a string is imported by name later
        yield str(node.value)


def _absolute(node: ast.ImportFrom, path: Path, package: Path) -> str:
    if not node.level:
        return node.module or ""
    folder = path.parent
    for _ in range(node.level - 1):
        folder = folder.parent
    return ".".join([*folder.relative_to(package.parent).parts, *filter(None, [node.module])])


def _is_module(name: object, package: Path) -> bool:
    if not isinstance(name, str) or not _MODULE_NAME.match(name):
        return False
    path = package.parent.joinpath(*name.split("."))
    return path.with_suffix(".py").is_file() or path.is_dir()


def _fault(layer: str, found: Import, layers: Layers) -> str | None:
    top, _, rest = found.module.partition(".")
    if top != "rulecheck":
        return _third_party_fault(layer, top, layers) or _place_fault(found)
    target = rest.split(".")[0]
    if target not in layers.rank:
        return None if not target or target == "__version__" else f"no layer named {target}"
    if not layer:
        return f"the package's own file imports {target}"
    own, other = layers.rank.get(layer, -1), layers.rank[target]
    if own < other:
        return f"{layer} imports {target}, which comes later"
    if own == other and layer != target:
        return f"{layer} imports {target}, which stands beside it"
    return _place_fault(found)


def _third_party_fault(layer: str, library: str, layers: Layers) -> str | None:
    if library in sys.stdlib_module_names:
        return None
    allowed = layers.third_party.get(library)
    if allowed is None:
        return f"{library} is no dependency"
    return None if layer in allowed else f"{layer} imports {library}; only {allowed} may"


def _place_fault(found: Import) -> str | None:
    return f"{found.module} is imported inside a function" if found.inside_function else None
