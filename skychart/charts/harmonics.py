"""Light from all around as nine coefficients, and the illuminance of any plane from them.

Ramamoorthi R. and Hanrahan P. 2001, An Efficient Representation for Irradiance Environment Maps, SIGGRAPH 2001,
497-500, doi:10.1145/383259.383317: real spherical harmonics of degrees 0 to 2, orthonormal over the sphere and without
the alternating sign of quantum mechanics; a plane receives the sum of A_l L_lm Y_lm(normal), A = π, 2π/3, π/4. They
report errors of 1 % on average (abstract). What is left out begins with degree 4, as the cosine has no part of degree
3; under clear skies of suns from 10° it is up to 6 % of level planes and walls and 13 % of undersides.
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


def basis(vectors: np.ndarray) -> np.ndarray:
    """The nine harmonics, in the order of `HARMONICS`, at unit vectors (..., 3); shape (..., 9)."""
    x, y, z = np.moveaxis(np.asarray(vectors, float), -1, 0)
    polynomials = np.ones_like(x), y, z, x, x * y, y * z, 3 * z**2 - 1, x * z, x**2 - y**2
    return np.stack([term.factor * value for term, value in zip(HARMONICS, polynomials, strict=True)], axis=-1)


def illuminance(coefficients: np.ndarray, normals: np.ndarray) -> np.ndarray:
    """Illuminance (..., plane, channel) of planes with unit `normals` (..., plane, 3), from (..., 9, channel)."""
    weights = np.array([COSINE[term.degree] for term in HARMONICS])
    return (basis(normals) * weights) @ coefficients
