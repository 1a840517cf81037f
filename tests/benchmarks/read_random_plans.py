"""Read many random plans and print how many rooms were found; run it with the number of plans, or for 2,000."""

import sys
from pathlib import Path
from tempfile import TemporaryDirectory

sys.path.insert(0, str(Path(__file__).resolve().parent.parent))

from plan_generator import write_plan
from reading.plan_score import Score, score

from kernelscan.reading import read_plan


def main(plans: int) -> None:
    """Print the totals, and how each plan that went wrong was drawn."""
    total = Score()
    with TemporaryDirectory() as folder:
        path = Path(folder) / "plan.dxf"
        for seed in range(plans):
            truth = write_plan(path, seed)
            total += score(truth, read_plan(path))
    print(*total.notes, sep="\n")
    found = 100 * (1 - total.missed / total.rooms)
    print(
        f"{plans} plans, {total.rooms} rooms: {found:.3f} % found, {total.false} false, {total.misnamed} misnamed"
    )


if __name__ == "__main__":
    main(int(sys.argv[1]) if len(sys.argv) > 1 else 2000)
