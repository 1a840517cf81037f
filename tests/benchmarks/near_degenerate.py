"""Compare the kernel with the exact oracle on very many rooms that are nearly degenerate.

    python tests/benchmarks/near_degenerate.py            230,000 rooms, of which some 203,000 are not refused
    python tests/benchmarks/near_degenerate.py --count 5000

One in 4,000 has some 4,400 walls. The seed is fixed: every run of the same count asks about the same rooms. The exit
code is 1 if one is misjudged.
"""

import argparse
import sys
import time
from collections import Counter
from concurrent.futures import ProcessPoolExecutor
from pathlib import Path

sys.path.insert(0, str(Path(__file__).resolve().parent.parent))

import numpy as np
import polygons
from oracle import exact_kernel

from kernelscan import CertificateError, GeometryError, verify_kernel
from kernelscan.geometry.kernel import kernel_of_rings
from kernelscan.geometry.rings import as_rings

SEED = 20240501
BLOCK = 1000
LARGE_EVERY = 4000


def judged(outline: np.ndarray, certify: bool) -> str:
    """Return the kind, or ``refused``, or what is wrong."""
    try:
        rings = as_rings(outline)
    except GeometryError:
        return "refused"
    kernel, truth = kernel_of_rings(rings), exact_kernel([ring.tolist() for ring in rings])
    if kernel.kind != truth.kind or set(kernel.rationals()) != set(truth.corners):
        return "MISJUDGED"
    if certify:
        try:
            verify_kernel(outline, kernel)
        except CertificateError:
            return "NOT CERTIFIED"
    return kernel.kind if len(rings[0]) <= 4096 else f"{kernel.kind}, more than 4,096 walls"


def block(number: int, size: int) -> Counter[str]:
    """Judge one block of rooms; each block has its own seed, so that blocks can run side by side."""
    rng = np.random.default_rng([SEED, number])
    results: Counter[str] = Counter()
    for k in range(size):
        large = (number * BLOCK + k) % LARGE_EVERY == 0
        results[judged(polygons.nearly_degenerate(rng, large), certify=k % 20 == 0)] += 1
    return results


def main() -> int:
    parser = argparse.ArgumentParser(
        description="Compare kernels of nearly degenerate rooms with an exact oracle."
    )
    parser.add_argument("--count", type=int, default=230_000)
    parser.add_argument("--processes", type=int, default=2)
    options = parser.parse_args()
    started, results = time.perf_counter(), Counter[str]()
    sizes = [min(BLOCK, options.count - k) for k in range(0, options.count, BLOCK)]
    with ProcessPoolExecutor(options.processes) as pool:
        for result in pool.map(block, range(len(sizes)), sizes):
            results += result
    for name, count in sorted(results.items()):
        print(f"{count:9,}  {name}")
    print(f"{results.total():9,}  rooms in {time.perf_counter() - started:.0f} s")
    return int(results["MISJUDGED"] + results["NOT CERTIFIED"] > 0)


if __name__ == "__main__":
    sys.exit(main())
