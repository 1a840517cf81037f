"""The PDF: a page a sheet, true to scale, text as text."""

import re
import shutil
import subprocess
from pathlib import Path

import pytest
from markup.cases import classics, floor, plan_of
from markup.hostile import HOSTILE, hostile_answers, hostile_plan

from kernelscan.markup.pdf import pdf_bytes
from kernelscan.markup.scene import Group, Scene, Text
from kernelscan.markup.sheet import SheetOptions, compose_zone_sheets
from kernelscan.plain_text import plain_text

pytest.importorskip("reportlab", reason="the extra for PDF is not installed")


def words(pdf: bytes, folder: Path) -> list[tuple[float, float, str]]:
    """Return the words of a PDF: the middle of each in millimetres from the left and the top, and the word."""
    if shutil.which("pdftotext") is None:
        pytest.skip("nothing here to read a PDF with")
    path = folder / "sheet.pdf"
    path.write_bytes(pdf)
    done = subprocess.run(
        ["pdftotext", "-bbox", path, "-"], capture_output=True, encoding="utf-8", errors="replace", check=True
    )
    pattern = r'xMin="([\d.]+)" yMin="([\d.]+)" xMax="([\d.]+)" yMax="([\d.]+)">(.*?)</word>'
    return [
        ((float(a) + float(c)) / 2 / 72 * 25.4, (float(b) + float(d)) / 2 / 72 * 25.4, word)
        for a, b, c, d, word in re.findall(pattern, done.stdout)
    ]


def test_a_page_for_each_sheet_of_its_size() -> None:
    sheets = compose_zone_sheets(plan_of(classics()), classics())
    sizes = re.findall(rb"/MediaBox \[ 0 0 ([\d.]+) ([\d.]+) \]", pdf_bytes(sheets))
    assert [tuple(float(side) / 72 * 25.4 for side in size) for size in sizes] == [
        pytest.approx((sheet.width, sheet.height), abs=0.01) for sheet in sheets
    ]


@pytest.mark.parametrize(("unit", "scale", "denominator"), [("m", "1:100", 100), ("ft", "1/4", 48)])
def test_the_scale_bar_is_as_long_as_it_says(
    tmp_path: Path, unit: str, scale: str, denominator: float
) -> None:
    sheet = compose_zone_sheets(plan_of(floor(1), unit), floor(1), SheetOptions(scale=scale, paper="A3"))[0]
    found = words(pdf_bytes([sheet]), tmp_path)
    numbers = [
        text for text in sheet.group("legend").items if isinstance(text, Text) and text.string.isdigit()
    ]
    ends = [
        min(
            (abs(x - text.at[0]) + abs(y - (sheet.height - text.at[1])), x)
            for x, y, word in found
            if word == text.string
        )[1]
        for text in (numbers[0], numbers[-1])
    ]
    metres = float(numbers[-1].string) * (0.3048 if unit == "ft" else 1.0)
    assert ends[1] - ends[0] == pytest.approx(metres * 1000 / denominator, abs=0.1)


def test_text_stands_where_the_scene_has_it(tmp_path: Path) -> None:
    items = (Text((50, 50), "Größe", 3.5, "middle", True), Text((90, 20), "end", anchor="end"))
    scene = Scene(100, 100, "t", "", (Group("g", items),))
    placed = {word: (x, y) for x, y, word in words(pdf_bytes([scene]), tmp_path)}
    assert placed["Größe"][0] == pytest.approx(50, abs=0.1)
    assert placed["end"][0] == pytest.approx(90 - Text((0, 0), "end").width / 2, abs=0.1)


def test_the_same_scenes_give_the_same_bytes() -> None:
    sheets = compose_zone_sheets(plan_of(classics()), classics())
    assert pdf_bytes(sheets) == pdf_bytes(sheets)


@pytest.mark.parametrize("name", HOSTILE)
def test_hostile_text_stays_text(name: str, tmp_path: Path) -> None:
    sheets = compose_zone_sheets(hostile_plan(name), hostile_answers(name), SheetOptions(title=name))
    pdf = pdf_bytes(sheets)
    assert not re.search(rb"/(JavaScript|JS|OpenAction|AA|URI|Launch|EmbeddedFile)\b", pdf)
    assert all(word == plain_text(word) for _, _, word in words(pdf, tmp_path))


def test_words_beyond_latin_are_set_where_a_typeface_has_them(tmp_path: Path) -> None:
    scene = Scene(100, 100, "t", "", (Group("g", (Text((10, 50), "Łódź"), Text((10, 30), "\U00013000"))),))
    found = [word for _, _, word in words(pdf_bytes([scene]), tmp_path)]
    assert "?" in found
    assert found[0] in {"Łódź", "?ód?"}
