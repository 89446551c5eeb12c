"""Every public thing is documented; the engine's array arguments say their shape."""

import ast
import re
from collections.abc import Iterator
from pathlib import Path

import pytest

PACKAGE = Path(__file__).parents[2] / "onelinefault"
MODULES = sorted(PACKAGE.rglob("*.py"))


def public_functions(path: Path) -> Iterator[ast.FunctionDef]:
    for node in ast.parse(path.read_text(encoding="utf-8")).body:
        if isinstance(node, ast.FunctionDef) and not node.name.startswith("_"):
            yield node


def own_statements(node: ast.AST) -> Iterator[ast.AST]:
    """All nodes inside, without those of nested functions."""
    for child in ast.iter_child_nodes(node):
        if not isinstance(child, ast.FunctionDef | ast.Lambda):
            yield child
            yield from own_statements(child)


@pytest.mark.parametrize("path", MODULES, ids=lambda p: str(p.relative_to(PACKAGE)))
def test_public_names_have_docstrings(path: Path) -> None:
    tree = ast.parse(path.read_text(encoding="utf-8"))
    assert ast.get_docstring(tree), f"{path}: no module docstring"
    for node in tree.body:
        if isinstance(node, ast.FunctionDef | ast.ClassDef) and not node.name.startswith("_"):
            assert ast.get_docstring(node), f"{path.name}: {node.name} has no docstring"


@pytest.mark.parametrize("path", sorted((PACKAGE / "engine").glob("*.py")), ids=lambda p: p.stem)
def test_engine_docstrings_give_shapes(path: Path) -> None:
    for function in public_functions(path):
        annotations = " ".join(ast.unparse(a.annotation) for a in function.args.args if a.annotation)
        annotations += ast.unparse(function.returns) if function.returns else ""
        if re.search(r"(Complex|Float|Int|Bool)Array|NDArray", annotations):
            text = ast.get_docstring(function) or ""
            assert re.search(r"\([\w\s+·*,….-]*,[\w\s,]*\)|shape|same as", text), (
                f"{path.name}: {function.name} names no shape"
            )


def test_functions_that_raise_say_so() -> None:
    silent = []
    for path in sorted((PACKAGE / "engine").glob("*.py")) + sorted((PACKAGE / "model").glob("*.py")):
        for function in public_functions(path):
            raises = any(isinstance(n, ast.Raise) for n in own_statements(function))
            if raises and "aise" not in (ast.get_docstring(function) or ""):
                silent.append(f"{path.name}: {function.name}")
    assert silent == []


def test_modules_and_classes_stay_small() -> None:
    long = [f"{p.relative_to(PACKAGE)}" for p in MODULES if len(p.read_text(encoding="utf-8").splitlines()) > 350]
    assert len(long) <= len(MODULES) // 10, long
    for path in MODULES:
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            if isinstance(node, ast.ClassDef):
                assert (node.end_lineno or 0) - node.lineno < 350, f"{path.name}: {node.name}"
