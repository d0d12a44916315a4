"""The layout that the code keeps: who imports what, what importing costs, what is public."""

from __future__ import annotations

import ast
import subprocess
import sys
from pathlib import Path

import pytest

import estimator

ROOT = Path(estimator.__file__).parent
MODULES = {
    ".".join(path.relative_to(ROOT.parent).with_suffix("").parts): ast.parse(path.read_text(encoding="utf-8"))
    for path in ROOT.rglob("*.py")
}

#: Lines of the layout, top first; a module imports only from lines below its own.
LINES = [
    {"cli"},
    {"report"},
    {"demo"},
    {"result"},
    {"hour", "pricing", "totals"},
    {"year"},
    {"scheme_file"},
    {"scheme"},
    {"airstream"},
    {"plant"},
    {"settings", "weather"},
    {"samples"},
    {"quantities", "moist_air"},
    {"calendar_words", "files"},
    {"constants", "errors"},
]
LINE_OF = {name: number for number, names in enumerate(LINES) for name in names}


def imports(tree: ast.Module) -> set[str]:
    found = set()
    for node in ast.walk(tree):
        if isinstance(node, ast.Import):
            found |= {alias.name for alias in node.names}
        elif isinstance(node, ast.ImportFrom) and node.module:
            found |= {node.module} | {f"{node.module}.{alias.name}" for alias in node.names}
    return found


def test_a_module_imports_only_from_lines_below_it():
    for name, tree in MODULES.items():
        own = name.split(".")[1] if "." in name else ""
        if own in ("", "__init__"):
            continue
        assert own in LINE_OF, f"{name} has no line in the layout"
        for target in imports(tree):
            part = target.split(".")[1] if target.startswith("estimator.") else own
            if part != own and part in LINE_OF:
                assert LINE_OF[part] > LINE_OF[own], f"{name} imports {target}"


@pytest.mark.parametrize(
    ("package", "homes"),
    [
        ("typer", {"estimator.cli"}),
        ("click", {"estimator.cli"}),
        ("pvlib", {"estimator.weather"}),
        ("pint", {"estimator.quantities"}),
        ("platformdirs", {"estimator.files"}),
        ("matplotlib", set()),
        ("scipy", set()),
    ],
)
def test_each_library_has_one_home(package, homes):
    users = {n for n, tree in MODULES.items() if any(i.split(".")[0] == package for i in imports(tree))}
    assert {u for u in users if not any(u == h or u.startswith(f"{h}.") for h in homes)} == set()
    if package == "pvlib":
        assert len(users) == 1


def test_only_the_command_line_ends_the_process():
    for name, tree in MODULES.items():
        if not name.startswith("estimator.cli"):
            calls = {ast.unparse(n.func) for n in ast.walk(tree) if isinstance(n, ast.Call)}
            assert not calls & {"exit", "sys.exit", "quit", "os._exit", "print", "input"}, name


def loaded(code: str) -> set[str]:
    probe = f"import sys\n{code}\nprint(*sys.modules, sep='\\n', file=sys.stderr)"
    run = subprocess.run([sys.executable, "-c", probe], capture_output=True, text=True, check=True)
    return {line.split(".")[0] for line in run.stderr.splitlines()}


HEAVY = {"pandas", "pvlib", "matplotlib", "typer", "scipy", "pint"}


def test_importing_the_package_loads_nothing_heavy():
    assert not loaded("import estimator") & (HEAVY | {"numpy"})


def test_running_a_year_in_memory_needs_numpy_alone():
    code = "from estimator import evaluate, run_year, totals, stack, WeatherYear, Scheme"
    assert not loaded(code) & HEAVY


def test_the_public_surface_is_what_it_says():
    assert sorted(estimator.__all__) == sorted(estimator._HOME)
    for name in estimator.__all__:
        assert getattr(estimator, name).__name__ == name
        assert getattr(estimator, name).__doc__
    with pytest.raises(AttributeError, match="no attribute 'nothing'"):
        _ = estimator.nothing


def test_public_functions_and_classes_are_documented():
    for name, tree in MODULES.items():
        for node in ast.walk(tree):
            public = isinstance(node, ast.FunctionDef | ast.ClassDef) and not node.name.startswith("_")
            if public and node in tree.body:
                assert ast.get_docstring(node), f"{name}.{node.name}"
