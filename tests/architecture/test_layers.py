"""Layers point one way; every package folder has its place in the table; no ring of modules."""

import ast
from pathlib import Path

import networkx as nx
import pytest

ROOT = Path(__file__).parents[2]
PACKAGE = ROOT / "onelinefault"

# layer → the layers it may import (its own is always allowed)
MAY_IMPORT = {
    "errors": set(),
    "model": {"errors"},
    "engine": {"model", "errors"},
    "store": {"model", "errors"},
    "drawing": {"model", "errors"},
    "studies": {"model", "engine", "store", "errors"},
    "report": {"model", "engine", "drawing", "studies", "errors"},
    "scripting": {"model", "engine", "store", "studies", "errors"},
    "desktop": {"model", "engine", "store", "drawing", "report", "studies", "errors"},
    "cli": {"model", "engine", "store", "drawing", "report", "studies", "scripting", "desktop", "errors", "__init__"},
    "__main__": {"cli"},
    "__init__": {"scripting", "studies", "store", "model", "engine", "errors"},
}
NEVER = {
    "errors": ("numpy", "scipy", "PySide6", "networkx", "matplotlib"),
    "model": ("numpy", "scipy", "PySide6", "networkx", "matplotlib", "os", "pathlib", "io", "time", "datetime"),
    "engine": ("PySide6", "matplotlib", "os", "pathlib", "io"),
    "store": ("PySide6", "numpy", "scipy"),
    "drawing": ("PySide6.QtWidgets", "numpy", "scipy", "matplotlib"),
    "studies": ("PySide6",),
    "report": ("PySide6.QtWidgets",),
    "scripting": ("PySide6",),
}
QT_IN_DRAWING = ("painter", "export")


def modules() -> list[Path]:
    return sorted(PACKAGE.rglob("*.py"))


def dotted(path: Path) -> str:
    name = ".".join(path.relative_to(ROOT).with_suffix("").parts)
    return name.removesuffix(".__init__")


def layer_of(name: str) -> str:
    parts = name.split(".")
    return parts[1] if len(parts) > 1 and not parts[1].startswith("__v") else "__init__"


def imports_of(path: Path, load_time_only: bool = False) -> list[str]:
    tree = ast.parse(path.read_text(encoding="utf-8"))
    nodes = tree.body if load_time_only else list(ast.walk(tree))
    found: list[str] = []
    for node in nodes:
        if isinstance(node, ast.Import):
            found += [alias.name for alias in node.names]
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{path}: relative import"
            module = node.module or ""
            known = PACKAGE.joinpath(*module.split(".")[1:])
            found += [f"{module}.{a.name}" if known.is_dir() or module == "PySide6" else module for a in node.names]
    return found


@pytest.mark.parametrize("path", modules(), ids=dotted)
def test_imports_follow_the_arrows(path: Path) -> None:
    layer = layer_of(dotted(path))
    assert layer in MAY_IMPORT, f"{layer} has no place in the table of layers"
    for name in imports_of(path):
        if name.split(".")[0] == "onelinefault":
            target = layer_of(name)
            assert target == layer or target in MAY_IMPORT[layer], f"{dotted(path)} must not import {name}"
        for banned in NEVER.get(layer, ()):
            assert name != banned and not name.startswith(banned + "."), f"{dotted(path)} must not import {name}"
        if layer == "drawing" and name.startswith("PySide6"):
            assert path.stem.startswith(QT_IN_DRAWING), f"{dotted(path)} must stay without a toolkit"


def test_there_is_no_ring_of_modules() -> None:
    graph: nx.DiGraph = nx.DiGraph()
    names = {dotted(path) for path in modules()}
    for path in modules():
        for name in imports_of(path, load_time_only=True):
            if name in names and name != dotted(path):
                graph.add_edge(dotted(path), name)
    assert list(nx.simple_cycles(graph)) == []


def test_the_model_reads_no_clock_and_no_file() -> None:
    for path in (PACKAGE / "model").glob("*.py"):
        tree = ast.parse(path.read_text(encoding="utf-8"))
        called = {n.func.id for n in ast.walk(tree) if isinstance(n, ast.Call) and isinstance(n.func, ast.Name)}
        assert not called & {"open", "print", "input"}, path


def test_package_files_hold_no_code() -> None:
    for path in PACKAGE.glob("*/__init__.py"):
        body = ast.parse(path.read_text(encoding="utf-8")).body
        assert len(body) == 1 and isinstance(body[0], ast.Expr), f"{path} holds code"
