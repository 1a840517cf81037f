"""A real browser as the ruler: what it shows and prints of a sheet. Skipped where there is none."""

import json
import re
import shutil
import subprocess
from collections.abc import Callable
from html import unescape
from itertools import combinations
from pathlib import Path

import pytest
from markup.cases import classics, floor, plan_of

from kernelscan import read_plan
from kernelscan.coverage import room_answer
from kernelscan.markup.metrics import text_width
from kernelscan.markup.room_sheets import compose_room_sheets
from kernelscan.markup.scene import Box, Scene
from kernelscan.markup.sheet import SheetOptions, compose_zone_sheets
from kernelscan.markup.svg import svg_text
from kernelscan.reading import read_devices

MEASURE = """
const svgs = [...document.querySelectorAll("svg")];
const found = svgs.map(svg => {
  const sheet = svg.getBoundingClientRect(), mm = svg.viewBox.baseVal.width / sheet.width;
  return [...svg.querySelectorAll("text")].map(text => {
    const box = text.getBoundingClientRect();
    const sides = [box.left - sheet.left, box.top - sheet.top, box.right - sheet.left, box.bottom - sheet.top];
    return {string: text.textContent, box: sides.map(side => side * mm)};
  });
});
const out = document.createElement("pre");
out.id = "found";
out.textContent = JSON.stringify(found);
document.body.replaceChildren(out);
"""

WIDTHS = """
const probe = (family, bold, string) => {
  const text = document.createElementNS("http://www.w3.org/2000/svg", "text");
  text.setAttribute("font-family", family);
  text.setAttribute("font-size", "1000");
  text.setAttribute("style", "font-kerning:none");
  if (bold) text.setAttribute("font-weight", "bold");
  text.textContent = string;
  document.querySelector("svg").appendChild(text);
  return text.getComputedTextLength();
};
const found = STRINGS.map(string => [false, true].map(bold => ["Liberation Sans, serif",
  "Liberation Sans, monospace", "Arial, serif", "Arial, monospace"].map(family => probe(family, bold, string))));
const out = document.createElement("pre");
out.id = "found";
out.textContent = JSON.stringify(found);
document.body.replaceChildren(out);
"""
STRINGS = [
    "Office 12",
    "kernel: 15.12 m²",
    "The quick brown fox, WAVE 0123456789",
    "Größe Łódź Ελλάδα Привет",
    "iiiill",
]


def found_by(browser: Callable[..., str], page: Path, body: str, script: str) -> list:
    page.write_text(
        f"<!doctype html><meta charset=utf-8><body>{body}<script>{script}</script>",
        encoding="utf-8",
        newline="\n",
    )
    printed = browser(page, "--dump-dom", "--virtual-time-budget=20000")
    return json.loads(unescape(re.search(r'<pre id="found">(.*?)</pre>', printed, re.S)[1]))


def sheets_of_samples(folder: Path) -> dict[str, Scene]:
    """Return the sheets of every sample, with the devices of its device file where it has one."""
    sheets = {}
    for path in sorted(folder.glob("*.dxf")):
        plan = read_plan(path)
        file = folder / f"{path.stem.partition('-')[0]}-devices.toml"
        for kind, devices, depth in (
            ("plain", (), 0.0),
            ("full", read_devices(file) if file.exists() else (), 0.3),
        ):
            answers = [room_answer(room, devices, ignore_depth=depth) for room in plan.rooms]
            composed = [*compose_zone_sheets(plan, answers), *compose_room_sheets(plan, answers)]
            sheets |= {f"{path.stem}-{kind}-{i}": sheet for i, sheet in enumerate(composed, 1)}
    return sheets


def test_widths_in_the_table_are_those_of_the_typeface(browser: Callable[..., str], tmp_path: Path) -> None:
    script = WIDTHS.replace("STRINGS", json.dumps(STRINGS))
    for string, weights in zip(
        STRINGS, found_by(browser, tmp_path / "w.html", "<svg></svg>", script), strict=True
    ):
        for bold, (serif, mono, arial_serif, arial_mono) in zip((False, True), weights, strict=True):
            if serif != mono and arial_serif != arial_mono:
                pytest.skip("neither Liberation Sans nor Arial is here")
            measured = serif if serif == mono else arial_serif
            assert text_width(string, 1000 * 1409 / 2048, bold) == pytest.approx(measured, rel=0.005)


def test_no_two_texts_touch_on_any_sheet(
    browser: Callable[..., str], sample_plans: Path, tmp_path: Path
) -> None:
    sheets = sheets_of_samples(sample_plans)
    for name, answers, unit in (("classics", classics(), "mm"), ("floor", floor(60, 10), "ft")):
        options = SheetOptions(
            owner="Invented Estates", title="A title", creator="A. B.", number="17", date="2026-01-15"
        )
        for i, sheet in enumerate(compose_zone_sheets(plan_of(answers, unit), answers, options), 1):
            sheets[f"{name}-{i}"] = sheet
    for i, sheet in enumerate(compose_room_sheets(plan_of(classics()), classics()), 1):
        sheets[f"room-{i}"] = sheet
    body = "".join(svg_text(sheet).partition("?>")[2] for sheet in sheets.values())
    measured = found_by(browser, tmp_path / "sheets.html", body, MEASURE)
    assert len(measured) == len(sheets)
    for (name, sheet), texts in zip(sheets.items(), measured, strict=True):
        assert [text["string"] for text in texts] == [text.string for text in sheet.texts()]
        boxes = [(text["string"], Box(*text["box"])) for text in texts]
        touching = [
            (a, b) for (a, p), (b, q) in combinations(boxes, 2) if p.grown(-0.02).overlaps(q.grown(-0.02))
        ]
        assert touching == [], name
        for (string, box), text in zip(boxes, sheet.texts(), strict=True):
            assert box.width <= text.box.width + 0.6, (name, string)  # whole pixels of 0.26 mm
            assert 0 <= box.left <= box.right <= sheet.width, (name, string)


@pytest.mark.parametrize(("unit", "scale"), [("m", "1:100"), ("m", "1:50"), ("ft", '1/8" = 1\'-0"')])
def test_the_browsers_print_is_true_to_scale(
    browser: Callable[..., str], tmp_path: Path, unit: str, scale: str
) -> None:
    if shutil.which("pdftotext") is None:
        pytest.skip("nothing here to measure a PDF with")
    sheet = compose_zone_sheets(
        plan_of(floor(4, 2), unit), floor(4, 2), SheetOptions(scale=scale, paper="A3")
    )[0]
    page, printed = tmp_path / "sheet.svg", tmp_path / "sheet.pdf"
    page.write_text(svg_text(sheet), encoding="utf-8", newline="\n")
    browser(page, f"--print-to-pdf={printed}", "--no-pdf-header-footer")
    done = subprocess.run(
        ["pdftotext", "-bbox", printed, "-"], capture_output=True, encoding="utf-8", check=True
    )
    (pages,) = re.findall(r'<page width="([\d.]+)" height="([\d.]+)"', done.stdout)
    assert [float(side) / 72 * 25.4 for side in pages] == pytest.approx([sheet.width, sheet.height], abs=0.3)
    # The numbers at the two ends of the scale bar stand in the middle of its ends.
    numbers = [text for text in sheet.group("legend").items if getattr(text, "string", "x").isdigit()]
    ends = [
        word_middle(done.stdout, text.string, text.at, sheet.height) for text in (numbers[0], numbers[-1])
    ]
    length = float(numbers[-1].string) * (0.3048 if unit == "ft" else 1.0)
    denominator = {"1:100": 100, "1:50": 50}.get(scale, 96)
    assert ends[1] - ends[0] == pytest.approx(length * 1000 / denominator, abs=0.1)


def word_middle(words: str, string: str, at: tuple[float, float], height: float) -> float:
    """Return where a word stands, in millimetres from the left, the one nearest to where it should."""
    pattern = rf'xMin="([\d.]+)" yMin="([\d.]+)" xMax="([\d.]+)" yMax="([\d.]+)">{re.escape(string)}<'
    places = [
        ((float(x0) + float(x1)) / 2 / 72 * 25.4, (float(y0) + float(y1)) / 2 / 72 * 25.4)
        for x0, y0, x1, y1 in re.findall(pattern, words)
    ]
    return min(places, key=lambda place: abs(place[0] - at[0]) + abs(place[1] - (height - at[1])))[0]
