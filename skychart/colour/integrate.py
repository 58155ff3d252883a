"""From a quantity known at a few wavelengths to tristimulus values, as one matrix.

Tristimulus values: CIE 015:2018, Colorimetry, section 7.1, summed at 1 nm. Absolute scale: 683 lm/W (SI brochure, 9th
edition, section 2.3.1, rounded as in CIE 015).
"""

import numpy as np
from numpy.typing import ArrayLike

from skychart.colour.observers import colour_matching_functions
from skychart.errors import InputError
from skychart.sky.interpolation import spline_matrix
from skychart.sky.sun import solar_irradiance

LUMINOUS_EFFICACY = 683.0  # lm/W at 540 THz


def tristimulus_matrix(wavelength_nm: ArrayLike, observer: str = "cie-1931-2") -> np.ndarray:
    """Matrix of shape (n, 3) that takes a quantity per unit of solar irradiance to absolute XYZ: `values @ matrix`.

    `wavelength_nm`: four or more ascending wavelengths [nm], shape (n,), that reach from 400 or less to 700 or more.
    `observer`: one of `observers.OBSERVERS`. Values in sr⁻¹ (radiance) give Y in cd/m²; values without a unit
    (transmission, irradiance ratio) give Y in lux. With an observer other than 1931, Y is that observer's.

    Between its wavelengths the quantity is taken as a cubic spline (not-a-knot), beyond the first and last as constant;
    at each nanometre it is multiplied by the solar spectrum and by the colour-matching functions.
    Raises InputError for other wavelengths or an unknown observer.
    """
    nodes = np.asarray(wavelength_nm, dtype=float)
    if nodes.ndim != 1 or nodes.size < 4 or not np.all(np.diff(nodes) > 0):
        raise InputError(f"wavelengths have shape {nodes.shape}, accepted are four or more in ascending order")
    if nodes[0] > 400 or nodes[-1] < 700:
        raise InputError(f"wavelengths go from {nodes[0]:g} to {nodes[-1]:g} nm, accepted are 400 to 700 nm or more")
    fine_nm, functions = colour_matching_functions(observer)
    weights = LUMINOUS_EFFICACY * solar_irradiance(fine_nm)[:, None] * functions
    return spline_matrix(nodes, np.clip(fine_nm, nodes[0], nodes[-1])).T @ weights
