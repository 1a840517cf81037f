"""The DXF mark-up: our own layers only, in the drawing's position and unit, and free of errors."""

import io

import ezdxf
import numpy as np
import pytest
from ezdxf.document import Drawing
from markup.cases import L, classics, floor, moved, plan_of
from markup.hostile import HOSTILE, hostile_answers, hostile_plan

from kernelscan.errors import InputError
from kernelscan.markup.dxf import zones_dxf
from kernelscan.markup.sheet import SheetOptions, compose_zone_sheets
from kernelscan.units import HEADER_UNITS


def drawn(answers: list, unit: str = "mm", **options: str) -> Drawing:
    return ezdxf.read(io.StringIO(zones_dxf(plan_of(answers, unit), answers, **options)))


@pytest.mark.parametrize("answers", [classics(), floor(), []], ids=["classics", "floor", "nothing"])
def test_the_audit_finds_nothing(answers: list) -> None:
    audit = drawn(answers).audit()
    assert not audit.errors
    assert not audit.fixes


def test_only_layers_blocks_and_line_types_of_our_own() -> None:
    drawing = drawn(classics())
    assert {entity.dxf.layer for entity in drawing.modelspace()} == {
        f"A-KSCN-{minor}"
        for minor in ("ROOM", "OBST", "CEIL", "WALL", "CORN", "PNTS", "CNFL", "DIMS", "TEXT")
    }
    assert {layer.dxf.name for layer in drawing.layers if not layer.dxf.name.startswith("A-KSCN-")} == {
        "0",
        "Defpoints",
    }
    blocks = {block.name for block in drawing.blocks if not block.name.startswith("*")}
    assert blocks
    assert all(name.startswith(("KSCN-", "_")) for name in blocks)


@pytest.mark.parametrize("unit", ["mm", "m", "in", "US-survey ft"])
def test_positions_and_unit_are_the_drawings(unit: str) -> None:
    answers = [moved(1, "Far", L, [(0, 0), (3, 0), (3, 3), (0, 3)], (512_300.5, 5_403_700.25))]
    drawing = drawn(answers, unit)
    metres = HEADER_UNITS[drawing.header["$INSUNITS"]].metres
    assert HEADER_UNITS[drawing.header["$INSUNITS"]].name == unit
    outline = drawing.modelspace().query('LWPOLYLINE[layer=="A-KSCN-ROOM"]').first
    assert np.array(outline.get_points("xy")) * metres == pytest.approx(answers[0].room.outline, abs=1e-8)
    assert outline.closed
    for insert in drawing.modelspace().query("INSERT"):
        spot = next(each for each in answers[0].zones.recommended if each.mount.upper() in insert.dxf.name)
        assert np.array(insert.dxf.insert.vec2) * metres == pytest.approx(spot.point, abs=1e-8)


def test_each_zone_is_hatched_at_the_angle_and_spacing_of_its_kind() -> None:
    drawing = drawn(classics()[:1])
    found = {}
    for hatch in drawing.modelspace().query("HATCH"):
        (line,) = hatch.pattern.lines
        found[hatch.dxf.layer] = (line.angle, round(float(np.hypot(*line.offset)), 6))
        assert not hatch.dxf.solid_fill
    assert found == {"A-KSCN-CEIL": (45, 300), "A-KSCN-WALL": (135, 120), "A-KSCN-CORN": (15, 70)}


def test_points_carry_what_the_fitter_needs() -> None:
    inserts = list(drawn(classics()[:1]).modelspace().query("INSERT"))
    assert {each.dxf.tag: each.dxf.text for each in inserts[0].attribs} == {
        "TAG": "C", "ROOM": "R001", "NAME": "Reading room", "FIELD": "360°", "RANGE": "6.68", "TOLERANCE": "350",
    }  # fmt: skip
    assert [insert.dxf.name for insert in inserts] == ["KSCN-CEILING", "KSCN-WALL", "KSCN-CORNER-090"]


def test_walls_that_exclude_each_other_are_marked_and_lettered() -> None:
    model = drawn([classics()[2]]).modelspace()
    assert len(model.query('LINE[layer=="A-KSCN-CNFL"]')) == 2
    texts = {text.plain_text() for text in model.query("MTEXT")}
    assert {"A", "B"} <= texts
    assert any("no single point" in text for text in texts)


def test_the_prefix_of_the_layers_may_be_chosen() -> None:
    assert {entity.dxf.layer[:6] for entity in drawn(floor(2), prefix="E-SURV").modelspace()} == {"E-SURV"}


@pytest.mark.parametrize("prefix", ["", "a/b", "a b", "x" * 200, "a\nb", "*"])
def test_a_prefix_that_no_layer_may_have_is_refused(prefix: str) -> None:
    with pytest.raises(InputError, match="prefix"):
        zones_dxf(plan_of([]), [], prefix=prefix)


def test_the_same_answers_give_the_same_file() -> None:
    assert zones_dxf(plan_of(floor()), floor()) == zones_dxf(plan_of(floor()), floor())


@pytest.mark.parametrize("name", HOSTILE)
def test_hostile_text_stays_text(name: str) -> None:
    text = zones_dxf(hostile_plan(name), hostile_answers(name))
    drawing = ezdxf.read(io.StringIO(text))
    assert not drawing.audit().errors
    assert len(drawing.modelspace()) == len(drawn(classics()).modelspace()) or name in {
        "long",
        "long words",
        "east asian",
    }
    for mtext in drawing.modelspace().query("MTEXT"):
        assert "x}" not in mtext.text.replace("\\}", "")
        assert all(line.isprintable() for line in mtext.plain_text(split=True))
    for insert in drawing.modelspace().query("INSERT"):
        for attribute in insert.attribs:
            assert "%%" not in attribute.dxf.text
            assert attribute.dxf.text.isprintable()
            assert len(attribute.dxf.text) <= 130


def test_braces_and_backslashes_are_read_back_as_they_were() -> None:
    answers = [moved(1, "a\\b{c}", L, [(0, 0), (3, 0), (3, 3), (0, 3)])]
    texts = [text.plain_text() for text in drawn(answers).modelspace().query("MTEXT")]
    assert any("a\\b{c}" in text for text in texts)


def test_the_mark_up_lines_up_with_the_sheet() -> None:
    """One scale and one shift take every outline and zone of the drawing to where the sheet has it."""
    answers = [*classics()[:2], classics()[3]]
    model = drawn(answers, "mm").modelspace()
    sheet = compose_zone_sheets(plan_of(answers), answers, SheetOptions(scale="1:100", paper="A3"))[0]
    on_paper = [np.array(item.points) for item in sheet.group("rooms").items]
    in_cad = [np.array(each.get_points("xy")) for each in model.query('LWPOLYLINE[layer=="A-KSCN-ROOM"]')]
    shift = on_paper[0][0] - in_cad[0][0] / 100
    for paper, cad in zip(on_paper, in_cad, strict=True):
        assert cad / 100 + shift == pytest.approx(paper, abs=0.01)
    zones = {
        tuple(np.round(np.array(item.points), 2).ravel())
        for item in sheet.group("zones").items
        if hasattr(item, "points")
    }
    ceilings = [np.array(each.get_points("xy")) for each in model.query('LWPOLYLINE[layer=="A-KSCN-CEIL"]')]
    assert len(ceilings) == 2
    assert all(tuple(np.round(cad / 100 + shift, 2).ravel()) in zones for cad in ceilings)
