"""The options of the sheets, from the command line to the files."""

import re
import sys

import ezdxf
import pytest

from kernelscan.cli.app import run

SQUARE = [(0, 0), (4, 0), (4, 3), (0, 3)]


@pytest.fixture
def plan(tmp_path):
    doc = ezdxf.new("R2010")
    doc.header["$INSUNITS"] = 6
    for shift in (0, 10):
        points = [(x + shift, y) for x, y in SQUARE]
        doc.modelspace().add_lwpolyline(points, close=True, dxfattribs={"layer": "A-AREA"})
    doc.saveas(tmp_path / "plan.dxf")
    return tmp_path / "plan.dxf"


def names(folder):
    return sorted(path.name for path in folder.iterdir())


def test_the_title_block_has_what_was_given(plan, tmp_path):
    given = {
        "--owner": "Invented Estates", "--number": "K-17", "--title": "Ground floor", "--creator": "A. Drawer",
        "--approver": "B. Checker", "--document-type": "Mounting plan", "--date": "2026-02-03",
    }  # fmt: skip
    options = [word for pair in given.items() for word in pair]
    assert run(["zones", str(plan), "--out", str(tmp_path / "out"), "-q", *options]) == 0
    sheet = (tmp_path / "out" / "sheet-01.svg").read_text(encoding="utf-8")
    assert all(f">{value}<" in sheet for value in given.values())


def test_paper_and_scale_are_those_asked_for(plan, tmp_path):
    assert (
        run(["zones", str(plan), "--out", str(tmp_path / "out"), "-q", "--paper", "a2", "--scale", "1:50"])
        == 0
    )
    sheet = (tmp_path / "out" / "sheet-01.svg").read_text(encoding="utf-8")
    assert "594mm" in sheet
    assert ">1:50<" in sheet


@pytest.mark.parametrize(("option", "value"), [("--paper", "A9"), ("--scale", "big"), ("--scale", "1:0")])
def test_what_does_not_exist_is_refused_before_anything_is_written(plan, tmp_path, capsys, option, value):
    assert run(["zones", str(plan), "--out", str(tmp_path / "out"), option, value]) == 2
    assert capsys.readouterr().err.count("\n") == 1
    assert not (tmp_path / "out").exists()


def test_room_sheets_and_the_pdf_are_written_and_go_with_the_next_run(plan, tmp_path, capsys):
    out = tmp_path / "out"
    assert run(["zones", str(plan), "--out", str(out), "--room-sheets", "--pdf"]) == 0
    assert "room-sheet-01.svg and on" in capsys.readouterr().out
    assert names(out) == [
        "markup.dxf", "report.json", "room-sheet-01.svg", "room-sheet-02.svg", "schedule.csv", "sheet-01.svg",
        "sheets.pdf",
    ]  # fmt: skip
    assert len(re.findall(rb"/Type /Page\b", (out / "sheets.pdf").read_bytes())) == 3
    (out / "notes.svg").write_text("mine", encoding="utf-8")
    assert run(["zones", str(plan), "--out", str(out)]) == 0
    assert "room-sheet-02.svg" in capsys.readouterr().out
    assert names(out) == ["markup.dxf", "notes.svg", "report.json", "schedule.csv", "sheet-01.svg"]


def test_a_pdf_without_its_library_names_the_extra(plan, tmp_path, capsys, monkeypatch):
    monkeypatch.setitem(sys.modules, "reportlab", None)
    assert run(["zones", str(plan), "--out", str(tmp_path / "out"), "--pdf"]) == 2
    error = capsys.readouterr().err
    assert "kernelscan[pdf]" in error
    assert error.count("\n") == 1
    assert not (tmp_path / "out").exists()


def test_a_title_that_attacks_comes_out_harmless(plan, tmp_path):
    assert (
        run(["zones", str(plan), "--out", str(tmp_path / "out"), "-q", "--title", "<script>\u202e../../x"])
        == 0
    )
    sheet = (tmp_path / "out" / "sheet-01.svg").read_text(encoding="utf-8")
    assert "<script" not in sheet
    assert "\u202e" not in sheet
    assert names(tmp_path) == ["out", "plan.dxf"]


def test_the_merged_drawing_has_the_mark_up_and_goes_with_the_next_run(plan, tmp_path, capsys):
    out = tmp_path / "out"
    before = plan.read_bytes()
    assert run(["zones", str(plan), "--out", str(out), "--merge", "--layer-prefix", "E-SURV"]) == 0
    assert "merged.dxf" in capsys.readouterr().out
    layers = {entity.dxf.layer for entity in ezdxf.readfile(out / "merged.dxf").modelspace()}
    assert {"A-AREA", "E-SURV-ROOM", "E-SURV-DIMS"} <= layers
    assert plan.read_bytes() == before
    assert run(["zones", str(plan), "--out", str(out)]) == 0
    assert "merged.dxf" not in names(out)


def test_a_layer_prefix_that_cannot_be_is_refused_before_anything_is_written(plan, tmp_path, capsys):
    assert run(["zones", str(plan), "--out", str(tmp_path / "out"), "--layer-prefix", "a/b"]) == 2
    assert "prefix" in capsys.readouterr().err
    assert not (tmp_path / "out").exists()
