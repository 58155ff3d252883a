"""Time to solve the molecular sky at eleven wavelengths: `python tests/benchmarks/solve_time.py`.

Beside the seconds stands their ratio to a matrix product measured in the same run: it tells a slower program from a
slower or busier machine. The best of a few runs counts, for a disturbance can only add.
"""

import time
from collections.abc import Callable

import numpy as np

from skychart.sky import Atmosphere, solve
from skychart.sky.spectral import MULTIPLE_NM

RUNS = 3
GEMM_SIZE = 2000
LIMIT_S = 6.0


def best(task: Callable[[], object]) -> tuple[float, float]:
    """Wall and processor time [s] of the quickest of a few runs."""
    found = []
    for _ in range(RUNS):
        wall, processor = time.perf_counter(), time.process_time()
        task()
        found.append((time.perf_counter() - wall, time.process_time() - processor))
    return min(found)


def main() -> None:
    """Print both times and their ratio."""
    square = np.random.default_rng(1).random((GEMM_SIZE, GEMM_SIZE), dtype=np.float32)
    gemm, _ = best(lambda: square @ square)
    air = Atmosphere.standard(MULTIPLE_NM)
    solved, processor = best(lambda: solve(air))
    print(
        f"solve, {len(MULTIPLE_NM)} wavelengths  {solved:8.2f} s  {processor:.2f} s of processors, budget {LIMIT_S:g} s"
    )
    print(f"product of {GEMM_SIZE} x {GEMM_SIZE}   {gemm:8.3f} s  single precision")
    print(f"ratio                 {solved / gemm:8.1f}")


if __name__ == "__main__":
    main()
