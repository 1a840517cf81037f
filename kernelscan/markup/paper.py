"""Paper and scales: the sheets an office has, the frame on them, and the scales a rule is cut for.

Sheet sizes are ISO 216 (A4 to A0) and, in feet and inches, ANSI/ASME Y14.1 (letter, or A, to E; the sizes from
memory). Margins are those of ISO 5457: 20 mm on the left, where a sheet is filed, and 10 mm elsewhere; on the ANSI
sizes the same margins are kept (common practice differs from office to office, no source). Scales are the 1, 2, 5
series of ISO 5455, of which 1:1 to 1:1000 are for buildings, or, in feet and inches, the customary architect's
scales down to 1/32" = 1'-0" and then the engineer's scales of whole feet to the inch (from memory).
"""

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import count

from kernelscan.errors import InputError
from kernelscan.markup.scene import Box

__all__ = [
    "ANSI_PAPERS",
    "ISO_PAPERS",
    "Paper",
    "Scale",
    "customary_scales",
    "largest_scale",
    "metric_scales",
    "paper_by_name",
    "scale_by_text",
    "usual_scales",
]

INCH = 25.4


@dataclass(frozen=True, slots=True)
class Paper:
    """A trimmed sheet; width and height in millimetres, as it lies on the table."""

    name: str
    width: float
    height: float

    @property
    def turned(self) -> "Paper":
        """The same sheet, the other way round."""
        return Paper(self.name, self.height, self.width)

    @property
    def orientation(self) -> str:
        """``landscape`` or ``portrait``."""
        return "landscape" if self.width > self.height else "portrait"

    @property
    def frame(self) -> Box:
        """The border of the drawing space: 20 mm from the left edge, 10 mm from the others (ISO 5457)."""
        return Box(20.0, 10.0, self.width - 10.0, self.height - 10.0)


ISO_PAPERS: tuple[Paper, ...] = (
    Paper("A4", 297, 210),
    Paper("A3", 420, 297),
    Paper("A2", 594, 420),
    Paper("A1", 841, 594),
    Paper("A0", 1189, 841),
)
"""ISO 216, small to large, landscape."""

ANSI_PAPERS: tuple[Paper, ...] = (
    Paper("letter", 11 * INCH, 8.5 * INCH),
    Paper("ANSI B", 17 * INCH, 11 * INCH),
    Paper("ANSI C", 22 * INCH, 17 * INCH),
    Paper("ANSI D", 34 * INCH, 22 * INCH),
    Paper("ANSI E", 44 * INCH, 34 * INCH),
)
"""ANSI/ASME Y14.1, small to large, landscape; the first is size A, letter."""

_OTHER_NAMES = {"ANSI A": "letter", "TABLOID": "ANSI B", "LEDGER": "ANSI B"}


def paper_by_name(name: str) -> Paper:
    """Return a sheet, landscape, by its name in any case: ``A3``, ``letter``, ``ANSI D``.

    Raises
    ------
    InputError
        When there is no such sheet; the text lists those there are.
    """
    papers = {paper.name.upper(): paper for paper in ISO_PAPERS + ANSI_PAPERS}
    wanted = " ".join(name.upper().split())
    wanted = _OTHER_NAMES.get(wanted, wanted).upper()
    if wanted not in papers:
        known = ", ".join(paper.name for paper in papers.values())
        raise InputError(f"paper: got {name!r}, expected one of {known}")
    return papers[wanted]


@dataclass(frozen=True, slots=True)
class Scale:
    """A scale: one on paper is ``denominator`` in the building, and how that is written."""

    denominator: float
    text: str

    @property
    def mm_per_metre(self) -> float:
        """How many millimetres on paper a metre is."""
        return 1000.0 / self.denominator


def metric_scales() -> Iterator[Scale]:
    """Yield 1:1, 1:2, 1:5, 1:10 and on without end, large scales first (ISO 5455)."""
    for power in count():
        for digit in (1, 2, 5):
            yield Scale(digit * 10**power, f"1:{digit * 10**power}")


def customary_scales() -> Iterator[Scale]:
    """Yield the architect's scales from 12" = 1'-0" to 1/32" = 1'-0", then the engineer's, without end."""
    inches = ("12", "6", "3", "1 1/2", "1", "3/4", "1/2", "3/8", "1/4", "3/16", "1/8", "3/32", "1/16", "1/32")
    for inch in inches:
        yield Scale(12 / _inches(inch), f'{inch}" = 1\'-0"')
    for power in count(1):
        for digit in (4, 5, 6, 10, 20, 30):
            feet = digit * 10**power
            yield Scale(12 * feet, f"1\" = {feet}'")


def usual_scales(imperial: bool) -> Iterator[Scale]:
    """Yield the scales of the one custom or the other, large ones first, without end."""
    return customary_scales() if imperial else metric_scales()


def _inches(text: str) -> float:
    """Return the value of an inch length written with a fraction, such as ``1 1/2``."""
    total = 0.0
    for part in text.split():
        numerator, _, denominator = part.partition("/")
        total += float(numerator) / float(denominator or 1)
    return total


def scale_by_text(text: str) -> Scale:
    """Return the scale written as ``1:50`` or, in feet and inches, as ``1/4" = 1'-0"`` or ``1/4``.

    Raises
    ------
    InputError
        When the text is no scale.
    """
    bare = text.replace(" ", "")
    try:
        if ":" in bare:
            numerator, _, denominator = bare.partition(":")
            value = float(denominator) / float(numerator)
            if 0 < value < float("inf"):
                return Scale(value, f"1:{value:g}")
        for scale in customary_scales():
            written = scale.text.replace(" ", "")
            if bare == written or bare.removesuffix('"') == written.partition('"')[0]:
                return scale
            if scale.denominator > 120_000:
                break
    except (ValueError, ZeroDivisionError):
        pass
    raise InputError(f'scale: got {text!r}, expected such as 1:50 or 1/4" = 1\'-0"')


def largest_scale(size: tuple[float, float], space: tuple[float, float], imperial: bool) -> Scale:
    """Return the largest usual scale at which a plan of ``size`` metres fits a space of millimetres.

    The series has no end, so there always is one as long as the space is not empty.
    """
    for scale in usual_scales(imperial):
        if all(each * scale.mm_per_metre <= room for each, room in zip(size, space, strict=True)):
            return scale
    raise AssertionError("the series of scales has no end")
