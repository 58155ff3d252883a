"""The published flat molecular sky (Coulson, Dave & Sekera's problem), solved once for every case.

Flat is a planet a thousand times the size of the earth; each case is one entry on the wavelength axis, labelled with
about the wavelength at which real air is as thick.
Normalisation of the tables: pi times radiance over the irradiance on a plane facing the sun.
"""

import functools

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.data.tables import load_table
from skychart.sky import Atmosphere, solve

CASES = (  # optical depth, ground albedo
    *((tau, 0.0) for tau in (0.02, 0.05, 0.1, 0.15, 0.25, 0.5, 1.0)),
    *((tau, albedo) for tau in (0.1, 0.25, 0.5) for albedo in (0.25, 0.8)),
)
MU0 = np.array([0.1, 0.2, 0.4, 0.6, 0.8, 0.92, 1.0])
MU = np.array([0.02, 0.06, 0.1, 0.16, 0.2, 0.28, 0.32, 0.4, 0.52, 0.64, 0.72, 0.84, 0.92, 0.96, 0.98, 1.0])
PHI_DEG = np.arange(0.0, 181.0, 30.0)

_DEPOLARISATION_550_NM = 0.02842  # Bucholtz 1995, Table 1
_DEPTH_OF_AIR_AT_500_NM = 0.143
_SCALE_HEIGHT_KM = 8.0
_FLAT_RADIUS_KM = 6371e3
_TOP_KM = 50.0
_UP_NODES = 12

# What a default grid may miss the tables by, RMS of I: agreed before it was measured.
RMS_LIMIT = {0.02: 0.002, 0.05: 0.002, 0.1: 0.002, 0.15: 0.003, 0.25: 0.003, 0.5: 0.007, 1.0: 0.013}


class FlatSky:
    """Light coming down in the published cases, in the tables' own conventions; `sky` is the solution itself."""

    def __init__(self) -> None:
        depth, albedo = np.array([*CASES, CASES[0]]).T
        depolarisation = np.where(np.arange(len(depth)) < len(CASES), 0.0, _DEPOLARISATION_550_NM)
        level_altitude_km = np.arange(0.0, _TOP_KM + 1)
        share = -np.diff(np.exp(-level_altitude_km / _SCALE_HEIGHT_KM))
        self.sky = solve(
            Atmosphere(
                level_altitude_km=level_altitude_km,
                wavelength_nm=500 * (_DEPTH_OF_AIR_AT_500_NM / depth) ** 0.25,
                rayleigh_depth=share[:, None] / share.sum() * depth,
                absorption_depth=np.zeros((len(share), len(depth))),
                depolarisation=depolarisation,
                ground_albedo=albedo,
                planet_radius_km=_FLAT_RADIUS_KM,
            )
        )

    def stokes(self, mu0: ArrayLike, mu: ArrayLike, phi_deg: ArrayLike) -> NDArray[np.float64]:
        """I, Q, U of the tables at cosines of zenith angles and azimuth [degrees], shape (..., 3, case)."""
        return np.pi * self.sky.stokes(elevation_deg(mu0), elevation_deg(mu), phi_deg)

    @functools.cached_property
    def grid(self) -> NDArray[np.float64]:
        """I, Q, U on the whole published grid, shape (mu0, mu, phi, 3, case)."""
        return self.stokes(MU0[:, None, None], MU[:, None], PHI_DEG)

    def down_fluxes(self, mu0: ArrayLike) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
        """Diffuse and direct flux reaching the ground, incident normal flux pi, each of shape (..., case)."""
        diffuse, direct = self.sky.ground_irradiance(elevation_deg(mu0))
        return np.pi * diffuse, np.pi * direct

    def up_flux(self, mu0: float) -> NDArray[np.float64]:
        """Flux leaving at the top, incident normal flux pi, shape (case,)."""
        node, weight = np.polynomial.legendre.leggauss(_UP_NODES)
        mu, mu_weight = 0.5 * (node + 1), 0.5 * weight
        phi_deg = (np.arange(_UP_NODES) + 0.5) * 180 / _UP_NODES
        light = self.sky.stokes(elevation_deg(mu0), -elevation_deg(mu)[:, None], phi_deg, altitude_km=_TOP_KM)
        intensity = np.pi * light[..., 0, :].mean(axis=1)
        return 2 * np.pi * (mu * mu_weight) @ intensity

    def forward_to_sideways(self) -> tuple[float, float]:
        """Light scattered once toward the observer from the sun's direction over that at 90° from it, both 45° up.

        First without depolarisation, then with that of air at 550 nm.
        """
        radiance = self.sky.single(45.0, 45.0, np.array([0.0, 180.0]))[:, 0]
        ratio = radiance[0] / radiance[1]
        return float(ratio[0]), float(ratio[-1])

    def table_rows(self) -> tuple[dict[str, NDArray[np.float64]], NDArray[np.float64], NDArray[np.float64]]:
        """Columns of the table of Natraj et al. 2009, its I, Q, U and ours, both of shape (row, 3)."""
        columns = load_table("checks/rayleigh_sky_natraj2009").columns
        case = [CASES.index(pair) for pair in zip(columns["tau"], columns["albedo"], strict=True)]
        computed = self.grid[
            np.searchsorted(MU0, columns["mu0"]),
            np.searchsorted(MU, columns["mu"]),
            np.searchsorted(PHI_DEG, columns["phi_deg"]),
            :,
            case,
        ]
        return columns, np.stack([columns[name] for name in "IQU"], axis=-1), computed


def elevation_deg(cosine_of_zenith_angle: ArrayLike) -> NDArray[np.float64]:
    """Elevation [degrees] of a direction with a cosine of the zenith angle as the tables give it, any shape."""
    return np.degrees(np.arcsin(np.asarray(cosine_of_zenith_angle, dtype=float)))
