"""What every answer must be read with; the wording names no edition and claims no approval."""

__all__ = ["CAUTIONS"]

CAUTIONS: tuple[str, ...] = (
    "Plan view only: heights, furniture, door leaves and anything not drawn are not taken into account.",
    "Local fire and security codes, the device's listing and the authority having jurisdiction govern; "
    "where the law asks for licensed design or fitting, use it.",
    "Verify on site before drilling: dimensions come from the drawing, not from the building.",
    "Cameras: privacy law applies; keep private areas out of view and record no sound without a legal basis.",
    "This plan shows what can and cannot be seen: restrict its circulation.",
)
"""One sentence or two each, in the order they are printed."""
