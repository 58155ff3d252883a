"""What a default build costs beside its budgets: `python tests/benchmarks/build_budget.py [JOBS]`.

Wall time, peak memory of the largest process, size of the site and of a sheet with its files, the time of
`skychart --help` and of one reading. Ratios are measured value over budget: up to 1 is kept.
"""

import resource
import subprocess
import sys
import tempfile
import time
from pathlib import Path

COMMAND = [sys.executable, "-m", "skychart"]
READ = ["read", "--sun", "12", "--elevation", "45", "--azimuth", "90"]
HELP_RUNS = 5
BUDGETS = {  # unit, limit
    "build": ("s", 45.0),
    "peak memory": ("GB", 1.5),
    "site": ("MB", 6.0),
    "start page": ("kB", 400.0),
    "sheet, mean": ("kB", 120.0),
    "sheet, largest": ("kB", 120.0),
    "--help": ("s", 0.3),
    "read": ("s", 4.0),
}


def seconds(*arguments: str) -> float:
    """Wall time of one run of the command."""
    start = time.perf_counter()
    subprocess.run([*COMMAND, *arguments], check=True, capture_output=True)
    return time.perf_counter() - start


def size(paths: list[Path]) -> int:
    """Bytes of some files."""
    assert paths
    return sum(path.stat().st_size for path in paths)


def measured(jobs: list[str]) -> dict[str, float]:
    """Every budgeted quantity in its unit."""
    helping, reading = min(seconds("--help") for _ in range(HELP_RUNS)), seconds(*READ)
    with tempfile.TemporaryDirectory() as folder:
        out = Path(folder) / "site"
        building = seconds("build", "--out", str(out), *jobs)
        files = [path for path in out.rglob("*") if path.is_file()]
        sheets = [
            size(list(page.parent.glob(f"{page.stem}[.-]*"))) for page in out.glob("*/*.html") if page.stem != "index"
        ]
        start = [out / "index.html", *(out / "static").iterdir(), *out.glob("molecular/day-*")]
        sizes = size(files), size(start), sum(sheets) / len(sheets), max(sheets)
    peak = resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss
    whole, first, mean, largest = sizes
    found = (building, peak / 1e6, whole / 1e6, first / 1e3, mean / 1e3, largest / 1e3, helping, reading)
    return dict(zip(BUDGETS, found, strict=True))


def main() -> None:
    """Print each quantity with its budget and their ratio."""
    jobs = ["--jobs", sys.argv[1]] if len(sys.argv) > 1 else []
    print(f"{'':<16}{'measured':>12}{'budget':>12}{'ratio':>8}")
    for name, value in measured(jobs).items():
        unit, limit = BUDGETS[name]
        print(f"{name:<16}{value:>9.3g} {unit:<2}{limit:>9.3g} {unit:<2}{value / limit:>8.2f}")


if __name__ == "__main__":
    main()
