"""Sizes that labels state: ``12'0 x 14'6``, ``4,20 x 3,60 m``, ``39.4 m2``, ``120 sq ft``; everything else is none."""

import re
from dataclasses import dataclass

from kernelscan.reading.texts import clean_text

__all__ = ["StatedSize", "length_in_feet", "stated_size"]

FOOT = 0.3048


@dataclass(frozen=True, slots=True)
class StatedSize:
    """A size as a label gives it.

    Attributes
    ----------
    area
        In square metres.
    sides
        Width and depth in metres, where the label gives those.
    text
        The label's own words.
    sure
        Whether the label names its unit; bare numbers such as ``4.20 x 3.60`` are taken for metres.
    """

    area: float
    sides: tuple[float, float] | None
    text: str
    sure: bool = True


_INCHES = r"(?P<{0}i>\d+(?:\.\d+)?)(?:\s+(?P<{0}n>\d+)/(?P<{0}d>\d+))?\s*(?:[\"”″]|'')?"
_FEET = r"(?P<{0}f>\d+(?:\.\d+)?)\s*['’′]\s*-?\s*(?:" + _INCHES + ")?"
_FEET_PAIR = re.compile(rf"^\W*{_FEET.format('a')}\s*[x×X]\s*{_FEET.format('b')}\W*$")
_ONE_LENGTH = re.compile(rf"^\W*{_FEET.format('a')}\W*$")
_DIGIT = re.compile(r"\d")
_NUMBER = r"\d+(?:[.,]\d+)?"
_METRE_PAIR = re.compile(rf"^\W*({_NUMBER})\s*(mm|cm|m)?\s*[x×X]\s*({_NUMBER})\s*(mm|cm|m)?\W*$")
_AREA_UNIT = r"m2|m²|m\^2|sq\.?\s*m|qm|mq|sqm|sq\.?\s*ft\.?|sqft|s\.?f\.?|ft2|ft²"
_AREA = re.compile(rf"^(?:[^\d]{{0,12}}[:=]?\s*)?({_NUMBER})\s*({_AREA_UNIT})\.?\W*$", re.IGNORECASE)
_BARE_AREA = re.compile(
    rf"^(?:a|area|fläche|nf|ngf|surface|superficie|sup)\.?\s*[:=]\s*({_NUMBER})\W*$", re.IGNORECASE
)
_SQUARE_FEET = re.compile(r"f", re.IGNORECASE)
_IN_METRES = {"mm": 0.001, "cm": 0.01, "m": 1.0, None: 1.0}


def stated_size(text: str) -> StatedSize | None:
    """Return the size that one line of a label states, or ``None`` when it states none."""
    if _DIGIT.search(text) is None:
        return None
    line = clean_text(text)
    return _feet(line) or _metres(line) or _area(line)


def length_in_feet(text: str) -> float | None:
    """Return a length written in feet and inches, such as ``7'-4 1/2"``, in metres; ``None`` for other text."""
    match = _ONE_LENGTH.match(clean_text(text))
    return _feet_value(match, "a") if match else None


def _feet(line: str) -> StatedSize | None:
    match = _FEET_PAIR.match(line)
    if match is None:
        return None
    sides = _feet_value(match, "a"), _feet_value(match, "b")
    return StatedSize(sides[0] * sides[1], sides, line)


def _feet_value(match: re.Match[str], side: str) -> float:
    feet, inches, over, under = (float(match[side + part] or 0) for part in "find")
    return (feet + (inches + (over / under if under else 0.0)) / 12) * FOOT


def _metres(line: str) -> StatedSize | None:
    match = _METRE_PAIR.match(line)
    if match is None:
        return None
    unit = match[4] or match[2]
    scale = _IN_METRES[unit]
    sides = _number(match[1]) * scale, _number(match[3]) * scale
    return StatedSize(sides[0] * sides[1], sides, line, unit is not None)


def _area(line: str) -> StatedSize | None:
    match = _AREA.match(line)
    if match:
        square_feet = _SQUARE_FEET.search(match[2])
        return StatedSize(_number(match[1]) * (FOOT**2 if square_feet else 1.0), None, line)
    bare = _BARE_AREA.match(line)
    return StatedSize(_number(bare[1]), None, line, False) if bare else None


def _number(text: str) -> float:
    return float(text.replace(",", "."))
