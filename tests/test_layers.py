"""The layers of the package, as the contracts in pyproject.toml state them."""

import ast
from pathlib import Path

import pytest
from conftest import ROOT
from importlinter.cli import EXIT_STATUS_SUCCESS, lint_imports


def imported_by(path: Path) -> set[str]:
    """The first names of every module that a file imports, wherever in the file it does."""
    names = set()
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            names |= {alias.name.split(".")[0] for alias in node.names}
        elif isinstance(node, ast.ImportFrom) and node.module:
            names.add(node.module.split(".")[0])
    return names


def test_every_contract_is_kept():
    assert lint_imports(config_filename=str(ROOT / "pyproject.toml"), no_cache=True) == EXIT_STATUS_SUCCESS


@pytest.mark.parametrize(
    ("library", "homes"),
    [
        ("shapely", {"geometry/shapes.py"}),
        ("svgwrite", {"markup/svg.py"}),
        ("typer", {"cli/app.py", "cli/devices.py", "cli/options.py", "cli/rooms.py", "cli/zones.py"}),
    ],
)
def test_a_library_is_used_at_home_only(library, homes):
    package = ROOT / "kernelscan"
    users = {
        path.relative_to(package).as_posix() for path in package.rglob("*.py") if library in imported_by(path)
    }
    assert users == homes


def test_the_oracle_imports_nothing_of_the_package():
    assert "kernelscan" not in imported_by(ROOT / "tests" / "oracle.py")


def test_the_contracts_can_fail(tmp_path):
    """A contract that the package breaks is reported as broken."""
    config = tmp_path / "broken.toml"
    config.write_text(
        '[tool.importlinter]\nroot_packages = ["kernelscan"]\n[[tool.importlinter.contracts]]\nname = "upside down"\n'
        'type = "layers"\nlayers = ["kernelscan.errors", "kernelscan.cli"]\n',
        encoding="utf-8",
    )
    assert lint_imports(config_filename=str(config), no_cache=True) != EXIT_STATUS_SUCCESS
