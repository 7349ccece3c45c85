"""Imports go down only, and heavy libraries are imported where they are used."""

import ast
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path

import pytest

PACKAGE = Path(__file__).resolve().parents[2] / "equiv"
# language and equations do not see each other; neither do errors and units need the rest
ORDER = ["errors", "units", "elements", "network", "language", "equations", "analyses", "threephase",
         "rendering", "cli"]  # fmt: skip
BELOW = {
    layer: set(ORDER[:i]) - ({"language"} if layer == "equations" else set())
    for i, layer in enumerate(ORDER)
}
ONLY = {
    "rich": {"rendering", "cli"},
    "typer": {"cli"},
    "sympy": {"equations"},
    "flint": {"equations"},
}


def layer_of(path: Path) -> str:
    return path.relative_to(PACKAGE).parts[0].removesuffix(".py")


def imports(path: Path) -> Iterator[str]:
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            yield from (alias.name for alias in node.names)
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{path}: relative import"
            names = [alias.name for alias in node.names]
            yield from (
                [f"equiv.{n}" for n in names] if node.module == "equiv" else [str(node.module)]
            )


MODULES = [p for p in sorted(PACKAGE.rglob("*.py")) if layer_of(p) not in ("__init__", "__main__")]


@pytest.mark.parametrize("path", MODULES, ids=lambda p: str(p.relative_to(PACKAGE)))
def test_imports_go_down(path: Path) -> None:
    layer = layer_of(path)
    for name in imports(path):
        top = name.split(".")[0]
        if top == "equiv":
            other = name.split(".")[1] if "." in name else "__init__"
            if layer == "cli" and other in ("__init__", "__version__"):
                continue
            assert other == layer or other in BELOW[layer], f"{path.name} imports {name}"
        if top in ONLY:
            assert layer in ONLY[top], f"{path.name} imports {name}"


def test_rendering_sees_no_single_analysis() -> None:
    for path in (PACKAGE / "rendering").glob("*.py"):
        seen = {n for n in imports(path) if n.startswith("equiv.analyses.")}
        assert seen <= {"equiv.analyses.result", "equiv.analyses.tables"}, path.name


def test_analyses_see_no_files_and_no_printing() -> None:
    for layer in ("elements", "equations", "analyses", "rendering", "language"):
        for path in (PACKAGE / layer).glob("*.py"):
            for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
                called = node.func if isinstance(node, ast.Call) else None
                name = getattr(called, "id", "")
                assert name not in ("print", "exit", "eval", "exec"), path.name
                assert not (name == "open" and layer != "language"), path.name


def test_no_module_is_called_utils_and_none_is_long() -> None:
    for path in MODULES:
        assert "util" not in path.stem
        assert path.read_text(encoding="utf-8").count("\n") <= 320, path.name


@pytest.mark.parametrize("heavy", ["numpy", "scipy", "sympy", "rich", "decimal"])
def test_importing_the_package_is_light(heavy: str) -> None:
    code = f"import sys, equiv, equiv.cli; sys.exit('{heavy}' in sys.modules)"
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0


def test_a_small_superposition_needs_neither_scipy_nor_rich() -> None:
    code = (
        "import sys, equiv\n"
        "n = equiv.parse('voltage V +a -gnd 1 V\\nresistor R a gnd 1 ohm\\nfind I:R\\n')\n"
        "equiv.superpose(n).render()\n"
        "sys.exit(bool({'scipy', 'rich', 'sympy'} & set(sys.modules)))"
    )
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0
