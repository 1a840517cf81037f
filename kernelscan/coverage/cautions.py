"""What every answer must be read with, chosen by the kinds of device; no edition is named and no approval claimed."""

from collections.abc import Iterable

__all__ = ["CAUTIONS", "cautions_for"]

PLAN_VIEW = (
    "Plan view only: heights, furniture, door leaves and anything not drawn are not taken into account."
)
CODES = (
    "Local fire and security codes, the device's listing and the authority having jurisdiction govern; "
    "where the law asks for licensed design or fitting, use it."
)
ON_SITE = "Verify on site before drilling: dimensions come from the drawing, not from the building."
CAMERA = (
    "Cameras: privacy law applies; keep private areas out of view and record no sound without a legal basis."
)
MOTION = (
    "Motion and presence sensors: their patterns have gaps, and small or slow movements may go unnoticed; "
    "follow the device's own data and walk-test it."
)
FIRE = (
    "Fire detection: sight of every wall is not detection; the fire code's spacing, the listing's range and the "
    "authority decide, and no alarm layout may rest on this plan alone."
)
SCANNER = (
    "Scanners: laser safety rules apply; glass, mirrors and what stands in the room leave gaps in the data."
)
CIRCULATION = "This plan shows what can and cannot be seen: restrict its circulation."

KINDS: dict[str, tuple[str, ...]] = {
    CAMERA: ("camera", "video", "dome"),
    MOTION: ("motion", "presence", "occupancy", "intrusion"),
    FIRE: ("flame", "smoke", "heat", "fire", "gas"),
    SCANNER: ("scan", "lidar", "laser"),
}
"""The words of a device's kind that bring a caution with them."""

CAUTIONS: tuple[str, ...] = (PLAN_VIEW, CODES, ON_SITE, *KINDS, CIRCULATION)
"""All of them, one sentence or two each, in the order they are printed."""


def cautions_for(kinds: Iterable[str]) -> tuple[str, ...]:
    """Return the cautions for devices of some kinds, free text: those for everybody and those of each kind.

    Where no kind is given, the device may be a camera.
    """
    told = [kind.casefold() for kind in kinds] or ["camera"]
    wanted = [text for text, words in KINDS.items() if any(word in kind for word in words for kind in told)]
    return PLAN_VIEW, CODES, ON_SITE, *wanted, CIRCULATION
