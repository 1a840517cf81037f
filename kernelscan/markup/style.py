"""The graphic language: inks, pens and hatches, all in one place; ``docs/sheets.md`` shows it.

The inks of the zones come from the palette of Okabe and Ito, chosen so that people with the common colour-blindnesses
tell them apart; the pale ones are outlined in black (WCAG 2.2, 1.4.11 asks for 3:1), and nothing rests on colour
alone: each kind has a hatch angle, a spacing and a letter of its own (1.4.1), so a grey print says the same. Pens are
of the series 0.18, 0.25, 0.35, 0.5, 0.7, 1 mm, each the root of two wider than the last (ISO 128).
"""

from dataclasses import dataclass

from kernelscan.markup.scene import Pen
from kernelscan.plan import Fixing

__all__ = [
    "AIM_LENGTH",
    "AIM_PEN",
    "AREA_DASHES",
    "ARROW_PEN",
    "BLACK",
    "BODY",
    "CONFLICT_LETTERS",
    "CONFLICT_PEN",
    "CORNER_RADIUS",
    "DIMENSION_PEN",
    "FEATURE_ANGLES",
    "FEATURE_EDGE_PEN",
    "FEATURE_PEN",
    "FEATURE_SPACING",
    "FRAME_PEN",
    "HEADING",
    "HIDDEN_ANGLE",
    "HIDDEN_PEN",
    "HIDDEN_SPACING",
    "HORIZON_PEN",
    "LEADER_PEN",
    "LINEWORK_PEN",
    "MARKS",
    "MATCH_PEN",
    "OBSTACLE_INK",
    "OBSTACLE_PEN",
    "PALE",
    "PARTIAL_PEN",
    "QUIET",
    "ROOM_PEN",
    "RULE_PEN",
    "SMALLEST_TEXT",
    "SYMBOL_PEN",
    "SYMBOL_RADIUS",
    "TABLE_PEN",
    "TRIED_LETTER",
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


AREA_DASHES = (4.0, 1.0, 0.6, 1.0)
"""Of the border of a zone in plan."""


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

    @property
    def edge_pen(self) -> Pen:
        """The pen of the border of a zone in plan."""
        return Pen(0.35, self.ink, AREA_DASHES)

    @property
    def line_pen(self) -> Pen:
        """The pen of a zone in plan that is no more than a line."""
        return Pen(0.7, self.ink, AREA_DASHES)


MARKS: dict[Fixing, Mark] = {
    "ceiling": Mark("C", "ceiling", "#0072b2", 45.0, 3.0),
    "wall": Mark("W", "wall", "#d55e00", 135.0, 1.2),
    "corner": Mark("K", "corner", "#009e73", 15.0, 0.7),
    "floor": Mark("S", "stand", "#cc79a7", 75.0, 2.0),
}
"""C for the ceiling, W for a wall, K for a corner, S for a stand on the floor."""

ROOM_PEN = Pen(0.5)
OBSTACLE_PEN = Pen(0.35)
LINEWORK_PEN = Pen(0.18, PALE)
ZONE_EDGE_PEN = Pen(0.25)
CONFLICT_PEN = Pen(1.0, BLACK, (3.0, 1.5))
ARROW_PEN = Pen(0.35)
SYMBOL_PEN = Pen(0.35)
PARTIAL_PEN = Pen(0.35, BLACK, (0.9, 0.6))
FEATURE_PEN = Pen(0.18)
FEATURE_EDGE_PEN = Pen(0.35, BLACK, (1.2, 0.6))
HIDDEN_PEN = Pen(0.18, BLACK, (1.5, 0.8))
AIM_PEN = Pen(0.35)
HORIZON_PEN = Pen(0.18, BLACK, (2.0, 0.8))
LEADER_PEN = Pen(0.25)
MATCH_PEN = Pen(0.7, BLACK, (12.0, 2.0, 2.0, 2.0))
DIMENSION_PEN = Pen(0.25)
FRAME_PEN = Pen(0.7)
TABLE_PEN = Pen(0.18)
RULE_PEN = Pen(0.35)

WALL_BAND = 1.8
"""How wide the band of a wall zone is on paper, in millimetres."""
FEATURE_ANGLES, FEATURE_SPACING = (45.0, 135.0), 0.8
"""Of the cross hatch over a small feature that was left out, in degrees and millimetres."""
HIDDEN_ANGLE, HIDDEN_SPACING = 90.0, 1.6
"""Of the hatch over floor that the best point tried does not see."""
AIM_LENGTH = 8.0
"""From the point of a device to the tip of the arrow that shows its aim, in millimetres."""
CORNER_RADIUS = 5.0
"""Radius of the sector that shows a corner zone, in millimetres."""
SYMBOL_RADIUS = 2.2
"""Radius of the symbol of a recommended point, in millimetres."""
CONFLICT_LETTERS = "ABC"
TRIED_LETTER = "T"
"""Of the best point tried where none sees every wall."""
