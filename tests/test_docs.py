"""The documentation says what the program does: figures, keys, columns, layers, cautions, links."""

import os
import re
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path
from typing import Any
from xml.etree import ElementTree

import pytest
from typer.main import get_command

from kernelscan.cli.app import DONE, PROGRAM_FAULT, WRONG_INPUT, app
from kernelscan.coverage.cautions import CAUTIONS
from kernelscan.markup.dxf_blocks import LAYERS, PREFIX
from kernelscan.report.document import report_schema
from kernelscan.report.schedule import SCHEDULE_COLUMNS

ROOT = Path(__file__).resolve().parent.parent
DOCS = ROOT / "docs"
PAGES = sorted([*DOCS.rglob("*.md"), *ROOT.glob("*.md"), *(ROOT / "sample_plans").glob("*.md")])
FIGURES = (
    "column",
    "l-room",
    "l-room-view",
    "pilaster",
    "pinwheel",
    "splayed-niche",
    "square-niche",
    "stepped-room",
    "t-room",
    "u-room",
)


def page(name: str) -> str:
    return (DOCS / name).read_text(encoding="utf-8")


def section(text: str, heading: str) -> str:
    """Return what stands between a heading of the second level and the next."""
    return re.split(r"^## ", text.split(f"## {heading}\n", 1)[1], maxsplit=1, flags=re.MULTILINE)[0]


def names_in_first_column(text: str) -> list[str]:
    """Return every name in backquotes in the first column of the tables."""
    rows = [line.split("|")[1] for line in text.splitlines() if line.startswith("|")]
    return [name for row in rows for name in re.findall(r"`([^`]+)`", row)]


def keys_of_schema(node: Any) -> Iterator[str]:
    """Yield every property name that a JSON Schema defines, at any depth."""
    if isinstance(node, dict):
        for word, value in node.items():
            if word == "properties":
                yield from value
            yield from keys_of_schema(value)
    elif isinstance(node, list):
        for each in node:
            yield from keys_of_schema(each)


@pytest.fixture(scope="module")
def drawn_figures(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("figures")
    command = [sys.executable, str(DOCS / "make_figures.py"), str(folder)]
    subprocess.run(command, check=True, env={**os.environ, "PYTHONHASHSEED": "7"})
    return folder


@pytest.mark.parametrize("name", FIGURES)
def test_committed_figures_are_what_the_program_draws(name: str, drawn_figures: Path) -> None:
    committed = (DOCS / "figures" / f"{name}.svg").read_text(encoding="utf-8")
    assert committed == (drawn_figures / f"{name}.svg").read_text(encoding="utf-8")


def test_every_figure_is_drawn_and_shown(drawn_figures: Path) -> None:
    assert sorted(path.stem for path in drawn_figures.iterdir()) == list(FIGURES)
    assert sorted(re.findall(r"\(figures/([a-z-]+)\.svg\)", page("what-a-kernel-is.md"))) == list(FIGURES)


@pytest.mark.parametrize("name", FIGURES)
def test_figures_are_well_formed_and_titled(name: str) -> None:
    root = ElementTree.parse(DOCS / "figures" / f"{name}.svg").getroot()
    assert root.findtext("{http://www.w3.org/2000/svg}title")


def test_pages_name_only_options_that_the_program_takes() -> None:
    commands = get_command(app).commands.values()
    known = {word for command in commands for parameter in command.params for word in parameter.opts}
    pages = [path for path in DOCS.rglob("*.md") if path.name != "benchmarks.md"]
    named = {
        word for path in pages for word in re.findall(r"(?<![\w-])--[a-z][a-z-]*", path.read_text("utf-8"))
    }
    assert {"--unit", "--out"} <= named <= known | {"--help"}


def test_report_page_names_every_key_of_the_schema_and_no_other() -> None:
    text = section(page("report.md"), "report.json")
    keys = set(keys_of_schema(report_schema()))
    assert set(names_in_first_column(text)) <= keys
    assert {key for key in keys if f"`{key}`" not in text} == set()


def test_report_page_names_the_columns_of_the_schedule_in_order() -> None:
    text = section(page("report.md"), "schedule.csv")
    assert names_in_first_column(text) == list(SCHEDULE_COLUMNS)


def test_report_page_names_the_layers_of_the_markup() -> None:
    text = section(page("report.md"), "markup.dxf")
    assert names_in_first_column(text) == [f"{PREFIX}-{minor}" for minor in LAYERS]


def test_report_page_names_the_exit_codes() -> None:
    codes = re.findall(r"^\| (\d+) \|", section(page("report.md"), "Exit codes"), flags=re.MULTILINE)
    assert [int(code) for code in codes] == [DONE, 1, WRONG_INPUT, PROGRAM_FAULT]


def test_getting_started_shows_what_the_program_prints(tmp_path: Path) -> None:
    subprocess.run([sys.executable, str(DOCS / "refresh_outputs.py"), str(tmp_path)], check=True)
    fresh = (tmp_path / "getting-started.md").read_text(encoding="utf-8")
    assert fresh == page("getting-started.md"), "run python docs/refresh_outputs.py"


def test_cautions_page_has_every_caution_word_for_word() -> None:
    numbered = re.findall(r"^\d+\. (.+)$", page("cautions.md"), flags=re.MULTILINE)
    assert numbered == list(CAUTIONS)


def test_every_decision_is_listed() -> None:
    listed = re.findall(r"\(([\w-]+\.md)\)", page("decisions/README.md"))
    assert listed == sorted(path.name for path in (DOCS / "decisions").glob("[0-9]*.md"))


@pytest.mark.parametrize("name", sorted(path.name for path in (DOCS / "decisions").glob("[0-9]*.md")))
def test_every_decision_has_its_four_parts(name: str) -> None:
    parts = re.findall(r"^\*\*([\w ]+)\.\*\*", page(f"decisions/{name}"), flags=re.MULTILINE)
    assert [part for part in parts if part != "What it costs"] == [
        "Question",
        "Weighed",
        "Chosen",
        "What would change it",
    ]


@pytest.mark.parametrize("path", PAGES, ids=lambda path: path.relative_to(ROOT).as_posix())
def test_links_lead_somewhere(path: Path) -> None:
    targets = re.findall(r"\]\(([^)#]+)(?:#[^)]*)?\)", path.read_text(encoding="utf-8"))
    local = [target for target in targets if not target.startswith(("http://", "https://"))]
    assert [target for target in local if not (path.parent / target).exists()] == []
