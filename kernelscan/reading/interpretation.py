"""A drawing's contents into rooms, for a unit: outlines first, then walls by name, then walls by content.

Rule
    1. Closed outlines on layers named for rooms, by option or by convention.
    2. What the lines on layers named for walls, doors and windows enclose.
    3. By content, what double lines enclose, if that is more than is outlined on layers whose names say nothing;
    4. else those outlines; else what all lines enclose.
The first that gives a room is used, and the sentence says which.
"""

from collections import Counter
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

from kernelscan.plan import LayerUse, Problem
from kernelscan.reading.closed_rooms import FoundRoom, chosen_outlines
from kernelscan.reading.furnished import furnished_outlines, furnished_walls
from kernelscan.reading.layers import LayerPatterns, LayerRole, layer_role
from kernelscan.reading.loose_rooms import barriers_by_content, barriers_by_name, loose_rooms
from kernelscan.reading.outlines import closed_outlines, open_outline_problems
from kernelscan.reading.strokes import Contents
from kernelscan.reading.wall_layers import double_layers
from kernelscan.tolerances import Tolerances

__all__ = ["Interpretation", "interpretation"]

BY_NAMED_WALLS = "No room is outlined; rooms are what the lines on wall, door and window layers enclose."
OPEN_PLAN = "No room is outlined, and the lines on wall, door and window layers close none: an open plan."
BY_DOUBLE_LINES = (
    "No layer is named for rooms or walls, so by content: rooms are what the double lines on {} enclose."
)
BY_LINES = (
    "No room is outlined and no layer is named for walls, so by content: rooms are what all lines enclose."
)


@dataclass(frozen=True, slots=True, eq=False)
class Interpretation:
    """What does not depend on the unit: the contents, the layers' roles, the options."""

    contents: Contents
    roles: Mapping[str, LayerRole]
    patterns: LayerPatterns
    tolerances: Tolerances

    def rooms(self, metres: float) -> tuple[list[FoundRoom], str, list[Problem]]:
        """Return the rooms, the rule by which they were taken, and the problems, for a unit of so many metres."""
        strokes = self.contents.strokes
        outlines, faults = closed_outlines(strokes, metres, self.tolerances.snap)
        obstacles = [outline for outline in outlines if self.roles[outline.stroke.layer].role == "obstacle"]
        parts = [stroke for stroke in strokes if self.roles[stroke.layer].role == "room"]
        gaps = open_outline_problems(parts, metres, self.tolerances.snap)
        faults = [
            fault
            for fault in faults
            if self.roles[fault.source.layer].role in {"room", "obstacle", "unknown"}
        ]
        by_option = bool(self.patterns.rooms)
        chosen, rule, problems = chosen_outlines(outlines, self.roles, by_option, self.tolerances)
        if not by_option and not any(part.is_ring(self.tolerances.snap / metres) for part in parts):
            loose = self._loose(metres, len(chosen))
            if loose is not None:
                found, more = furnished_walls(
                    loose[0], obstacles, strokes, self.roles, metres, self.tolerances
                )
                return found, loose[1], [*gaps, *loose[2], *more]
        found, more = furnished_outlines(chosen, obstacles, strokes, self.roles, metres, self.tolerances)
        return found, rule, [*faults, *gaps, *problems, *more]

    def _loose(self, metres: float, outlined: int) -> tuple[list[FoundRoom], str, list[Problem]] | None:
        """Return the rooms that loose lines enclose, by names, else by content.

        By content only if there are more of them than are outlined; ``None`` means: keep to those.
        """
        strokes = self.contents.strokes
        named = barriers_by_name(strokes, self.roles)
        found, problems = loose_rooms(named, self.contents.labels, metres, self.tolerances)
        codes = {problem.code for problem in problems}
        if found or codes & {"open-plan", "too-dense"}:
            return found, OPEN_PLAN if "open-plan" in codes else BY_NAMED_WALLS, problems
        every = barriers_by_content(strokes, self.roles, metres, self.tolerances)
        layers = double_layers(every.walls, metres, self.tolerances)
        if layers:
            walls = replace(every, walls=[stroke for stroke in every.walls if stroke.layer in layers])
            found, problems = loose_rooms(walls, self.contents.labels, metres, self.tolerances)
            if len(found) > outlined:
                return found, BY_DOUBLE_LINES.format(", ".join(sorted(layers))), problems
        if outlined:
            return None
        found, problems = loose_rooms(every, self.contents.labels, metres, self.tolerances)
        return found, BY_LINES, problems

    def layer_uses(self) -> tuple[LayerUse, ...]:
        """Return the role of each layer, the reason, and how much lies on it."""
        count = Counter(stroke.layer for stroke in self.contents.strokes)
        roles = [self.roles[layer] for layer in sorted(self.contents.layers())]
        return tuple(LayerUse(its.layer, its.role, its.reason, count[its.layer]) for its in roles)

    def areas(self, metres: float) -> Sequence[float]:
        """Return the areas of the rooms under a unit."""
        return [found.outline.area for found in self.rooms(metres)[0]]


def interpretation(contents: Contents, patterns: LayerPatterns, tolerances: Tolerances) -> Interpretation:
    """Give each layer its role, and each block, by the same words, and be ready to look for rooms."""
    roles = {s.blocks: layer_role(s.blocks, LayerPatterns()) for s in contents.strokes if s.blocks}
    roles |= {layer: layer_role(layer, patterns) for layer in contents.layers()}
    return Interpretation(contents, roles, patterns, tolerances)
