"""Roles of layers by pattern and by name."""

import pytest

from kernelscan.reading.layers import LayerPatterns, layer_role, matches
from kernelscan.reading.texts import words


@pytest.mark.parametrize(
    ("name", "expected"),
    [
        ("A-WALL", ("a", "wall")),
        ("x$0$A-WALL", ("a", "wall")),
        ("site-08$0$sub$12$A-AREA-IDEN", ("a", "area", "iden")),
        ("plan|A-DOOR", ("a", "door")),
        ("RoomOutline2", ("room", "outline")),
        ("Außenwände_EG", ("aussenwande", "eg")),
        ("Pièces", ("pieces",)),
        ("A.Wall_Internal", ("a", "wall", "internal")),
        ("0", ()),
    ],
)
def test_words_of_a_name(name: str, expected: tuple[str, ...]) -> None:
    assert words(name) == expected


@pytest.mark.parametrize(
    ("layer", "role"),
    [
        *[
            (name, "room")
            for name in (
                "A-AREA", "a-area-iden", "ROOMS", "Raum", "RÄUME", "pièce", "Local", "VANO", "stanza", "Habitación",
                "salas", "ref$0$A-AREA", "SPACE 3", "Pokój",
            )
        ],
        *[
            (name, "wall")
            for name in ("A-WALL", "walls", "Wände", "MUR", "pareti", "Tabique", "x$0$A-WALL-FULL", "wall2")
        ],
        *[
            (name, "opening")
            for name in ("A-DOOR", "A-GLAZ", "windows_high", "Türen", "fenêtres", "PUERTAS", "A-WALL-OPENING", "porta")
        ],
        *[(name, "obstacle") for name in ("A-COLS", "S-COLS", "Columns", "Stützen", "poteaux", "pilastri", "columna")],
        *[(name, "furniture") for name in ("A-FURN", "Möbel", "I-EQPM", "room furniture")],
        *[
            (name, "annotation")
            for name in ("A-ANNO-DIMS", "TEXT", "ROOM-LABELS", "A-WALL-PATT", "A-DOOR-IDEN", "Defpoints", "TITLEBLOCK")
        ],
        *[(name, "stairs") for name in ("A-FLOR-STRS", "Treppe")],
        *[(name, "other") for name in ("S-FOOTER", "A-ROOF", "A-CLNG", "A-FLOR", "S-STEM-WALL")],
        *[(name, "unknown") for name in ("0", "Layer 1", "walkablearea", "mushroom", "wallpaper", "", "MYROOMS")],
    ],
)  # fmt: skip
def test_roles_by_convention(layer: str, role: str) -> None:
    assert layer_role(layer, LayerPatterns()).role == role


def test_the_reason_names_the_word() -> None:
    assert layer_role("A-AREA", LayerPatterns()).reason == "the word 'area'"


def test_patterns_come_before_the_conventions() -> None:
    patterns = LayerPatterns(rooms=("*-zone?",), obstacles=("A-W*",), ignored=("A-*",))
    assert layer_role("Fit-ZONE1", patterns).role == "room"
    assert layer_role("A-WALL", patterns).role == "obstacle"
    assert layer_role("A-AREA", patterns).role == "other"
    assert layer_role("ROOMS", patterns).role == "other", (
        "patterns for rooms replace the conventions for rooms"
    )
    assert layer_role("Doors", patterns).role == "opening", "and leave the others alone"
    assert layer_role("A-WALL", patterns).reason == "matches 'A-W*'"


def test_patterns_are_case_blind_and_shell_style() -> None:
    assert matches("Raum [EG]", ("raum*",)) == "raum*"
    assert matches("A-AREA", ("a-ar?a", "x")) == "a-ar?a"
    assert matches("A-AREA", ("AREA",)) == ""
    assert matches("anything", ()) == ""
