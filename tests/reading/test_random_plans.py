"""Plans whose rooms are known: nearly all of them must be found, and nearly nothing else."""

from pathlib import Path

import pytest
from plan_generator import write_plan
from reading.plan_score import Score, score

from kernelscan.reading import read_plan

PLANS = 120
CHUNKS = 4


@pytest.mark.parametrize("chunk", range(CHUNKS))
def test_rooms_of_random_plans(tmp_path: Path, chunk: int) -> None:
    total = Score()
    for seed in range(chunk, PLANS, CHUNKS):
        truth = write_plan(tmp_path / "plan.dxf", seed)
        total += score(truth, read_plan(tmp_path / "plan.dxf"))
    assert total.rooms > 350
    assert total.missed <= 0.005 * total.rooms, total.notes
    assert total.false <= 0.002 * total.rooms, total.notes
    assert total.misnamed == 0, total.notes


def test_the_score_can_fail(tmp_path: Path) -> None:
    truth = write_plan(tmp_path / "plan.dxf", 3)
    plan = read_plan(tmp_path / "plan.dxf")
    assert score(truth, plan).missed == 0
    truth.rooms[0].corners = [(x * 1.01, y) for x, y in truth.rooms[0].corners]
    assert score(truth, plan).missed == score(truth, plan).false == 1


def test_a_plan_of_a_seed_is_always_the_same(tmp_path: Path) -> None:
    first, second = (write_plan(tmp_path / f"{k}.dxf", 11) for k in range(2))
    assert first == second
    assert first != write_plan(tmp_path / "other.dxf", 12)
