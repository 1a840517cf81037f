"""Check everything: tests with the coverage floor, lint, formatting, strict types and layer contracts.

Run it with the Python of an environment that has ``.[dev]``; ``--without-tests`` leaves the tests out.
"""

import subprocess
import sys
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent
TESTS = ("tests and coverage", ["-m", "pytest", "--cov", "-n", "auto"])
CHECKS = (
    ("lint", ["-m", "ruff", "check", "."]),
    ("formatting", ["-m", "ruff", "format", "--check", "."]),
    ("types", ["-m", "mypy"]),
    ("layers", ["-c", "from importlinter.cli import lint_imports_command as c; c(['--no-cache'])"]),
)


def main() -> int:
    """Run each check, all of them even when one fails, and return how many failed."""
    wanted = CHECKS if "--without-tests" in sys.argv[1:] else (TESTS, *CHECKS)
    failed = [name for name, arguments in wanted if _fails(name, arguments)]
    print("failed: " + ", ".join(failed) if failed else "every check passed")
    return len(failed)


def _fails(name: str, arguments: list[str]) -> bool:
    print(f"== {name}", flush=True)
    return subprocess.run([sys.executable, *arguments], cwd=ROOT, check=False).returncode != 0


if __name__ == "__main__":
    sys.exit(main())
