"""Time every case and write docs/benchmarks.md and the growth plot docs/figures/growth.svg.

python tests/benchmarks/write_benchmarks.py            all of it: some ten minutes on a quiet machine
python tests/benchmarks/write_benchmarks.py --light    leaves out the cases of a million edges, writes nothing
"""

import argparse
import platform
import sys
from datetime import UTC, datetime
from functools import partial
from importlib.metadata import version
from math import log10
from pathlib import Path

HERE = Path(__file__).resolve().parent
sys.path[:0] = [str(HERE), str(HERE.parent)]

import cases  # noqa: E402 - beside this file
import svgwrite  # noqa: E402
import test_visible_speed  # noqa: E402

from kernelscan.geometry.visible import visible_from  # noqa: E402

DOCS = HERE.parent.parent / "docs"
HEAD = """Written by `tests/benchmarks/write_benchmarks.py`. Medians of runs in which all sides take turns in one
process; in brackets how many times as long as ours. Our figure is the exact kernel of a ring already made; the others
work in floats and are not checked. The numpy pass (edge vectors, cross product, comparison) finds nothing: it is the
limit."""
VIEWS_HEAD = (
    """What one eye sees of a room whose rings are already made, beside pyvispoly, an exact library:"""
)
SIZES = (10, 30, 100, 300, 1000, 3000, 10_000, 30_000, 100_000, 300_000, 1_000_000)
LARGEST = {"shapely clipping": 3000, "float deque": 100_000}
CURVES = {
    "kernelscan": "#0072B2",
    "float deque": "#D55E00",
    "shapely clipping": "#000000",
    "numpy pass": "#009E73",
}
DASHES = {"kernelscan": "none", "float deque": "9,3", "shapely clipping": "2,3", "numpy pass": "9,3,2,3"}


def processor() -> str:
    """Return the processor's name as far as the system tells it."""
    info = Path("/proc/cpuinfo")
    if info.exists():
        for line in info.read_text(encoding="utf-8").splitlines():
            if line.startswith("model name"):
                return line.partition(":")[2].strip()
    return platform.processor() or platform.machine()


def setting() -> str:
    names = ("kernelscan", "numpy", "scipy", "shapely")
    versions = ", ".join(f"{name} {version(name)}" for name in names)
    today = datetime.now(UTC).date().isoformat()
    return f"{today}, {processor()}, {platform.system()}, Python {platform.python_version()}, {versions}."


def row(case: cases.Case, times: dict[str, float]) -> str:
    ours = times["kernelscan"]
    cells = [f"{case.name} | {shown(ours)}"]
    cells += [
        f"{shown(times[name])} ({ratio(times[name] / ours)})" if name in times else ""
        for name in list(cases.RIVALS)[1:]
    ]
    reached = [
        f"{'yes' if times[name] / ours >= goal else 'NO'}: {goal_text(name, goal)}"
        for name, goal in case.goals.items()
    ]
    return "| " + " | ".join(cells) + " | " + "; ".join(reached) + " |"


def goal_text(name: str, goal: float) -> str:
    return f"at most {1 / goal:.0f} passes" if goal < 1 else f"at least {goal:.0f} x {name}"


def ratio(number: float) -> str:
    return f"{number:.0f} x" if number >= 10 else f"{number:.2g} x"


def shown(seconds: float) -> str:
    if seconds < 1e-3:
        return f"{seconds * 1e6:.0f} µs"
    return f"{seconds * 1e3:.3g} ms" if seconds < 1 else f"{seconds:.2f} s"


def table(chosen: list[cases.Case]) -> list[str]:
    names = list(cases.RIVALS)
    lines = ["| room | " + " | ".join(names) + " | goal |", "|---" * (len(names) + 2) + "|"]
    for case in chosen:
        lines.append(row(case, cases.timed(case)))
        print(lines[-1], flush=True)
    return lines


def views() -> list[str]:
    """Return a table of the visible region beside an independent exact library."""
    lines = ["| room | visible region | pyvispoly |", "|---|---|---|"]
    for corners, columns in test_visible_speed.CASES:
        rings = test_visible_speed.room_of(corners, columns)
        eye = test_visible_speed.eye_in(rings)
        sides = [partial(visible_from, rings, eye), test_visible_speed.other_side(rings, eye)]
        ours, theirs = test_visible_speed.medians(sides, 15 if corners <= 10_000 else 5)
        others = f"{theirs * 1e3:.2f} ms ({theirs / ours:.2g} x)"
        row = f"| {corners:,} walls, {columns} columns | {ours * 1e3:.2f} ms | {others} |"
        print(row, flush=True)
        lines.append(row)
    return lines


def growth() -> dict[str, list[tuple[int, float]]]:
    """Return seconds against n on random stars."""
    curves: dict[str, list[tuple[int, float]]] = {name: [] for name in CURVES}
    for n in SIZES:
        sides = tuple(name for name in CURVES if n <= LARGEST.get(name, n))
        case = cases.Case(str(n), cases.one(lambda n=n: cases.star(n)), sides, 5 if n < 1e5 else 3, {})
        for name, seconds in cases.timed(case).items():
            curves[name].append((n, seconds))
    return curves


def plot(curves: dict[str, list[tuple[int, float]]], path: Path) -> None:
    """Draw both axes logarithmic, with slopes for n, n log n and n squared."""
    drawing = svgwrite.Drawing(str(path), size=("720px", "480px"), viewBox="0 0 720 480", debug=False)
    drawing.add(drawing.rect((0, 0), (720, 480), fill="white"))

    def at(n: float, seconds: float) -> tuple[float, float]:
        return round(70 + (log10(n) - 1) * 100, 2), round(430 - (log10(seconds) + 6) * 55, 2)

    def text(words: str, place: tuple[float, float], colour: str = "black", anchor: str = "start") -> None:
        drawing.add(
            drawing.text(
                words, place, fill=colour, font_family="sans-serif", font_size=12, text_anchor=anchor
            )
        )

    for k in range(1, 7):
        drawing.add(drawing.line(at(10**k, 1e-6), at(10**k, 10), stroke="#ddd"))
        text(f"{10**k:,}", (at(10**k, 1e-6)[0], 448), anchor="middle")
    for k, name in zip(
        range(-6, 2), ("1 µs", "10 µs", "100 µs", "1 ms", "10 ms", "100 ms", "1 s", "10 s"), strict=True
    ):
        drawing.add(drawing.line(at(10, 10**k), at(1e6, 10**k), stroke="#ddd"))
        text(name, (64, at(10, 10**k)[1] + 4), anchor="end")
    text("edges n of a random star", (320, 470), anchor="middle")
    slopes = {"n": lambda n: n, "n log n": lambda n: n * log10(n), "n²": lambda n: n * n}
    for name, f in slopes.items():
        ends = [(n, 2e-6 * f(n) / f(10)) for n in (10, 100, 1000, 10_000, 100_000, 1_000_000)]
        ends = [(n, s) for n, s in ends if s <= 10]
        drawing.add(
            drawing.polyline([at(*end) for end in ends], fill="none", stroke="#999", stroke_width=0.7)
        )
        text(name, (at(*ends[-1])[0] + 4, at(*ends[-1])[1] + 4), "#666")
    for k, (name, curve) in enumerate(curves.items()):
        line = drawing.polyline(
            [at(*point) for point in curve], fill="none", stroke=CURVES[name], stroke_width=2
        )
        if DASHES[name] != "none":
            line["stroke-dasharray"] = DASHES[name]
        drawing.add(line)
        sample = drawing.line((90, 30 + 18 * k), (125, 30 + 18 * k), stroke=CURVES[name], stroke_width=2)
        if DASHES[name] != "none":
            sample["stroke-dasharray"] = DASHES[name]
        drawing.add(sample)
        text(name, (132, 34 + 18 * k))
    drawing.save(pretty=True)


def main() -> int:
    parser = argparse.ArgumentParser(description="Time kernels beside other methods.")
    parser.add_argument("--light", action="store_true", help="leave out a million edges, and write nothing")
    light = parser.parse_args().light
    chosen = [case for case in cases.CASES if not (light and "1,000,000" in case.name)]
    lines = table(chosen)
    if light:
        return 0
    figure = DOCS / "figures" / "growth.svg"
    figure.parent.mkdir(exist_ok=True)
    plot(growth(), figure)
    head = ["# Benchmarks", "", HEAD, "", setting(), ""]
    tail = [
        "",
        "![Time against n, both axes logarithmic](figures/growth.svg)",
        "",
        VIEWS_HEAD,
        "",
        *views(),
        "",
    ]
    (DOCS / "benchmarks.md").write_text("\n".join(head + lines + tail), encoding="utf-8", newline="\n")
    return 0


if __name__ == "__main__":
    sys.exit(main())
