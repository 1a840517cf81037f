"""The SVG: true to scale, well formed, the same each time, and harmless whatever the drawing says."""

import re
from xml.etree import ElementTree

import pytest
from markup.cases import classics, floor, plan_of
from markup.hostile import HOSTILE, hostile_answers, hostile_plan

from kernelscan.markup.metrics import font_size
from kernelscan.markup.scene import Fill, Group, Hatch, Pen, Scene, Stroke, Text
from kernelscan.markup.sheet import SheetOptions, compose_zone_sheets
from kernelscan.markup.style import SMALLEST_TEXT
from kernelscan.markup.svg import svg_text
from kernelscan.plain_text import plain_text

SVG = "{http://www.w3.org/2000/svg}"


def parsed(scene: Scene) -> ElementTree.Element:
    return ElementTree.fromstring(svg_text(scene))


def points(path: str) -> list[list[tuple[float, float]]]:
    """Return the points of path data made of m, l and z steps, worked out anew."""
    pieces, here, first = [], (0.0, 0.0), (0.0, 0.0)
    for letter, x, y in re.findall(r"([Mmlz])(?:(-?[\d.]+),(-?[\d.]+))?", path):
        if letter == "z":
            here = first
            continue
        here = (here[0] + float(x), here[1] + float(y))
        if letter in "Mm":
            pieces.append([])
            first = here
        pieces[-1].append(here)
    return pieces


def test_one_unit_is_one_millimetre_and_y_points_down() -> None:
    scene = Scene(420, 297, "t", "", (Group("g", (Stroke(((0, 0), (100, 0), (100, 50)), Pen(0.5)),)),))
    root = parsed(scene)
    assert (root.get("width"), root.get("height"), root.get("viewBox")) == ("420mm", "297mm", "0,0,420,297")
    (path,) = root.iter(f"{SVG}path")
    assert points(path.get("d")) == [[(0, 297), (100, 297), (100, 247)]]
    assert path.get("stroke-width") == "0.5"


def test_every_item_is_written() -> None:
    items = (
        Fill((((0, 0), (10, 0), (0, 10)), ((1, 1), (2, 1), (1, 2))), "#ffffff", Pen(0.18)),
        Hatch((((0, 0), (1, 1)), ((1, 0), (2, 1))), Pen(0.25, "#0072b2", (1, 2))),
        Text((5, 5), "turned", 3.5, "middle", bold=True, angle=1.5707963267948966),
        Text((5, 9), "x"),
    )
    root = parsed(Scene(20, 20, "t", "", (Group("g", items),)))
    fill, hatch = root.iter(f"{SVG}path")
    assert (fill.get("fill-rule"), fill.get("stroke"), len(points(fill.get("d")))) == (
        "evenodd",
        "#000000",
        2,
    )
    assert (hatch.get("stroke-dasharray"), len(points(hatch.get("d")))) == ("1 2", 2)
    turned, short = root.iter(f"{SVG}text")
    assert turned.get("transform") == "rotate(-90 5 15)"
    assert (turned.get("text-anchor"), turned.get("font-weight")) == ("middle", "bold")
    assert short.get("textLength") is None


def test_neighbouring_strokes_become_one_path_of_the_same_lines() -> None:
    strokes = tuple(Stroke(((i, 0.0), (i, 5.005)), Pen(0.5)) for i in range(3))
    (path,) = parsed(Scene(20, 20, "t", "", (Group("g", strokes),))).iter(f"{SVG}path")
    assert [piece[0][0] for piece in points(path.get("d"))] == pytest.approx([0, 1, 2])


def test_steps_do_not_add_up_errors() -> None:
    steps = tuple((i * 0.3333, 0.0) for i in range(1000))
    (path,) = parsed(Scene(400, 20, "t", "", (Group("g", (Stroke(steps, Pen(0.5)),)),))).iter(f"{SVG}path")
    assert points(path.get("d"))[0][-1][0] == pytest.approx(999 * 0.3333, abs=0.006)


def test_the_same_answers_give_the_same_file() -> None:
    first, second = (
        "".join(map(svg_text, compose_zone_sheets(plan_of(classics()), classics()))) for _ in range(2)
    )
    assert first == second


@pytest.mark.parametrize("unit", ["mm", "ft"])
def test_nothing_is_lettered_below_2_5_mm(unit: str) -> None:
    for sheet in compose_zone_sheets(plan_of(floor(40, 8), unit), floor(40, 8), SheetOptions(paper="A4")):
        for text in parsed(sheet).iter(f"{SVG}text"):
            assert float(text.get("font-size")) >= font_size(SMALLEST_TEXT) - 0.005


def test_a_sheet_says_what_it_is() -> None:
    root = parsed(compose_zone_sheets(plan_of(classics()), classics())[0])
    assert root.find(f"{SVG}title").text.startswith("invented.dxf")
    assert root.get("role") == "img"


@pytest.mark.parametrize("name", HOSTILE)
def test_hostile_text_comes_out_as_plain_text(name: str) -> None:
    sheets = compose_zone_sheets(
        hostile_plan(name), hostile_answers(name), SheetOptions(owner=name, title=name)
    )
    for sheet in sheets:
        root = parsed(sheet)
        assert {element.tag.removeprefix(SVG) for element in root.iter()} <= {
            "svg", "g", "path", "text", "rect", "title", "desc", "defs", "style",
        }  # fmt: skip
        assert not any(
            "href" in key or key.startswith("on") for element in root.iter() for key in element.attrib
        )
        for element in root.iter():
            text = element.text or ""
            assert text == plain_text(text, 10_000)
            assert len(text) < 500
        assert len(svg_text(sheet)) < 200_000
