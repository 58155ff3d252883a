"""Time and step errors of the local solver: `python tests/benchmarks/local.py`.

One hazy atmosphere of the site: 11 wavelengths, 60 suns, 24 view directions; the full solution, its closure and one
exact scattering of each. Then each step is made finer by itself, and the greatest change of the multiply scattered
radiance is printed.
"""

import time
from collections.abc import Callable
from itertools import pairwise

import numpy as np

from skychart.sky.haze import Haze
from skychart.sky.local import FlatAir, FlatField, Streams, one_scattering, solve_closure, solve_flat

WAVELENGTH_NM = np.linspace(380, 780, 11)
SUN = np.radians(np.linspace(0, 88, 60))
VIEW = np.cos(np.radians(np.linspace(0, 87, 24)))
ANGLE_DEG = np.unique(np.concatenate([np.linspace(0, 10, 101), np.linspace(10, 180, 171)]))
ASYMMETRY, SCATTERED = 0.7, 0.95


def air(boundaries: int = 23) -> FlatAir:
    """Molecules over 8 km, haze of depth 0.4 at 550 nm over 2 km and to 14 km, all flat."""
    x = np.linspace(0, 1, boundaries - 1)
    altitude_km = np.insert(80 * (0.2 * x + 0.8 * x**2.5), 1, 0.1)
    molecules, particles = (-np.diff(np.exp(-altitude_km / height)) for height in (8.0, 2.0))
    particles *= altitude_km[1:] < 14
    rayleigh = molecules[:, None] * 0.097 * (550 / WAVELENGTH_NM) ** 4.08
    depth = (particles / particles.sum())[:, None] * 0.4 * (550 / WAVELENGTH_NM)
    cosine = np.cos(np.radians(ANGLE_DEG))
    phase = (1 - ASYMMETRY**2) / (1 + ASYMMETRY**2 - 2 * ASYMMETRY * cosine) ** 1.5
    count = len(WAVELENGTH_NM)
    haze = Haze(depth, np.full(count, SCATTERED), ANGLE_DEG, np.tile(phase, (count, 1)))

    def beam(extinction: np.ndarray) -> np.ndarray:
        above = np.concatenate([np.cumsum(extinction[::-1], axis=0)[::-1], np.zeros((1, count))])
        return np.exp(-above[:, None] / np.cos(SUN)[:, None])

    return FlatAir(
        rayleigh_depth=rayleigh,
        absorption_depth=np.zeros_like(rayleigh),
        haze=haze,
        depolarisation=np.full(count, 0.03),
        ground_albedo=np.full(count, 0.2),
        solar_zenith_angle=SUN,
        beam=beam(rayleigh + depth),
        scaled_beam=beam(rayleigh + depth * (1 - SCATTERED * haze.peak)),
    )


def radiance(field: FlatField) -> np.ndarray:
    """Multiply scattered radiance toward, beside and away from the sun, (sun, view, azimuth, wavelength)."""
    suns, views = np.arange(len(SUN))[:, None, None], np.arange(len(VIEW))[:, None]
    return one_scattering(field, VIEW).stokes(suns, views, np.array([0, 0.5, 1]) * np.pi)[..., 0, :]


def main() -> None:
    """Print seconds of each stage and the change each finer step makes."""
    given = air()
    solve_flat(given)
    ticks = [time.perf_counter()]
    field = solve_flat(given)
    ticks.append(time.perf_counter())
    closure = solve_closure(given)
    ticks.append(time.perf_counter())
    for solved in (field, closure):
        one_scattering(solved, VIEW)
        ticks.append(time.perf_counter())
    names = ("full solution", "closure", "F: its last scattering", "G: that of the closure")
    for name, (start, end) in zip(names, pairwise(ticks), strict=True):
        print(f"{name:<26}{end - start:6.2f} s")
    print(f"{'together':<26}{ticks[-1] - ticks[0]:6.2f} s, aim 2 s on two cores")

    base = radiance(field)
    finer: dict[str, Callable[[], FlatField]] = {
        "45 boundaries for 23": lambda: solve_flat(air(45)),
        "16 + 16 streams for 12 + 12": lambda: solve_flat(given, Streams.double_gauss(16)),
        "24 moments for 16": lambda: solve_flat(given, moments=24),
        "24 moments, 24 modes for 16": lambda: solve_flat(given, moments=24, modes=24),
    }
    print("Change of the multiply scattered radiance, RMS and greatest:")
    for name, solve in finer.items():
        change = radiance(solve()) / base - 1
        print(f"{name:<30}{np.sqrt((change**2).mean()):8.3%}{np.abs(change).max():8.2%}")


if __name__ == "__main__":
    main()
