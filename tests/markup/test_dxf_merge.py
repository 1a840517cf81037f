"""The mark-up within a copy of the drawing: everything of ours is added, and nothing else is changed."""

import io
from pathlib import Path

import ezdxf
import numpy as np
import pytest
from ezdxf.document import Drawing
from ezdxf.lldxf.tagwriter import TagCollector
from markup.cases import L, moved, plan_of

from kernelscan import read_plan
from kernelscan.coverage import room_answer
from kernelscan.errors import InputError
from kernelscan.markup.dxf import zones_dxf
from kernelscan.markup.dxf_merge import merged_dxf
from kernelscan.reading.files import open_drawing

SAMPLES = [path.name for path in sorted((Path(__file__).parents[2] / "sample_plans").glob("*.dxf"))]


def tags_of(drawing: Drawing) -> dict[str, str]:
    """Return every entity of the model, the paper and the blocks by its handle, as the tags it is written with."""
    found = {}
    for block in drawing.blocks:
        for entity in block:
            version = "AC1024"
            found[entity.dxf.handle] = str(TagCollector.dxftags(entity, dxfversion=version))
    return found


def merged(path: Path) -> tuple[Drawing, Drawing]:
    plan = read_plan(path)
    answers = [room_answer(room, ignore_depth=0.3) for room in plan.rooms]
    original, repairs = open_drawing(path)
    assert not repairs
    copy = merged_dxf(open_drawing(path)[0], plan, answers)
    # As R2010 or later every drawing is written in UTF-8.
    return original, ezdxf.read(io.StringIO(copy.decode("utf-8")))


@pytest.mark.parametrize("name", SAMPLES)
def test_no_entity_of_the_drawing_is_changed(sample_plans: Path, name: str) -> None:
    original, copy = merged(sample_plans / name)
    before, after = tags_of(original), tags_of(copy)
    assert before
    assert {handle: after.get(handle) for handle in before} == before
    added = set(after) - set(before)
    ours = {entity.dxf.layer for entity in copy.modelspace() if entity.dxf.handle in added}
    assert ours
    assert all(layer.startswith("A-KSCN-") for layer in ours)
    assert not copy.audit().errors


def test_a_changed_entity_would_be_noticed(sample_plans: Path) -> None:
    original, copy = merged(sample_plans / SAMPLES[0])
    entity = next(iter(original.modelspace()))
    copy.entitydb[entity.dxf.handle].dxf.layer = "OTHER"
    assert tags_of(copy)[entity.dxf.handle] != tags_of(original)[entity.dxf.handle]


@pytest.mark.parametrize("name", SAMPLES)
def test_layers_and_settings_of_the_drawing_stay(sample_plans: Path, name: str) -> None:
    original, copy = merged(sample_plans / name)
    for layer in original.layers:
        there = copy.layers.get(layer.dxf.name)
        assert (there.dxf.color, there.dxf.flags) == (layer.dxf.color, layer.dxf.flags)
    for variable in ("$INSUNITS", "$MEASUREMENT", "$LUNITS", "$EXTMIN", "$EXTMAX"):
        assert copy.header.get(variable) == original.header.get(variable)
    new = {layer.dxf.name for layer in copy.layers} - {layer.dxf.name for layer in original.layers}
    assert all(name.startswith("A-KSCN-") for name in new)


def test_a_drawing_with_mark_up_is_not_marked_up_again(sample_plans: Path) -> None:
    plan = read_plan(sample_plans / "workshop-ground-floor.dxf")
    drawing, _ = open_drawing(sample_plans / "workshop-ground-floor.dxf")
    merged_dxf(drawing, plan, [])
    with pytest.raises(InputError, match="already"):
        merged_dxf(drawing, plan, [])
    with pytest.raises(InputError, match="already"):
        merged_dxf(drawing, plan, [], prefix="E-SURV")


def test_an_old_drawing_is_written_as_r2010() -> None:
    answers = [moved(1, "Hall", L, [(0, 0), (3, 0), (3, 3), (0, 3)])]
    old = ezdxf.new("R12")
    old.modelspace().add_line((0, 0), (1, 1))
    copy = ezdxf.read(io.StringIO(merged_dxf(old, plan_of(answers), answers).decode("utf-8")))
    assert copy.dxfversion == "AC1024"
    assert len(copy.modelspace().query("HATCH")) > 0
    assert len(copy.modelspace().query('LINE[layer=="0"]')) == 1


@pytest.mark.parametrize(("unit", "metres"), [("mm", 0.001), ("m", 1.0)])
def test_setting_out_is_dimensions_in_millimetres(unit: str, metres: float) -> None:
    # The kernel is the square of 3 m in the corner: its points are 1.5 m from both walls.
    answers = [moved(1, "Hall", L, [(0, 0), (3, 0), (3, 3), (0, 3)])]
    drawing = ezdxf.read(io.StringIO(zones_dxf(plan_of(answers, unit), answers)))
    dimensions = list(drawing.modelspace().query('DIMENSION[layer=="A-KSCN-DIMS"]'))
    assert len(dimensions) == 3
    for dimension in dimensions:
        assert dimension.get_measurement() * metres == pytest.approx(1.5)
        shown = [text.plain_text() for text in dimension.get_geometry_block().query("MTEXT")]
        assert shown == ["1500"]


def test_a_dimension_along_a_wall_stands_off_it_outside_the_room() -> None:
    answers = [moved(1, "Hall", L, [(0, 0), (3, 0), (3, 3), (0, 3)])]
    drawing = ezdxf.read(io.StringIO(zones_dxf(plan_of(answers, "m"), answers)))
    places = [np.array(each.dxf.defpoint.vec2) for each in drawing.modelspace().query("DIMENSION")]
    outside = [place for place in places if place.min() < -1e-9]
    assert len(outside) == 1
    assert outside[0].min() == pytest.approx(-0.9)


def test_feet_and_inches_are_written_out() -> None:
    ring = [(0, 0), (3.048, 0), (3.048, 3.048), (0, 3.048)]
    answers = [moved(1, "Ten", ring, ring)]
    drawing = ezdxf.read(io.StringIO(zones_dxf(plan_of(answers, "in"), answers)))
    shown = {each.dxf.text for each in drawing.modelspace().query("DIMENSION")}
    assert shown == {"5'-0\""}
