"""What the default grid leaves out, against one finer in every dimension: `python tests/benchmarks/convergence.py`.

Twelve directions of standard air at every sun listed: luminance and u'v' from the eleven wavelengths of multiple
scattering. Takes a minute or two; exits with 1 if a limit, agreed before anything was measured, is passed.
"""

import sys
from itertools import pairwise

import numpy as np

from skychart.colour.differences import uv_prime
from skychart.colour.integrate import tristimulus_matrix
from skychart.sky import Atmosphere, molecular, solve
from skychart.sky.grid import Grid
from skychart.sky.spectral import MULTIPLE_NM

FINER = Grid(levels=40, zenith=10, azimuth=8, substeps=8)
FINER_SOLAR_ZENITH_STEPS = ((0, 8), (56, 4), (80, 1), (114, 0))  # from this angle [deg], every so many degrees
VIEWS = (
    (90, 0),
    (45, 0),
    (45, 90),
    (45, 180),
    (20, 0),
    (20, 90),
    (20, 180),
    (5, 0),
    (5, 90),
    (5, 180),
    (2, 0),
    (2, 180),
)
LIMIT_PERCENT = {
    **dict.fromkeys((60, 30, 10, 5, 2), 0.3),
    **dict.fromkeys((0, -2, -4, -6), 1.0),
    **dict.fromkeys((-8, -10), 2.0),
}
LIMIT_UV = 0.001


def finer_solar_zenith_nodes_deg() -> np.ndarray:
    """Solar zenith angles [deg] with at most two thirds of the default spacing, whole degrees as it wants them."""
    pieces = [np.arange(a, b, step) for (a, step), (b, _) in pairwise(FINER_SOLAR_ZENITH_STEPS)]
    return np.append(np.concatenate(pieces), FINER_SOLAR_ZENITH_STEPS[-1][0]).astype(float)


def sky_XYZ(grid: Grid) -> np.ndarray:
    """Tristimulus values [cd/m² in Y] of the views below each sun, shape (sun, view, 3)."""
    suns = np.array(list(LIMIT_PERCENT), float)[:, None]
    elevation, azimuth = np.array(VIEWS, float).T
    sky = solve(Atmosphere.standard(MULTIPLE_NM), grid)
    return sky.stokes(suns, elevation, azimuth)[..., 0, :] @ tristimulus_matrix(MULTIPLE_NM)


def main() -> int:
    """Print the greatest differences at each sun and whether they keep to their limits."""
    default = sky_XYZ(Grid())
    molecular.solar_zenith_nodes_deg = finer_solar_zenith_nodes_deg
    finer = sky_XYZ(FINER)
    percent = 100 * (default[..., 1] / finer[..., 1] - 1)
    moved = np.linalg.norm(uv_prime(default) - uv_prime(finer), axis=-1)
    print(f"{Grid()}\nagainst {FINER} and {len(finer_solar_zenith_nodes_deg())} solar zenith angles\n")
    print(f"{'sun':>4}{'luminance, most':>17}{'rms':>8}{'limit':>8}{'u′v′, most':>12}{'limit':>8}")
    missed = 0
    for (sun, limit), off, shift in zip(LIMIT_PERCENT.items(), percent, moved, strict=True):
        most, rms = off[np.argmax(np.abs(off))], np.sqrt(np.mean(off**2))
        wrong = abs(most) > limit or shift.max() > LIMIT_UV
        missed += wrong
        word = "  MISSED" if wrong else ""
        print(f"{sun:>3}°{most:>+15.2f} %{rms:>6.2f} %{limit:>6.1f} %{shift.max():>12.5f}{LIMIT_UV:>8}{word}")
    print(f"\n{len(LIMIT_PERCENT) - missed} of {len(LIMIT_PERCENT)} suns within the limits")
    return 1 if missed else 0


if __name__ == "__main__":
    sys.exit(main())
