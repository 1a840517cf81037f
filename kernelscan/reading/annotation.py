"""Text entities into labels, and dimensions into what they measure."""

from collections.abc import Iterator
from math import cos, isfinite, radians, sin

from ezdxf.entities.attrib import Attrib
from ezdxf.entities.dimension import Dimension
from ezdxf.entities.dxfentity import DXFEntity
from ezdxf.entities.mtext import MText
from ezdxf.entities.text import Text
from ezdxf.enums import TextEntityAlignment as Align
from ezdxf.tools.text import plain_mtext

from kernelscan.reading.strokes import Label, MeasuredDimension
from kernelscan.reading.texts import clean_text

__all__ = ["dimension_of", "label_of"]

SIGN_WIDTH = 0.75
"""About how wide a letter is, as a part of its height; only the middle of a label is found with it."""

LINE_PITCH = 1.6
"""About how far apart the lines of an MTEXT are, as a part of the letters' height."""


def label_of(entity: DXFEntity, layer: str) -> Label | None:
    """Return the label that a TEXT, MTEXT or ATTRIB makes, or ``None`` if it says nothing."""
    mirror = -1.0 if entity.dxf.hasattr("extrusion") and entity.dxf.extrusion.z < 0 else 1.0
    if isinstance(entity, MText):
        return _paragraph(entity, layer, mirror)
    return _single_line(entity, layer, mirror) if isinstance(entity, Text) else None


def _single_line(entity: Text, layer: str, mirror: float) -> Label | None:
    if isinstance(entity, Attrib) and entity.is_invisible:
        return None
    raw = entity.dxf.text
    text = clean_text(entity.plain_text() if "%%" in raw or "^" in raw else raw)
    height = float(entity.dxf.height)
    wide = len(text) * height * SIGN_WIDTH
    if not (entity.dxf.hasattr("halign") or entity.dxf.hasattr("valign")):
        name, place = "LEFT", entity.dxf.insert
    else:
        align, place, second = entity.get_placement()
        name = align.name
        if second is not None and align in {Align.ALIGNED, Align.FIT}:
            place = place.lerp(second)
    across, up = _offsets(name)
    return _label(
        (text,),
        (place.x * mirror, place.y),
        entity.dxf.rotation,
        across * wide,
        up * height,
        height,
        entity,
        layer,
    )


def _paragraph(entity: MText, layer: str, mirror: float) -> Label | None:
    lines = [clean_text(line) for line in plain_mtext(entity.text, split=True)]
    height = float(entity.dxf.char_height)
    wide = max((len(line) for line in lines), default=0) * height * SIGN_WIDTH
    column = (entity.dxf.attachment_point - 1) % 3
    row = (entity.dxf.attachment_point - 1) // 3
    across = (0.5, 0.0, -0.5)[column] * wide
    up = (-0.5, 0.0, 0.5)[min(row, 2)] * height * LINE_PITCH * len(lines)
    insert = entity.dxf.insert
    angle = entity.get_rotation()
    return _label(tuple(lines), (insert.x * mirror, insert.y), angle, across, up, height, entity, layer)


def _offsets(alignment: str) -> tuple[float, float]:
    """Return where the middle lies from the alignment point, in widths and heights."""
    across = 0.5 if "LEFT" in alignment else -0.5 if "RIGHT" in alignment else 0.0
    up = -0.5 if "TOP" in alignment else 0.0 if "MIDDLE" in alignment else 0.5
    return across, up


def _label(
    lines: tuple[str, ...],
    place: tuple[float, float],
    degrees: float,
    across: float,
    up: float,
    height: float,
    entity: DXFEntity,
    layer: str,
) -> Label | None:
    said = tuple(line for line in lines if line)
    cosine, sine = (cos(radians(degrees)), sin(radians(degrees))) if degrees else (1.0, 0.0)
    x = place[0] + across * cosine - up * sine
    y = place[1] + across * sine + up * cosine
    if not said or not all(map(isfinite, (*place, x, y, height))):
        return None
    return Label(said, (x, y), place, height, layer, entity.dxf.handle or "")


def dimension_of(entity: Dimension) -> Iterator[MeasuredDimension]:
    """Return what a linear dimension measures, in drawing units; none for angles and for broken ones."""
    if entity.dimtype not in (0, 1):
        return
    measured = entity.get_measurement()
    if isinstance(measured, float) and isfinite(measured) and measured > 0:
        text = clean_text(entity.dxf.get("text", "") or "")
        yield MeasuredDimension(measured, text, clean_text(entity.dxf.layer), entity.dxf.handle or "")
