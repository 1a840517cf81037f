"""The graphic language: inks, pens and hatches, all in one place; ``docs/sheets.md`` shows it.

The inks of the zones come from the palette of Okabe and Ito, chosen so that people with the common colour-blindnesses
tell them apart; the pale ones are outlined in black (WCAG 2.2, 1.4.11 asks for 3:1), and nothing rests on colour
alone: each kind has a hatch angle, a spacing and a letter of its own (1.4.1), so a grey print says the same. Pens are
of the series 0.18, 0.25, 0.35, 0.5, 0.7, 1 mm, each the root of two wider than the last (ISO 128).
"""

from dataclasses import dataclass

from kernelscan.coverage import Mount
from kernelscan.markup.scene import Pen

__all__ = [
    "ARROW_PEN",
    "BLACK",
    "BODY",
    "CEILING_EDGE_PEN",
    "CONFLICT_LETTERS",
    "CONFLICT_PEN",
    "CORNER_RADIUS",
    "DEGENERATE_PEN",
    "DIMENSION_PEN",
    "FRAME_PEN",
    "HEADING",
    "LEADER_PEN",
    "LINEWORK_PEN",
    "MARKS",
    "MATCH_PEN",
    "OBSTACLE_INK",
    "OBSTACLE_PEN",
    "PALE",
    "QUIET",
    "ROOM_PEN",
    "RULE_PEN",
    "SMALLEST_TEXT",
    "SYMBOL_PEN",
    "SYMBOL_RADIUS",
    "TABLE_PEN",
    "WALL_BAND",
    "WHITE",
    "ZONE_EDGE_PEN",
    "Mark",
]

BLACK = "#000000"
WHITE = "#ffffff"
QUIET = "#595959"
"""For labels of fields and the like: 7:1 on white."""
PALE = "#b3b3b3"
"""For the drawing's own linework, behind everything."""
OBSTACLE_INK = "#d9d9d9"

SMALLEST_TEXT = 2.5
"""Height of capitals in millimetres below which nothing is lettered (the smallest usual height of ISO 3098)."""
BODY = SMALLEST_TEXT
HEADING = 3.5


@dataclass(frozen=True, slots=True)
class Mark:
    """How one kind of zone is drawn.

    Attributes
    ----------
    letter, word
        The tag of its points, and the kind as the schedule says it.
    ink
        Of its hatch and the core of its symbol.
    angle, spacing
        Of its hatch, in degrees and millimetres.
    """

    letter: str
    word: str
    ink: str
    angle: float
    spacing: float

    @property
    def hatch_pen(self) -> Pen:
        """The pen of the hatch."""
        return Pen(0.25, self.ink)


MARKS: dict[Mount, Mark] = {
    "ceiling": Mark("C", "ceiling", "#0072b2", 45.0, 3.0),
    "wall": Mark("W", "wall", "#d55e00", 135.0, 1.2),
    "corner": Mark("K", "corner", "#009e73", 15.0, 0.7),
}
"""C for the ceiling, W for a wall, K for a corner."""

ROOM_PEN = Pen(0.5)
OBSTACLE_PEN = Pen(0.35)
LINEWORK_PEN = Pen(0.18, PALE)
CEILING_EDGE_PEN = Pen(0.35, MARKS["ceiling"].ink, (4.0, 1.0, 0.6, 1.0))
DEGENERATE_PEN = Pen(0.7, MARKS["ceiling"].ink, (4.0, 1.0, 0.6, 1.0))
ZONE_EDGE_PEN = Pen(0.25)
CONFLICT_PEN = Pen(1.0, BLACK, (3.0, 1.5))
ARROW_PEN = Pen(0.35)
SYMBOL_PEN = Pen(0.35)
LEADER_PEN = Pen(0.25)
MATCH_PEN = Pen(0.7, BLACK, (12.0, 2.0, 2.0, 2.0))
DIMENSION_PEN = Pen(0.25)
FRAME_PEN = Pen(0.7)
TABLE_PEN = Pen(0.18)
RULE_PEN = Pen(0.35)

WALL_BAND = 1.8
"""How wide the band of a wall zone is on paper, in millimetres."""
CORNER_RADIUS = 5.0
"""Radius of the sector that shows a corner zone, in millimetres."""
SYMBOL_RADIUS = 2.2
"""Radius of the symbol of a recommended point, in millimetres."""
CONFLICT_LETTERS = "ABC"
