"""Grounds: how much light a surface returns at each wavelength.

Feister U., Grewe R. 1995, Photochem. Photobiol. 62, 736-744, doi:10.1111/j.1751-1097.1995.tb08723.x (grass to thin
snow); Bowker D. E. et al. 1985, NASA Reference Publication 1139 (fresh dry snow, water); Wiscombe W. J., Warren S. G.
1980, J. Atmos. Sci. 37, 2712-2733, doi:10.1175/1520-0469(1980)037<2712:AMFTSA>2.0.CO;2 (snow by theory).
"""

import numpy as np
from numpy.typing import ArrayLike

from skychart.data import load_table
from skychart.errors import InputError
from skychart.sky.wavelengths import checked_wavelength


def ground_names() -> tuple[str, ...]:
    """Names of the grounds that are known, as a user writes them: "grass", "concrete-dry" and so on."""
    columns = load_table("ground_albedo").columns
    return tuple(column.replace("_", "-") for column in columns if column != "wavelength_nm")


def ground_albedo(ground: str | float, wavelength_nm: ArrayLike) -> np.ndarray:
    """Albedo of a ground that sends light back evenly (Lambert's law), 0 to 1, of the shape of `wavelength_nm`.

    `ground`: one of `ground_names()`, or a grey share of light, 0 to 1, the same at all wavelengths. `wavelength_nm`:
    300 to 830 [nm], any shape; measured every 10 nm, linear in between, the last measured value held towards 830 nm.
    Raises InputError for another name, share or wavelength.
    """
    columns = load_table("ground_albedo").columns
    tabulated_nm = columns["wavelength_nm"]
    wavelength = checked_wavelength(wavelength_nm, tabulated_nm[0], tabulated_nm[-1])
    if not isinstance(ground, str):
        if not 0 <= ground <= 1:
            raise InputError(f"ground albedo is {ground}, accepted is 0 to 1")
        return np.full(wavelength.shape, float(ground))
    if ground not in ground_names():
        raise InputError(f"unknown ground {ground!r}; known: {', '.join(ground_names())}")
    return np.asarray(np.interp(wavelength, tabulated_nm, columns[ground.replace("-", "_")]))
