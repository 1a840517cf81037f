"""Text from a drawing is data: what may go from it to a terminal, a sheet, a table or a file."""

import re
import unicodedata

__all__ = ["plain_text"]

# Marks that turn the direction of what follows them, and joiners that hide in a name.
_INVISIBLE = re.compile(
    "[\u00ad\u061c\u115f\u1160\u200b-\u200f\u202a-\u202e\u2060-\u206f\ufeff\ufff9-\ufffb]"
)
_SPACE = re.compile(r"\s+")


def plain_text(text: str, limit: int = 200) -> str:
    """Return one printable line: no control, direction or unpaired surrogate characters, at most ``limit`` long."""
    visible = _INVISIBLE.sub("", text)
    printable = "".join(
        " " if unicodedata.category(sign) in {"Cc", "Cs", "Co", "Cn"} else sign for sign in visible
    )
    line = _SPACE.sub(" ", printable).strip()
    return line if len(line) <= limit else line[: limit - 1].rstrip() + "…"
