"""Text that fits: what comes from a drawing made harmless, cut to a width, or wrapped over several lines."""

from collections.abc import Iterable

from kernelscan.markup.metrics import text_width
from kernelscan.plain_text import plain_text

__all__ = ["LINE_PITCH", "clean_text", "cut_to", "wrapped"]

LINE_PITCH = 1.7
"""From baseline to baseline, in heights of a capital: the boxes of two lines stay apart."""

LONGEST = 120
ELLIPSIS = "…"


def clean_text(text: str) -> str:
    """Return text from outside as one printable line of at most 120 characters, never empty-looking by trickery."""
    return plain_text(text, LONGEST)


def cut_to(text: str, width: float, height: float, bold: bool = False) -> str:
    """Return the text, or as much of it as fits the width before an ellipsis; what is cut is seen to be cut."""
    if text_width(text, height, bold) <= width:
        return text
    return (
        text[: _fitting(text, width - text_width(ELLIPSIS, height, bold), height, bold)].rstrip() + ELLIPSIS
    )


def wrapped(
    text: str, width: float, height: float, bold: bool = False, most: int | None = None
) -> tuple[str, ...]:
    """Return the text broken into lines of at most ``width``, at spaces where it can, at most ``most`` of them."""
    lines = [""]
    for word in _pieces(text.split(), width, height, bold):
        longer = f"{lines[-1]} {word}".strip()
        if text_width(longer, height, bold) <= width:
            lines[-1] = longer
        else:
            lines.append(word)
    lines = [line for line in lines if line]
    if most is None or len(lines) <= most:
        return tuple(lines)
    rest = " ".join(lines[most - 1 :])
    return (*lines[: most - 1], cut_to(rest, width, height, bold))


def _pieces(words: Iterable[str], width: float, height: float, bold: bool) -> Iterable[str]:
    """Yield words, those that are wider than a line broken where they must be."""
    for word in words:
        rest = word
        while text_width(rest, height, bold) > width and len(rest) > 1:
            kept = max(1, _fitting(rest, width, height, bold))
            yield rest[:kept]
            rest = rest[kept:]
        yield rest


def _fitting(text: str, width: float, height: float, bold: bool) -> int:
    """Return how many characters of a text fit a width."""
    used = 0.0
    for count, character in enumerate(text):
        used += text_width(character, height, bold)
        if used > width:
            return count
    return len(text)
