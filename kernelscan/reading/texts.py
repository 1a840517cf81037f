"""Text as it may be shown or compared: one line, printable, and as plain words of any language."""

import re
import unicodedata

from kernelscan.plain_text import plain_text

__all__ = ["clean_text", "words"]

_PARTS = re.compile(r"[^\W\d_]+")
_HUMPS = re.compile(r"(?<=[a-z])(?=[A-Z])")
_BOUND_REFERENCE = re.compile(r"^.*(?:\$\d+\$|\|)")


def clean_text(text: str) -> str:
    """Return the text as one printable line; ordinary text comes back as it is, fast."""
    if text.isascii() and text.isprintable():
        return text.strip()
    return plain_text(text)


def words(name: str) -> tuple[str, ...]:
    """Return the words of a layer's or block's name: case-folded, without accents, digits and reference prefixes.

    ``x$0$A-WALL`` and ``site|A-WALL`` (parts of an external reference) give ``("a", "wall")``, ``RoomOutline2``
    gives ``("room", "outline")`` and ``Außenwände`` ``("aussenwande",)``.
    """
    own = _HUMPS.sub(" ", _BOUND_REFERENCE.sub("", name))
    decomposed = unicodedata.normalize("NFKD", own.casefold())
    return tuple(_PARTS.findall("".join(sign for sign in decomposed if not unicodedata.combining(sign))))
