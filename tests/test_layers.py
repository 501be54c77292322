"""Imports go one way, and none of them costs what it need not."""

from __future__ import annotations

import ast
import subprocess
import sys
from pathlib import Path

import pytest

import sheetgen

PACKAGE = Path(sheetgen.__file__).parent
# Each layer may import those before it. Units and physics know of no records.
LAYERS = [
    {"faults"},
    {"physics"},
    {"records"},
    {"quantities"},
    {"uncertainty", "draws"},
    {"standing", "lookup"},
    {"sheet"},
    {"handbook"},
    {"documents"},
    {"errata"},
    {"figures"},
    {"pages"},
    {"paper"},
    {"press", "quote", "terminal", "drafting", "errata_lines", "sarif"},
    {"galley"},
    {"cli"},
    {"__main__"},
]
LEVEL = {name: level for level, names in enumerate(LAYERS) for name in names}
MODULES = sorted(PACKAGE.rglob("*.py"))


def imported_layers(module: Path) -> set[str]:
    """Names of our layers that a module imports when it runs; what only a type checker reads does not count."""
    names = set()
    for node in _running(ast.parse(module.read_text(encoding="utf-8"))):
        if isinstance(node, ast.ImportFrom) and node.module and node.level == 0:
            names |= {node.module} | {f"{node.module}.{alias.name}" for alias in node.names}
        elif isinstance(node, ast.Import):
            names |= {alias.name for alias in node.names}
    return {parts[1] for name in names if (parts := name.split("."))[0] == "sheetgen" and len(parts) > 1} & set(LEVEL)


def _running(node: ast.AST):
    for child in ast.iter_child_nodes(node):
        if not (isinstance(child, ast.If) and ast.unparse(child.test) == "TYPE_CHECKING"):
            yield child
            yield from _running(child)


@pytest.mark.parametrize("module", MODULES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_module_imports_only_layers_below_its_own(module):
    layer = module.relative_to(PACKAGE).parts[0].removesuffix(".py")
    if layer == "__init__":
        assert imported_layers(module) == set()
        return
    above = {name for name in imported_layers(module) if LEVEL[name] > LEVEL[layer]}
    assert above == set()


def test_importing_the_package_reads_no_file_and_loads_nothing():
    program = (
        "import sys\n"
        "before = set(sys.modules)\n"
        "opened = []\n"
        "sys.addaudithook(lambda event, details: opened.append(str(details[0])) if event == 'open' else None)\n"
        "import sheetgen\n"
        "loaded = {name.split('.')[0] for name in set(sys.modules) - before} - {'sheetgen'}\n"
        "print(sorted(loaded), [name for name in opened if not name.endswith(('.py', '.pyc'))])\n"
    )
    run = subprocess.run([sys.executable, "-c", program], capture_output=True, text=True, check=True)
    assert run.stdout == "[] []\n"


def test_deriving_a_handbook_loads_no_drawing_and_no_pages(small_handbook):
    program = (
        "import sys\n"
        "from sheetgen.handbook import Handbook\n"
        f"Handbook.load({str(small_handbook)!r})\n"
        "heavy = ('matplotlib', 'jinja2', 'sheetgen.pages', 'sheetgen.figures')\n"
        "print([name for name in heavy if name in sys.modules])\n"
    )
    run = subprocess.run([sys.executable, "-c", program], capture_output=True, text=True, check=True)
    assert run.stdout == "[]\n"
