"""The air a sky is computed for: layers with their optical depths over a Lambert ground."""

from dataclasses import dataclass
from typing import Self

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.errors import InputError
from skychart.sky import air, gases
from skychart.sky.haze import Haze

EARTH_RADIUS_KM = 6371.0  # mean radius R1, IUGG / Moritz 2000


@dataclass(frozen=True, eq=False)
class Atmosphere:
    """Spherical layers of molecules and absorbing gas over a Lambert ground.

    ``level_altitude_km``: layer boundaries from the ground (0) upward [km], shape (layer + 1,), ascending.
    ``wavelength_nm``: [nm], shape (wavelength,); a label, each wavelength stands for itself.
    ``rayleigh_depth``, ``absorption_depth``: vertical optical depth of each layer, shape (layer, wavelength), >= 0.
    ``depolarisation``: depolarisation ratio of the molecules for natural light, 0 to 0.5, scalar or (wavelength,).
    ``ground_albedo``: 0 to 1, scalar or (wavelength,).
    ``planet_radius_km``: [km], 1000 or more; a very large one gives the flat case.
    ``haze``: particles in the same layers at the same wavelengths, or none.
    ``refractivity``: refractive index of the air at the ground less one, 0 to 5e-4; it bends the beam of the sun.

    Within a layer every species is spread by the monotone cubic through their column above each level, so the density
    is continuous from layer to layer. Every array is held in double precision and is not to be changed.
    Raises InputError.
    """

    level_altitude_km: NDArray[np.float64]
    wavelength_nm: NDArray[np.float64]
    rayleigh_depth: NDArray[np.float64]
    absorption_depth: NDArray[np.float64]
    depolarisation: NDArray[np.float64]
    ground_albedo: NDArray[np.float64]
    planet_radius_km: float = EARTH_RADIUS_KM
    haze: Haze | None = None
    refractivity: float = 0.0

    def __post_init__(self) -> None:
        level = np.asarray(self.level_altitude_km, dtype=float)
        wavelength = np.asarray(self.wavelength_nm, dtype=float)
        if level.ndim != 1 or len(level) < 2 or level[0] != 0 or not np.all(np.diff(level) > 0) or level[-1] > 200:
            raise InputError(f"level_altitude_km is {level}; accepted: two or more, from 0 upward, at most 200 km")
        if wavelength.ndim != 1 or len(wavelength) == 0 or not np.all(wavelength > 0):
            raise InputError(f"wavelength_nm is {wavelength}; accepted: one or more positive wavelengths in nm")
        layers = (len(level) - 1, len(wavelength))
        checked = {
            "level_altitude_km": level,
            "wavelength_nm": wavelength,
            "rayleigh_depth": _within("rayleigh_depth", self.rayleigh_depth, layers, 0, 100),
            "absorption_depth": _within("absorption_depth", self.absorption_depth, layers, 0, 100),
            "depolarisation": _within("depolarisation", self.depolarisation, layers[1:], 0, 0.5),
            "ground_albedo": _within("ground_albedo", self.ground_albedo, layers[1:], 0, 1),
        }
        if not np.all(checked["rayleigh_depth"].sum(axis=0) > 0):
            raise InputError("rayleigh_depth sums to 0 at some wavelength; accepted: some scattering at each")
        if not 1000 <= self.planet_radius_km <= 1e8:
            raise InputError(f"planet_radius_km is {self.planet_radius_km}; accepted: 1000 to 1e8 km")
        if self.haze is not None and self.haze.depth.shape != layers:
            raise InputError(f"haze depth has shape {self.haze.depth.shape}, accepted: {layers}")
        if not 0 <= self.refractivity <= 5e-4:
            raise InputError(f"refractivity is {self.refractivity}; accepted: 0 to 5e-4")
        for name, value in checked.items():
            object.__setattr__(self, name, value)

    @classmethod
    def standard(cls, wavelength_nm: ArrayLike, ozone_du: float = 300, ground_albedo: ArrayLike = 0.18) -> Self:
        """Real air: US Standard Atmosphere 1976 molecules and ``ozone_du`` Dobson units of ozone (0 to 1000).

        ``wavelength_nm`` 300 to 830 [nm], shape (wavelength,); ``ground_albedo`` 0 to 1, scalar or (wavelength,).
        Raises InputError.
        """
        wavelength = np.atleast_1d(np.asarray(wavelength_nm, dtype=float))
        if not 0 <= ozone_du <= 1000:
            raise InputError(f"ozone column is {ozone_du} Dobson units, accepted: 0 to 1000")
        altitude, density = air.standard_air()
        molecules = air.column_of_layers(altitude, density)
        return cls(
            level_altitude_km=altitude,
            wavelength_nm=wavelength,
            rayleigh_depth=molecules[:, None] * air.rayleigh_cross_section(wavelength),
            absorption_depth=gases.ozone_layers(altitude, ozone_du)[:, None] * gases.ozone_cross_section(wavelength),
            depolarisation=air.depolarisation_ratio(wavelength),
            ground_albedo=np.asarray(ground_albedo, dtype=float),
        )


def _within(name: str, value: ArrayLike, shape: tuple[int, ...], low: float, high: float) -> NDArray[np.float64]:
    array = np.asarray(value, dtype=float)
    try:
        array = np.broadcast_to(array, shape).copy()
    except ValueError:
        raise InputError(f"{name} has shape {array.shape}, accepted: {shape}") from None
    outside = ~((array >= low) & (array <= high))
    if outside.any():
        raise InputError(f"{name} holds {array[outside].flat[0]:g}, accepted: {low:g} to {high:g}")
    return array
