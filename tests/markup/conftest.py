"""What the tests of the sheets share: golden scenes, and a real browser where there is one."""

import shutil
import subprocess
from collections.abc import Callable
from pathlib import Path

import pytest

GOLDEN = Path(__file__).parent / "golden"
BROWSERS = ("chromium", "chromium-browser", "google-chrome", "chrome")


@pytest.fixture
def golden(request: pytest.FixtureRequest) -> Callable[[str, str], None]:
    """Compare a text with the committed one of that name, or write it anew under ``--refresh-golden``."""

    def check(name: str, text: str) -> None:
        path = GOLDEN / f"{name}.txt"
        if request.config.getoption("--refresh-golden"):
            path.write_text(text, encoding="utf-8", newline="\n")
        assert text.splitlines() == path.read_text(encoding="utf-8").splitlines()

    return check


@pytest.fixture(scope="session")
def browser(tmp_path_factory: pytest.TempPathFactory) -> Callable[..., str]:
    """Run a browser without a window on a page, with more options, and return what it prints."""
    program = next(filter(None, map(shutil.which, BROWSERS)), None)
    if program is None:
        pytest.skip("no browser here to measure with")
    profile = tmp_path_factory.mktemp("browser")

    def run(page: Path, *options: str) -> str:
        command = [
            program, "--headless", "--no-sandbox", "--disable-gpu", "--no-first-run", "--disable-extensions",
            "--disable-background-networking", "--disable-quic", f"--user-data-dir={profile}", *options, page.as_uri(),
        ]  # fmt: skip
        done = subprocess.run(command, capture_output=True, encoding="utf-8", timeout=120, check=False)
        assert done.returncode == 0, done.stderr
        return done.stdout

    return run
