"""Files are written whole or not at all, and a folder's files together."""

import re

import pytest

from kernelscan.cli.writing import write_file, write_folder
from kernelscan.errors import InputError


def names(folder):
    return sorted(path.name for path in folder.iterdir())


def test_a_folder_is_made_and_filled(tmp_path):
    write_folder(tmp_path / "a" / "b", {"one": b"1", "two": b"22"})
    assert names(tmp_path / "a" / "b") == ["one", "two"]
    assert (tmp_path / "a" / "b" / "two").read_bytes() == b"22"


def test_no_files_leave_an_empty_folder(tmp_path):
    write_folder(tmp_path / "a", {})
    assert names(tmp_path / "a") == []


def test_files_are_replaced_and_others_left_alone(tmp_path):
    (tmp_path / "one").write_bytes(b"old and longer")
    (tmp_path / "mine").write_bytes(b"keep")
    write_folder(tmp_path, {"one": b"new"})
    assert (tmp_path / "one").read_bytes() == b"new"
    assert (tmp_path / "mine").read_bytes() == b"keep"


def test_outdated_files_go_only_by_their_pattern(tmp_path):
    for name in ("sheet-01.svg", "sheet-02.svg", "sheet-02.svg.bak", "my-sheet-02.svg"):
        (tmp_path / name).write_bytes(b"old")
    removed = write_folder(tmp_path, {"sheet-01.svg": b"new"}, re.compile(r"sheet-\d{2,}\.svg"))
    assert removed == ["sheet-02.svg"]
    assert names(tmp_path) == ["my-sheet-02.svg", "sheet-01.svg", "sheet-02.svg.bak"]


def test_when_one_cannot_be_written_none_is(tmp_path):
    (tmp_path / "one").write_bytes(b"old")
    (tmp_path / "two").mkdir()
    with pytest.raises(InputError, match="two is a folder"):
        write_folder(tmp_path, {"one": b"new", "two": b"2"})
    assert (tmp_path / "one").read_bytes() == b"old"
    assert names(tmp_path) == ["one", "two"]


def test_a_file_where_the_folder_should_be(tmp_path):
    (tmp_path / "out").write_bytes(b"")
    with pytest.raises(InputError, match="out: cannot write there"):
        write_folder(tmp_path / "out", {"one": b"1"})


def test_one_file(tmp_path):
    write_file(tmp_path / "r.json", b"{}")
    assert (tmp_path / "r.json").read_bytes() == b"{}"
    assert names(tmp_path) == ["r.json"]


def test_what_was_read_is_never_written_over(tmp_path):
    drawing = tmp_path / "p.dxf"
    drawing.write_bytes(b"mine")
    with pytest.raises(InputError, match="would be written over"):
        write_file(drawing, b"{}", [drawing])
    with pytest.raises(InputError, match="would be written over"):
        write_folder(tmp_path, {"p.dxf": b"x", "q": b"y"}, inputs=[tmp_path / "." / "p.dxf"])
    assert drawing.read_bytes() == b"mine"
    assert names(tmp_path) == ["p.dxf"]


def test_an_outdated_name_that_is_a_folder_stays(tmp_path):
    (tmp_path / "sheet-07.svg").mkdir()
    assert write_folder(tmp_path, {"a": b"1"}, re.compile(r"sheet-.*")) == []
