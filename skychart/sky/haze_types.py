"""Named kinds of haze, made from particles whose scattering is tabulated.

Particles and their mixing: Hess M., Koepke P., Schult I. 1998, Optical Properties of Aerosols and Clouds: The Software
Package OPAC, Bull. Amer. Meteor. Soc. 79, 831-844, doi:10.1175/1520-0477(1998)079<0831:OPOAAC>2.0.CO;2; their
scattering by Mie's theory, see the headers of the tables. Optical depths and scale heights are common round figures, no
source: clean and ordinary continental air, a day of marked haze, clean sea air, dust over a dry country.
"""

from collections.abc import Mapping
from dataclasses import dataclass
from types import MappingProxyType

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.data import load_table
from skychart.errors import InputError
from skychart.sky.haze import Haze
from skychart.sky.wavelengths import checked_wavelength

Array = NDArray[np.float64]


@dataclass(frozen=True)
class HazeType:
    """A kind of haze: `aerosol` as the tables call it at `humidity_percent`, and how much of it there usually is.

    `depth_550`: optical depth from sea level up at 550 nm. `scale_height_km`: over which its density falls to 1/e.
    """

    aerosol: str
    humidity_percent: float
    depth_550: float
    scale_height_km: float


# Marked haze keeps the particles of ordinary continental air: there is more of them, and no soot of towns is implied.
HAZE_TYPES: Mapping[str, HazeType] = MappingProxyType(
    {
        "clean": HazeType("continental_clean", 80, 0.05, 2),
        "average": HazeType("continental_average", 80, 0.15, 2),
        "hazy": HazeType("continental_average", 80, 0.40, 2),
        "maritime": HazeType("maritime_clean", 80, 0.10, 1),
        "dusty": HazeType("desert", 50, 0.40, 2),
    }
)


def haze_of(
    name: str,
    altitude_km: ArrayLike,
    wavelength_nm: ArrayLike,
    depth_550: float | None = None,
    scale_height_km: float | None = None,
) -> Haze:
    """Haze called `name`, one of `HAZE_TYPES`, in the layers between `altitude_km`.

    `altitude_km`: borders of the layers, ascending from 0 or more [km], shape (level,). `wavelength_nm`: 300 to 1000
    [nm], shape (wavelength,). `depth_550`: optical depth of all that lies above sea level at 550 nm, 0 or more;
    `scale_height_km`: above 0 [km]; the type's own where not given. The density falls as exp(-z / H), so a layer's
    depth does not depend on the other borders, and what lies above the last of them is left out.

    Extinction, single-scattering albedo and phase function are read between tabulated wavelengths on a logarithmic
    axis, extinction and phase function by their logarithms. Phase functions are tabulated from 400 to 700 nm and held
    beyond. Raises InputError.
    """
    if name not in HAZE_TYPES:
        raise InputError(f"unknown haze {name!r}; known: {', '.join(HAZE_TYPES)}")
    kind = HAZE_TYPES[name]
    depth_550 = kind.depth_550 if depth_550 is None else depth_550
    scale_height_km = kind.scale_height_km if scale_height_km is None else scale_height_km
    if not (np.isfinite(depth_550) and depth_550 >= 0):
        raise InputError(f"haze optical depth at 550 nm is {depth_550}, accepted is 0 or more")
    if not (np.isfinite(scale_height_km) and scale_height_km > 0):
        raise InputError(f"haze scale height is {scale_height_km} km, accepted is more than 0")
    altitude = np.asarray(altitude_km, dtype=float)
    if altitude.ndim != 1 or altitude.size < 2 or altitude[0] < 0 or not np.all(np.diff(altitude) > 0):
        raise InputError(f"altitude has shape {altitude.shape}, accepted are two or more, ascending from 0 or more")
    extinction, albedo = _bulk(kind, wavelength_nm)
    angle_deg, phase = _phase_function(kind.aerosol, wavelength_nm)
    share = -np.diff(np.exp(-altitude / scale_height_km))
    return Haze(depth_550 * share[:, None] * extinction, albedo, angle_deg, phase)


def _bulk(kind: HazeType, wavelength_nm: ArrayLike) -> tuple[Array, Array]:
    """Extinction relative to 550 nm and single-scattering albedo, each (wavelength,)."""
    columns = load_table("aerosol_bulk_opac_mie").columns
    rows = (columns["type"] == kind.aerosol) & (columns["rh_percent"] == kind.humidity_percent)
    tabulated_nm = columns["wavelength_nm"][rows]
    wavelength = checked_wavelength(wavelength_nm, tabulated_nm[0], tabulated_nm[-1])
    if wavelength.ndim != 1:
        raise InputError(f"wavelengths have shape {wavelength.shape}, accepted is one axis")
    at, tabulated = np.log(wavelength), np.log(tabulated_nm)
    extinction = np.exp(np.interp(at, tabulated, np.log(columns["ext_ratio_550"][rows])))
    return extinction, np.interp(at, tabulated, columns["ssa"][rows])


def _phase_function(aerosol: str, wavelength_nm: ArrayLike) -> tuple[Array, Array]:
    """Scattering angles [deg], (angle,), and the phase function, (wavelength, angle)."""
    columns = load_table("aerosol_phase_functions_mie").columns
    prefix = f"{aerosol}_"
    tabulated_nm = np.array([float(label.removeprefix(prefix)) for label in columns if label.startswith(prefix)])
    log = np.log([columns[f"{prefix}{wavelength:.0f}"] for wavelength in tabulated_nm])
    place = np.interp(np.log(np.asarray(wavelength_nm, dtype=float)), np.log(tabulated_nm), np.arange(len(log)))
    low = np.minimum(place.astype(np.intp), len(log) - 2)
    return columns["angle_deg"], np.exp(log[low] + (place - low)[:, None] * (log[low + 1] - log[low]))
