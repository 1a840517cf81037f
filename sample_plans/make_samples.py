"""Draws the sample plans: seven buildings of one invented site, a community workshop with a library.

``python sample_plans/make_samples.py`` writes them anew beside this file, or into the folder given as only argument.
The same bytes come out every time. The drawings themselves are in ``straight_plans.py`` and ``curved_plans.py``.
"""

import sys
from collections.abc import Callable
from pathlib import Path

from curved_plans import library, pavilion
from drafting import write_drawing
from ezdxf.document import Drawing
from straight_plans import annex, mezzanine, small_features, studios, workshop

__all__ = ["SAMPLES", "main"]

SAMPLES: dict[str, Callable[[], Drawing]] = {
    "workshop-ground-floor": workshop,
    "library-wing": library,
    "annex-feet-and-inches": annex,
    "studios-in-blocks": studios,
    "mezzanine": mezzanine,
    "pavilion-on-survey-grid": pavilion,
    "small-features": small_features,
}
"""File names without ``.dxf``, and what draws them."""


def main(folder: Path) -> None:
    """Write every sample into a folder."""
    for name, draw in SAMPLES.items():
        write_drawing(draw(), folder / f"{name}.dxf")


if __name__ == "__main__":
    main(Path(sys.argv[1]) if len(sys.argv) > 1 else Path(__file__).parent)
