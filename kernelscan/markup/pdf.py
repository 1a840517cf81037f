"""PDF: the same scene for a print shop, one page a sheet, lines as lines and text as text.

A millimetre of paper is a millimetre of the page, whose origin is at the lower left as the scene's is. The library is
an extra: ``pip install "kernelscan[pdf]"``. Latin text is set in Helvetica, which every reader has and whose widths
are those the scene has measured with. Other text is set in the first of a few common typefaces on this machine that
has all its characters, squeezed or spread to the measured width; characters that none of them has come out as
question marks.
"""

import io
from collections.abc import Sequence
from functools import cache
from importlib.util import find_spec
from math import degrees
from typing import TYPE_CHECKING, Any

from kernelscan.errors import InputError
from kernelscan.markup.metrics import font_size
from kernelscan.markup.scene import Fill, Hatch, Item, Pen, Point, Scene, Stroke, Text
from kernelscan.markup.text import clean_text

if TYPE_CHECKING:
    from reportlab.pdfgen.canvas import Canvas

__all__ = ["check_library", "pdf_bytes"]

MISSING = 'PDF needs one more library: pip install "kernelscan[pdf]"'
POINTS_PER_MM = 72 / 25.4
BASE_FONTS = {False: "Helvetica", True: "Helvetica-Bold"}
FONT_FILES = {
    False: ("LiberationSans-Regular", "DejaVuSans", "arial", "Arial", "ArialUnicode", "NotoSans-Regular"),
    True: ("LiberationSans-Bold", "DejaVuSans-Bold", "arialbd", "Arial Bold", "NotoSans-Bold"),
}
"""Where characters beyond the Latin ones are looked for, by file name, in the system's font folders."""


def check_library() -> None:
    """Raise ``InputError`` where the library is not installed, before any work is done for it."""
    if find_spec("reportlab") is None:
        raise InputError(MISSING)


def pdf_bytes(scenes: Sequence[Scene]) -> bytes:
    """Return a PDF with a page for each scene, without dates: the same scenes give the same bytes.

    Raises
    ------
    InputError
        When the library is not installed.
    """
    check_library()
    from reportlab.pdfgen.canvas import Canvas

    stream = io.BytesIO()
    canvas = Canvas(stream, invariant=1, pageCompression=1)
    if scenes:
        canvas.setTitle(clean_text(scenes[0].title))
        canvas.setSubject(clean_text(scenes[0].description))
    for scene in scenes:
        canvas.setPageSize((scene.width * POINTS_PER_MM, scene.height * POINTS_PER_MM))
        canvas.scale(POINTS_PER_MM, POINTS_PER_MM)
        canvas.setLineJoin(1)
        for item in scene.items():
            _draw(canvas, item)
        canvas.showPage()
    canvas.save()
    return stream.getvalue()


def _draw(canvas: "Canvas", item: Item) -> None:
    match item:
        case Stroke(points, pen, closed):
            _set_pen(canvas, pen)
            canvas.drawPath(_path(canvas, [points], closed), stroke=1, fill=0)
        case Hatch(lines, pen):
            _set_pen(canvas, pen)
            canvas.drawPath(_path(canvas, lines, False), stroke=1, fill=0)
        case Fill(rings, ink, border):
            canvas.setFillColor(ink)
            if border is not None:
                _set_pen(canvas, border)
            canvas.drawPath(_path(canvas, rings, True), stroke=int(border is not None), fill=1, fillMode=0)
        case Text():
            _text(canvas, item)


def _set_pen(canvas: "Canvas", pen: Pen) -> None:
    canvas.setStrokeColor(pen.ink)
    canvas.setLineWidth(pen.width)
    canvas.setDash(list(pen.dashes))


def _path(canvas: "Canvas", pieces: Sequence[tuple[Point, ...]], closed: bool) -> Any:  # noqa: ANN401 - untyped
    path = canvas.beginPath()
    for first, *rest in pieces:
        path.moveTo(*first)
        for point in rest:
            path.lineTo(*point)
        if closed:
            path.close()
    return path


def _text(canvas: "Canvas", text: Text) -> None:
    size = font_size(text.height)
    font, string = _font_for(text.string, text.bold)
    natural = canvas.stringWidth(string, font, size)
    canvas.saveState()
    canvas.translate(*text.at)
    canvas.rotate(degrees(text.angle))
    line = canvas.beginText(-text.width * {"start": 0.0, "middle": 0.5, "end": 1.0}[text.anchor], 0)
    line.setFont(font, size)
    line.setFillColor(text.ink)
    line.setHorizScale(100 * text.width / natural if natural and text.width else 100)
    line.textOut(string)
    canvas.drawText(line)
    canvas.restoreState()


def _font_for(string: str, bold: bool) -> tuple[str, str]:
    """Return a font that has all characters of a line, and the line; with question marks where there is none."""
    try:
        string.encode("cp1252")
    except UnicodeEncodeError:
        for name, characters in _other_fonts(bold):
            if characters.issuperset(string):
                return name, string
        return BASE_FONTS[bold], string.encode("cp1252", "replace").decode("cp1252")
    return BASE_FONTS[bold], string


@cache
def _other_fonts(bold: bool) -> tuple[tuple[str, frozenset[str]], ...]:
    """Return the typefaces found on this machine and the characters each has."""
    from reportlab.pdfbase import pdfmetrics
    from reportlab.pdfbase.ttfonts import TTFError, TTFont

    found = []
    for name in FONT_FILES[bold]:
        try:
            font = TTFont(name, f"{name}.ttf")
        except TTFError:
            continue
        pdfmetrics.registerFont(font)
        found.append((name, frozenset(map(chr, font.face.charToGlyph))))
    return tuple(found)
