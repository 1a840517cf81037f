"""Why a drawing has no room, in words: an answer like any other, but one that a person wants explained."""

from collections import Counter

from kernelscan.plan import Plan

__all__ = ["no_room_reason"]

FAULTS = {
    "open-outline": "outlines that are open",
    "crossing-outline": "outlines that cross themselves",
    "degenerate-outline": "outlines without an area",
    "wide-gap": "gaps between walls that are too wide to close",
    "no-floor": "views that close no room or are sections",
}
"""What may keep rooms from being found, by the code of its problem."""


def no_room_reason(plan: Plan) -> str:
    """Return why no room was found, without a full stop: what the drawing shows, and the notes that may explain it."""
    codes = Counter(problem.code for problem in plan.problems)
    if not plan.linework:
        what = "the drawing shows no lines"
        return f"{what}; some of its layers are off or frozen" if codes["hidden-layer"] else what
    faults = [words for code, words in FAULTS.items() if codes[code]]
    told = f"; the notes tell of {' and '.join(faults)}" if faults else ""
    return f"{_lines_that_fail(plan)}{told}"


def _lines_that_fail(plan: Plan) -> str:
    """Return which lines were looked at, and that they close nothing."""
    outlines, walls = (
        ", ".join(use.layer for use in plan.layers if use.role == role and use.strokes)
        for role in ("room", "wall")
    )
    if "--room-layer" in plan.room_rule:
        return "no closed outline lies on the layers that --room-layer names"
    if any(problem.code == "open-plan" for problem in plan.problems):
        return "the walls close hardly anything, as in an open plan"
    if outlines:
        return f"no outline on {outlines} is closed" + (
            f", and the lines on {walls} close none" if walls else ""
        )
    if walls:
        return f"no layer outlines rooms, and the lines on {walls} and on door and window layers close none"
    return "no layer is named for rooms or walls, and no lines enclose a room's area"
