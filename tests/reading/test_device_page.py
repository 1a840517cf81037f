"""``docs/devices.md`` says what the program does: its keys, its examples, its levels, what it prints."""

import re

import pytest
from conftest import ROOT

from kernelscan.cli.app import run
from kernelscan.plan.pixel_levels import PIXEL_LEVELS, density_of_level
from kernelscan.reading import read_devices
from kernelscan.reading.device_keys import (
    CLEAR_OF_OBSTACLES,
    CLEAR_OF_OPENINGS,
    CLEAR_OF_WALLS,
    QUANTITIES,
    WORDS,
)

PAGE = (ROOT / "docs" / "devices.md").read_text(encoding="utf-8")


def section(heading):
    return re.split(r"^## ", PAGE.split(f"## {heading}\n", 1)[1], maxsplit=1, flags=re.MULTILINE)[0]


def rows(text):
    """The cells of the tables in a text, headings left out."""
    bodies = re.findall(r"^\|---.*\n((?:\|.*\n)+)", text, flags=re.MULTILINE)
    return [line.strip("| ").split(" | ") for body in bodies for line in body.splitlines()]


def blocks(kind, text=PAGE):
    return re.findall(rf"```{kind}\n(.*?)```", text, flags=re.DOTALL)


def test_the_tables_name_every_key_and_no_other():
    named = [key for cells in rows(section("Keys")) for key in re.findall(r"`([^`]+)`", cells[0])]
    clearances = (CLEAR_OF_WALLS, CLEAR_OF_OPENINGS, CLEAR_OF_OBSTACLES)
    known = [*WORDS, *(quantity.keys[0] for quantity in (*QUANTITIES, *clearances))]
    assert sorted(named) == sorted(known)


def test_the_needed_keys_are_those_that_an_empty_device_lacks(tmp_path, capsys):
    (tmp_path / "none.toml").write_text("[[device]]\n", encoding="utf-8")
    assert run(["devices", str(tmp_path / "none.toml")]) == 2
    missing = re.findall(r"device\[1\]\.(\w+): missing", capsys.readouterr().err)
    needed = [re.findall(r"`(\w+)`", cells[0])[0] for cells in rows(section("Keys")) if "needed" in cells[2]]
    assert missing == needed


def test_the_levels_are_those_of_the_program():
    found = {cells[0].strip("` "): float(cells[1]) for cells in rows(section("Levels of pixel density"))}
    assert len(found) == sum(len(levels) for levels in PIXEL_LEVELS.values())
    for level, density in found.items():
        assert density_of_level(level) == density


def test_the_example_stands_in_the_sample_file_and_is_read(tmp_path, sample_plans):
    (example,) = blocks("toml", section("An example"))
    assert example in (sample_plans / "workshop-devices.toml").read_text(encoding="utf-8")
    (tmp_path / "example.toml").write_text(example, encoding="utf-8")
    assert read_devices(tmp_path / "example.toml") == read_devices(sample_plans / "workshop-devices.toml")[:1]


@pytest.mark.parametrize("number", [0, 1])
def test_the_page_shows_what_the_program_prints(tmp_path, monkeypatch, capsys, sample_plans, number):
    (tmp_path / "slips.toml").write_text(
        blocks("toml", section("When something is wrong"))[0], encoding="utf-8"
    )
    (tmp_path / "sample_plans").mkdir()
    for path in sample_plans.glob("*.toml"):
        (tmp_path / "sample_plans" / path.name).write_bytes(path.read_bytes())
    monkeypatch.chdir(tmp_path)
    command, _, shown = blocks("console")[number].removeprefix("$ kernelscan ").partition("\n")
    run(command.split())
    printed = "".join(capsys.readouterr())
    assert shown == "".join(f"{line.rstrip()}\n" for line in printed.splitlines())
