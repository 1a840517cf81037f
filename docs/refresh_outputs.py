"""Runs the commands that some pages show, and writes what they print under them.

``python docs/refresh_outputs.py`` does so in place, or into the folder given as only argument. A block that begins
with ``$ kernelscan`` holds a command and its output; each runs in an empty folder that has a copy of the sample plans,
of one of them without its unit, and the last device file that devices.md shows, as slips.toml.
"""

import os
import re
import shlex
import shutil
import subprocess
import sys
from pathlib import Path
from tempfile import TemporaryDirectory

__all__ = ["main", "with_fresh_outputs"]

HERE = Path(__file__).resolve().parent
PAGES = ("devices.md", "getting-started.md")
BLOCK = re.compile(r"```console\n\$ (kernelscan [^\n]+)\n.*?```", re.DOTALL)
DEVICE_FILE = re.compile(r"```toml\n(.*?)```", re.DOTALL)
UNIT = re.compile(rb"(\$INSUNITS\s+70\s+)4")


def with_fresh_outputs(text: str, folder: Path) -> str:
    """Return a page with the output of each command in it as it is now."""
    return BLOCK.sub(lambda block: f"```console\n$ {block[1]}\n{_output(block[1], folder)}```", text)


def _output(command: str, folder: Path) -> str:
    arguments = [sys.executable, "-m", *shlex.split(command)]
    plain = {name: value for name, value in os.environ.items() if name != "FORCE_COLOR"} | {"PYTHONUTF8": "1"}
    run = subprocess.run(arguments, cwd=folder, env=plain, capture_output=True, encoding="utf-8", check=False)
    lines = [line.rstrip() for line in (run.stdout + run.stderr).splitlines()]
    return "".join(f"{line}\n" for line in lines)


def main(target: Path) -> None:
    """Write the pages anew into a folder."""
    pages = {name: (HERE / name).read_text(encoding="utf-8") for name in PAGES}
    with TemporaryDirectory() as folder:
        plans = Path(folder, "sample_plans")
        shutil.copytree(
            HERE.parent / "sample_plans", plans, ignore=shutil.ignore_patterns("*.py", "__pycache__")
        )
        drawing = (plans / "workshop-ground-floor.dxf").read_bytes()
        Path(folder, "no-unit.dxf").write_bytes(UNIT.sub(rb"\g<1>0", drawing))
        slips = DEVICE_FILE.findall(pages["devices.md"])[-1]
        Path(folder, "slips.toml").write_text(slips, encoding="utf-8")
        for name, page in pages.items():
            fresh = with_fresh_outputs(page, Path(folder))
            (target / name).write_text(fresh, encoding="utf-8", newline="\n")


if __name__ == "__main__":
    main(Path(sys.argv[1]) if len(sys.argv) > 1 else HERE)
