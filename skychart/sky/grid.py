"""The solver's grid: levels, sun positions, directions."""

from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

# Sun positions of the solution: from this zenith angle [deg], every so many degrees, up to the next.
_SOLAR_ZENITH_STEPS = ((0, 12), (60, 5), (80, 2), (88, 1), (104, 2), (114, 0))


def solar_zenith_nodes_deg() -> Array:
    """Solar zenith angles [deg] the field is kept at, whole degrees, densest through twilight."""
    pieces = [np.arange(a, b, step) for (a, step), (b, _) in pairwise(_SOLAR_ZENITH_STEPS)]
    return np.append(np.concatenate(pieces), _SOLAR_ZENITH_STEPS[-1][0]).astype(float)


@dataclass(frozen=True)
class Grid:
    """How finely the sky is solved.

    ``levels`` from the ground to the top of the air; ``zenith`` directions up and as many down to the ground, half as
    many between; ``azimuth`` directions on half a turn; ``substeps`` parts of each layer for the direct beam.
    """

    levels: int = 32
    zenith: int = 7
    azimuth: int = 5
    substeps: int = 5

    def azimuths(self) -> tuple[Array, Array, float]:
        """Cosines, sines and the weight of each azimuth, the mirrored half turn counted in."""
        phi = (np.arange(self.azimuth) + 0.5) * np.pi / self.azimuth
        return np.cos(phi), np.sin(phi), 2 * np.pi / self.azimuth

    def cosines(self, dip_cosine: float) -> tuple[Array, Array]:
        """Cosines of zenith angle and their weights for a level whose horizon dips by arccos of the ground's limb.

        ``dip_cosine`` >= 0: minus the cosine of the zenith angle of the geometric horizon. Clustered at the horizontal
        and at the horizon by mu = t^2.
        """
        t, w = np.polynomial.legendre.leggauss(self.zenith)
        t, w = 0.5 * (t + 1), 0.5 * w
        up, up_weight = t**2, 2 * t * w
        span = 1 - dip_cosine
        down, down_weight = -(dip_cosine + span * up), span * up_weight
        if dip_cosine == 0:
            return np.concatenate([up, down]), np.concatenate([up_weight, down_weight])
        t, w = np.polynomial.legendre.leggauss(max(2, self.zenith // 2))
        limb, limb_weight = -dip_cosine * 0.5 * (t + 1), dip_cosine * 0.5 * w
        return np.concatenate([up, limb, down]), np.concatenate([up_weight, limb_weight, down_weight])
