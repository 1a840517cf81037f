"""What every test may ask for."""

from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parent.parent


def pytest_addoption(parser: pytest.Parser) -> None:
    parser.addoption("--refresh-golden", action="store_true", help="write the golden files anew")


def _outside(folder: str) -> Path:
    path = ROOT.parent / "shared" / folder
    if not path.is_dir():
        pytest.skip(f"the outside drawings of {folder}/ are not here")
    return path


@pytest.fixture(scope="session")
def shared_plans() -> Path:
    """Real plans by outsiders; they are not part of the project."""
    return _outside("plans")


@pytest.fixture(scope="session")
def shared_odd() -> Path:
    """Drawings that are not plans; they are not part of the project."""
    return _outside("odd")


@pytest.fixture(scope="session")
def sample_plans() -> Path:
    """The project's own invented drawings."""
    return ROOT / "sample_plans"
