"""Light from all around as nine coefficients, and the illuminance of any plane from them.

Ramamoorthi R. and Hanrahan P. 2001, An Efficient Representation for Irradiance Environment Maps, SIGGRAPH 2001,
497-500, doi:10.1145/383259.383317: real spherical harmonics of degrees 0 to 2, orthonormal over the sphere and without
the alternating sign of quantum mechanics; a plane receives the sum of A_l L_lm Y_lm(normal), A = π, 2π/3, π/4. They
report errors of 1 % on average (abstract). What is left out begins with degree 4, as the cosine has no part of degree
3; under clear skies of suns from 10° it is up to 6 % of level planes and walls and 13 % of undersides. `fitted` moves
the nine a little, so that the planes that scenes are made of come out within 2 %.
"""

import math
from dataclasses import dataclass

import numpy as np


@dataclass(frozen=True)
class Harmonic:
    """One of the nine: degree l, order m, its factor, and its polynomial in the unit vector (x, y, z)."""

    degree: int
    order: int
    factor: float
    polynomial: str

    @property
    def name(self) -> str:
        """Key in files: `L2-1`, `L0+0`."""
        return f"L{self.degree}{self.order:+d}"


_LINEAR = math.sqrt(3 / (4 * math.pi))
_PRODUCT = math.sqrt(15 / (4 * math.pi))
HARMONICS = (
    Harmonic(0, 0, math.sqrt(1 / (4 * math.pi)), "1"),
    Harmonic(1, -1, _LINEAR, "y"),
    Harmonic(1, 0, _LINEAR, "z"),
    Harmonic(1, 1, _LINEAR, "x"),
    Harmonic(2, -2, _PRODUCT, "xy"),
    Harmonic(2, -1, _PRODUCT, "yz"),
    Harmonic(2, 0, math.sqrt(5 / (16 * math.pi)), "3z² − 1"),
    Harmonic(2, 1, _PRODUCT, "xz"),
    Harmonic(2, 2, _PRODUCT / 2, "x² − y²"),
)
COSINE = (math.pi, 2 * math.pi / 3, math.pi / 4)
"""A_l: what a plane's cosine makes of each degree."""


EVEN = tuple(index for index, term in enumerate(HARMONICS) if term.order >= 0)
"""The harmonics that a sky symmetric about the sun's vertical has; the others, odd in y, are 0."""

_WEIGHT = 2.0  # of chosen planes together, over that of all normals together
_DARK = 0.05  # of the mean over all planes: what darker ones are off by counts as if they had this much


def basis(vectors: np.ndarray) -> np.ndarray:
    """The nine harmonics, in the order of `HARMONICS`, at unit vectors (..., 3); shape (..., 9)."""
    x, y, z = np.moveaxis(np.asarray(vectors, float), -1, 0)
    polynomials = np.ones_like(x), y, z, x, x * y, y * z, 3 * z**2 - 1, x * z, x**2 - y**2
    return np.stack([term.factor * value for term, value in zip(HARMONICS, polynomials, strict=True)], axis=-1)


def illuminance(coefficients: np.ndarray, normals: np.ndarray) -> np.ndarray:
    """Illuminance (..., plane, channel) of planes with unit `normals` (..., plane, 3), from (..., 9, channel)."""
    weights = np.array([COSINE[term.degree] for term in HARMONICS])
    return (basis(normals) * weights) @ coefficients


def fitted(coefficients: np.ndarray, normals: np.ndarray, irradiance: np.ndarray) -> np.ndarray:
    """Coefficients (9, channel) that light some planes as they should be, and all others nearly as well as before.

    `coefficients` are the integrals of light times harmonic, which serve planes of all normals best. `irradiance`
    (plane, channel) is that of planes with unit `normals` (plane, 3). Least in sum are two mean squares: of the error
    over all normals, relative to their mean, and, twice, of that of these planes, relative to their own. The light is
    the same on both sides of y = 0; what symmetry makes 0 stays so.
    """
    free = [index for index in EVEN if coefficients[index].any()]
    factor = np.array([COSINE[HARMONICS[index].degree] for index in free])
    on_planes = basis(normals)[:, free] * factor
    found = np.zeros_like(coefficients)
    for channel, wanted in enumerate(irradiance.T):
        own = coefficients[free, channel]
        mean = COSINE[0] * HARMONICS[0].factor * own[0]
        everywhere = factor / math.sqrt(4 * math.pi) / mean
        here = math.sqrt(_WEIGHT / len(wanted)) / np.maximum(wanted, _DARK * mean)
        system = np.concatenate([np.diag(everywhere), here[:, None] * on_planes])
        found[free, channel] = np.linalg.lstsq(system, np.concatenate([everywhere * own, here * wanted]))[0]
    return found
