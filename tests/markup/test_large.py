"""Large and awkward input: files stay small, and nothing is lost."""

import numpy as np
import pytest
from markup.cases import classics, floor, moved, plan_of

from kernelscan.markup.dxf import zones_dxf
from kernelscan.markup.scene import Scene, Stroke
from kernelscan.markup.sheet import SheetOptions, compose_zone_sheets
from kernelscan.markup.svg import svg_text

MEGABYTE = 1_000_000


def words(sheets: tuple[Scene, ...]) -> set[str]:
    return {text.string for sheet in sheets for text in sheet.texts()}


def test_a_thousand_rooms_stay_below_5_megabytes_a_sheet_and_each_is_named() -> None:
    answers = floor(1000, 40)
    sheets = compose_zone_sheets(plan_of(answers), answers)
    assert max(len(svg_text(sheet)) for sheet in sheets) < 5 * MEGABYTE
    named = words(sheets)
    assert {f"R{i:03}" for i in range(1, 1001)} <= named
    assert not any("Without a place" in word for word in named)


def test_a_room_of_200_walls() -> None:
    angles = np.linspace(0, 2 * np.pi, 200, endpoint=False)
    ring = list(zip(20 * np.cos(angles), 15 * np.sin(angles), strict=True))
    answers = [moved(1, "Arena", ring, ring)]
    (sheet,) = compose_zone_sheets(plan_of(answers), answers)
    assert len(svg_text(sheet)) < MEGABYTE
    assert "Arena" in words((sheet,))


def test_linework_is_thinned_and_cut_to_the_plan() -> None:
    fine = np.column_stack([np.linspace(0, 8, 100_000), np.zeros(100_000)])
    away = np.array([[1e6, 1e6], [2e6, 1e6]])
    through = np.array([[-1e6, 1.0], [1e6, 1.0]])
    answers = classics()[:1]
    plan = plan_of(answers, linework=[fine, away, through, np.empty((0, 2)), np.zeros((1, 2))])
    sheet, *_ = compose_zone_sheets(plan, answers, SheetOptions(scale="1:100"))
    strokes = [item for item in sheet.group("linework").items if isinstance(item, Stroke)]
    assert len(strokes) == 2
    assert len(strokes[0].points) < 1000
    assert all(
        0 <= x <= sheet.width and 0 <= y <= sheet.height for stroke in strokes for x, y in stroke.points
    )


@pytest.mark.parametrize(
    "linework", [[], [np.array([[5.0, 5.0], [25.0, 15.0]])]], ids=["nothing", "lines only"]
)
def test_a_drawing_without_rooms_still_gives_a_sheet_that_says_so(linework: list) -> None:
    sheets = compose_zone_sheets(plan_of([], linework=linework), [])
    assert any("No closed room" in word for word in words(sheets))
    assert "KSCN" in zones_dxf(plan_of([], linework=linework), [])


def test_a_name_that_is_nothing_but_space_leaves_the_number() -> None:
    ring = [(0, 0), (5, 0), (5, 5), (0, 5)]
    answers = [moved(1, " \t ", ring, ring)]
    assert "R001" in words(compose_zone_sheets(plan_of(answers), answers))


@pytest.mark.parametrize("size", [1e-6, 1e-3, 1e6, 1e12])
def test_absurd_sizes_still_give_a_sheet(size: float) -> None:
    ring = [(0, 0), (size, 0), (size, size), (0, size)]
    answers = [moved(1, "Absurd", ring, ring)]
    for unit in ("m", "in"):
        assert "R001" in words(compose_zone_sheets(plan_of(answers, unit), answers))


def test_small_rooms_far_apart_still_give_a_few_sheets() -> None:
    ring = [(0, 0), (2, 0), (2, 2), (0, 2)]
    answers = [moved(i, "Hut", ring, ring, (i * 5000.0, i * 3000.0)) for i in range(1, 6)]
    sheets = compose_zone_sheets(plan_of(answers), answers)
    assert len(sheets) < 30
    assert {f"R{i:03}" for i in range(1, 6)} <= words(sheets)
