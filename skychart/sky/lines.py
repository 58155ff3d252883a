"""Lines of water vapour and oxygen: the transmission of a path, averaged over the width of a wavelength node.

Lines are far narrower than any node, so their transmission is no exponential of the path. Each nanometre is a sum of
four exponentials, fitted to HITRAN lines (Rothman L. S. et al. 2009, JQSRT 110, 533-572,
doi:10.1016/j.jqsrt.2009.02.013) at the pressures of a vertical path from the ground. A mean of transmissions over
wavelength is the mean of the sums, at every path; so nodes further apart are averaged after the exponentials.

The transmissions of two paths one behind the other do not multiply: add the paths, then look up.
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.data import load_table
from skychart.errors import InputError
from skychart.sky.wavelengths import checked_wavelength

Array = NDArray[np.float64]

LONGEST_WATER_CM = 2000.0
LONGEST_OXYGEN_AIR_MASS = 400.0

_WEIGHTS = np.array([0.55, 0.27, 0.13, 0.05])  # of the four terms, the same in every row of the table
_ROWS = 512
_SMALLEST_PATH = 1e-3  # paths well below this many cm or air masses absorb in proportion to their length


def band_transmission(wavelength_nm: ArrayLike, water_cm: ArrayLike, oxygen_air_mass: ArrayLike) -> Array:
    """Transmission of a path through the lines of water vapour and oxygen, shape (..., wavelength).

    `wavelength_nm`: nodes [nm], ascending from 360 to 830 by 1 nm or more, shape (wavelength,), two at least. A node
    stands for a band: the mean over the nanometres about it, with weights that fall linearly from the node to 0 at its
    neighbours. So each nanometre is shared between two nodes, and evenly spaced nodes absorb together what the single
    nanometres do. Nodes 1 nm apart give the table itself. Where nothing absorbs the result is exactly 1.

    `water_cm`: water vapour along the path [cm of precipitable water], 0 or more, shape (...). `oxygen_air_mass`: air
    along the path over that of a vertical path through the whole atmosphere at 1013.25 hPa, 0 or more, shape (...);
    they broadcast. The terms are fitted for paths to 400 cm and to 80 air masses; the sums go on smoothly beyond.
    Pressure broadening is that of the vertical path, also where a path lies higher up. Raises InputError.
    """
    water, oxygen = (
        _checked_path(name, path, unit)
        for name, path, unit in (("water path", water_cm, "cm"), ("oxygen path", oxygen_air_mass, "air masses"))
    )
    shares = band_shares(wavelength_nm)
    return (1 - _absorption("h2o", water) @ shares.T) * (1 - _absorption("o2", oxygen) @ shares.T)


def band_shares(wavelength_nm: ArrayLike) -> Array:
    """Part that each nanometre has in the mean over the band of each node, shape (wavelength, 471), rows of sum 1.

    `wavelength_nm`: as for `band_transmission`. The nanometres are 360 to 830. Other absorbers with structure finer
    than the nodes, such as pairs of oxygen molecules, can be averaged alike. Raises InputError.
    """
    tabulated_nm = load_table("gas_h2o_o2_k4_1nm").columns["wavelength_nm"]
    nodes = checked_wavelength(wavelength_nm, tabulated_nm[0], tabulated_nm[-1])
    if nodes.ndim != 1 or nodes.size < 2 or not np.all(np.diff(nodes) >= 1):
        raise InputError(f"wavelengths have shape {nodes.shape}, accepted are two or more, ascending by 1 nm or more")
    shares = np.array([np.interp(tabulated_nm, nodes, one, left=0, right=0) for one in np.eye(nodes.size)])
    return shares / shares.sum(axis=1, keepdims=True)


@dataclass(frozen=True, eq=False)
class LineTable:
    """`band_transmission` tabulated over the path, for millions of look-ups.

    `wavelength_nm`: the nodes, shape (wavelength,). `water`, `oxygen`: transmission in single precision, shape (row,
    wavelength), row `i` for a path p with log(1 + p / 0.001) evenly spaced up to 2000 cm of water, 400 air masses of
    oxygen; longer paths count as these. Linear in between, within 3e-5 of `band_transmission`.
    """

    wavelength_nm: Array
    water: NDArray[np.float32]
    oxygen: NDArray[np.float32]

    @classmethod
    def of(cls, wavelength_nm: ArrayLike) -> "LineTable":
        """Tabulate for nodes as `band_transmission` accepts them. Raises InputError."""
        return cls(
            np.array(wavelength_nm, dtype=float),
            band_transmission(wavelength_nm, _paths(LONGEST_WATER_CM), 0).astype(np.float32),
            band_transmission(wavelength_nm, 0, _paths(LONGEST_OXYGEN_AIR_MASS)).astype(np.float32),
        )

    def at(self, water_cm: ArrayLike, oxygen_air_mass: ArrayLike) -> NDArray[np.float32]:
        """Transmission (..., wavelength) of paths that broadcast to (...), as in `band_transmission`, 0 or more.

        Trusted to be in range. Exactly 1 at wavelengths where nothing absorbs.
        """
        water = _look_up(self.water, water_cm, LONGEST_WATER_CM)
        oxygen = _look_up(self.oxygen, oxygen_air_mass, LONGEST_OXYGEN_AIR_MASS)
        return water * oxygen


def _checked_path(name: str, path: ArrayLike, unit: str) -> Array:
    values = np.asarray(path, dtype=float)
    outside = ~((values >= 0) & np.isfinite(values))
    if outside.any():
        raise InputError(f"{name} is {values[outside].flat[0]:g} {unit}, accepted is 0 or more")
    return values


def _absorption(gas: str, path: Array) -> Array:
    """One minus transmission of every nanometre of the table, (..., nanometre)."""
    columns = load_table("gas_h2o_o2_k4_1nm").columns
    absorbed = np.zeros((*path.shape, len(columns["wavelength_nm"])))
    for number, weight in enumerate(_WEIGHTS, start=1):
        absorbed -= weight * np.expm1(-path[..., None] * columns[f"{gas}_k{number}"])
    return absorbed


def _paths(longest: float) -> Array:
    return _SMALLEST_PATH * np.expm1(np.linspace(0, np.log1p(longest / _SMALLEST_PATH), _ROWS))


def _look_up(table: NDArray[np.float32], path: ArrayLike, longest: float) -> NDArray[np.float32]:
    rows_per_step = (_ROWS - 1) / np.log1p(longest / _SMALLEST_PATH)
    place = np.minimum(np.log1p(np.asarray(path) / _SMALLEST_PATH) * rows_per_step, _ROWS - 1)
    low = np.minimum(place.astype(np.intp), _ROWS - 2)
    part = (place - low).astype(np.float32)[..., None]
    lower, value = table.take(low, axis=0), table.take(low + 1, axis=0)
    value -= lower
    value *= part
    value += lower
    return value
