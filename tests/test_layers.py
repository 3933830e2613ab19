"""Imports go down only, there are no cycles, and none hides inside a function."""

import ast
from pathlib import Path

import pytest

PACKAGE = Path(__file__).parents[1] / "xsec_fem"
LAYERS = [  # the lowest first; one line's modules may import each other
    ["errors", "units"],
    ["fem"],
    ["theory"],
    ["model"],
    ["meshing"],
    ["recovery"],
    ["elementary", "member"],
    ["results"],
    ["pipeline"],
    ["report", "sweep"],
    ["cli", "__main__"],
]
RANK = {name: rank for rank, names in enumerate(LAYERS) for name in names}
# beyond the order: who must not know whom at all
APART = {"theory": {"model", "meshing"}, "fem": {"model", "meshing"}, "model": {"fem", "theory"}}
FILES = sorted(PACKAGE.rglob("*.py"))


def module_of(path):
    parts = path.relative_to(PACKAGE.parent).with_suffix("").parts
    return ".".join(parts[:-1] if parts[-1] == "__init__" else parts)


MODULES = {module_of(path) for path in FILES}


def imports(path):
    """(imported module of the package, inside a function?) of one file, type-checking imports included."""
    tree = ast.parse(path.read_text(encoding="utf-8"))
    deferred = {
        id(node)
        for function in ast.walk(tree)
        if isinstance(function, ast.FunctionDef | ast.AsyncFunctionDef)
        for node in ast.walk(function)
    }
    for node in ast.walk(tree):
        if isinstance(node, ast.ImportFrom) and (node.module or "").startswith("xsec_fem"):
            for alias in node.names:
                full = f"{node.module}.{alias.name}"
                yield full if full in MODULES else node.module, id(node) in deferred
        elif isinstance(node, ast.Import):
            for alias in node.names:
                if alias.name.startswith("xsec_fem"):
                    yield alias.name, id(node) in deferred


def layer(module):
    return module.split(".")[1] if "." in module else None


@pytest.mark.parametrize("path", FILES, ids=module_of)
def test_imports_go_down_only(path):
    here = layer(module_of(path))
    for target, deferred in imports(path):
        assert not deferred, f"{module_of(path)} imports {target} inside a function"
        if here is None or layer(target) is None:
            assert here is None, f"{module_of(path)} imports the package's own front"
            continue
        assert RANK[layer(target)] <= RANK[here], f"{module_of(path)} -> {target}"
        assert layer(target) not in APART.get(here, set()), f"{module_of(path)} -> {target}"


def test_no_cycles():
    graph = {module_of(path): {target for target, _ in imports(path)} - {module_of(path)} for path in FILES}
    done, walking = set(), []

    def walk(module):
        assert module not in walking, " -> ".join([*walking, module])
        if module in done:
            return
        walking.append(module)
        for target in sorted(graph.get(module, ())):
            walk(target)
        walking.pop()
        done.add(module)

    for module in sorted(graph):
        walk(module)


@pytest.mark.parametrize(
    ("library", "allowed"),
    [
        ("gmsh", {"xsec_fem.meshing.gmsh_session"}),
        ("meshio", {"xsec_fem.meshing.mesh_files"}),
    ],
)
def test_one_module_imports_the_library(library, allowed):
    found = set()
    for path in FILES:
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            names = []
            if isinstance(node, ast.Import):
                names = [alias.name for alias in node.names]
            elif isinstance(node, ast.ImportFrom):
                names = [node.module or ""]
            if any(name.split(".")[0] == library for name in names):
                found.add(module_of(path))
    assert found <= allowed
    assert found
