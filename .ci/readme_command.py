"""Print one of the README's two commands, so that what is checked is what a reader copies."""

import re
import sys
from pathlib import Path

README = Path(__file__).resolve().parent.parent / "README.md"


def readme_command(name: str) -> str:
    """Return the one-line command in the README's code block marked ``<!-- command: NAME -->``."""
    pattern = rf"<!-- command: {re.escape(name)} -->\s*```sh\n(.+?)\n```"
    found = re.findall(pattern, README.read_text(encoding="utf-8"), flags=re.DOTALL)
    if len(found) != 1:
        raise SystemExit(f"README.md has {len(found)} commands marked {name!r}, expected one")
    return found[0]


if __name__ == "__main__":
    print(readme_command(sys.argv[1]))
