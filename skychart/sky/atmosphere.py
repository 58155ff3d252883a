"""The air a sky is computed for: layers with their optical depths over a Lambert ground."""

from dataclasses import dataclass
from typing import Self

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.errors import InputError
from skychart.sky import air, gases, ground
from skychart.sky.haze import Haze
from skychart.sky.haze_types import haze_of

REFRACTIVITY = 2.778e-4  # of standard air at 15 degrees Celsius, 550 nm: Ciddor 1996, doi:10.1364/AO.35.001566
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
    def standard(
        cls,
        wavelength_nm: ArrayLike,
        ozone_du: float = 300,
        ground_albedo: ArrayLike | str = 0.18,
        *,
        haze: str | None = None,
        haze_depth_550: float | None = None,
        haze_scale_height_km: float | None = None,
        no2_du: float = 0.0,
        pressure_hpa: float = air.STANDARD_PRESSURE_HPA,
    ) -> Self:
        """Real air: US Standard Atmosphere 1976 molecules, ozone, oxygen pairs, and haze of a named type if wanted.

        ``wavelength_nm`` 300 to 830 [nm], shape (wavelength,); ``ozone_du``, ``no2_du``: columns, 0 to 1000 Dobson
        units; ``ground_albedo`` 0 to 1, scalar or (wavelength,), or the name of a ground; ``haze``, its optical depth
        at 550 nm and its scale height as in ``haze_types.haze_of``; ``pressure_hpa`` at sea level, 300 to 1100 [hPa].
        Lines of water vapour and oxygen are not in it. Raises InputError.
        """
        wavelength = np.atleast_1d(np.asarray(wavelength_nm, dtype=float))
        for gas, column in (("ozone", ozone_du), ("NO2", no2_du)):
            if not 0 <= column <= 1000:
                raise InputError(f"{gas} column is {column} Dobson units, accepted: 0 to 1000")
        altitude, density = air.standard_air(pressure_hpa)
        molecules = air.column_of_layers(altitude, density)
        absorbers = (
            (gases.ozone_layers(altitude, ozone_du), gases.ozone_cross_section(wavelength)),
            (gases.o2_o2_layers(altitude, density), gases.o2_o2_coefficient(wavelength)),
            (gases.no2_layers(altitude, no2_du), gases.no2_cross_section(wavelength)),
        )
        albedo = ground.ground_albedo(ground_albedo, wavelength) if isinstance(ground_albedo, str) else ground_albedo
        return cls(
            level_altitude_km=altitude,
            wavelength_nm=wavelength,
            rayleigh_depth=molecules[:, None] * air.rayleigh_cross_section(wavelength),
            absorption_depth=np.sum([amount[:, None] * strength for amount, strength in absorbers], axis=0),
            depolarisation=air.depolarisation_ratio(wavelength),
            ground_albedo=np.asarray(albedo, dtype=float),
            haze=None if haze is None else haze_of(haze, altitude, wavelength, haze_depth_550, haze_scale_height_km),
            refractivity=REFRACTIVITY * pressure_hpa / air.STANDARD_PRESSURE_HPA,
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
