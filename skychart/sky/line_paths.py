"""Lines of water vapour and oxygen in the sky's light: by the path from sun over the point of scattering to the eye.

Light scattered once is weakened by the lines along exactly that path, a mean over the line of sight. All other light of
that direction takes the same ways, where there is light scattered once; in the planet's shadow the line of sight itself
is what is known of its way.
"""

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from skychart.sky import air, gases
from skychart.sky.lines import LineTable
from skychart.sky.observer import Station
from skychart.sky.rays import OUTWARD
from skychart.sky.refraction import BentRays
from skychart.sky.shells import tangent_altitude
from skychart.sky.sight import Lines, along

Array = NDArray[np.float64]

_EVERY = 5  # boundary; lines need no finer steps along a line of sight
_STEP_DEG = 0.25
_UNLIT = 1e-25  # light per unit solar irradiance [1/sr]


@dataclass(frozen=True, eq=False)
class LinePaths:
    """Amounts of water [cm] and oxygen [air masses] along paths from a station.

    ``boundaries`` of the station's layers stand for the places of scattering; ``layers`` (layer, 2): vertical amounts
    of the station's layers.
    """

    station: Station
    table: LineTable
    boundaries: NDArray[np.intp]
    layers: Array
    toward_sun: "SunAmounts"

    @classmethod
    def of(cls, station: Station, wavelength_nm: Array, water_cm: float, pressure_hpa: float) -> "LinePaths":
        """Paths of the wanted column of water [cm] and air of the wanted pressure [hPa] at sea level."""
        levels, density = air.standard_air(pressure_hpa)
        molecules = air.column_of_layers(levels, density)
        whole = air.column_of_layers(*air.standard_air()).sum()
        amounts = np.stack([gases.water_layers(levels, water_cm), molecules / whole], axis=1)
        below = np.concatenate([np.zeros((1, 2)), np.cumsum(amounts, axis=0)])
        altitude = station.shells.altitude_km
        layers = np.diff(np.stack([np.interp(altitude, levels, column) for column in below.T], axis=1), axis=0)
        top = len(altitude) - 1
        boundaries = np.union1d(np.arange(0, top, _EVERY), (station.start, top))
        return cls(station, LineTable.of(wavelength_nm), boundaries, layers, SunAmounts.of(station, layers, boundaries))

    def beam(self, solar_zenith_angle: Array) -> NDArray[np.float32]:
        """What lines leave of the direct sun, (..., wavelength)."""
        here = np.flatnonzero(self.boundaries == self.station.start)[0]
        return self._left(self.toward_sun.at(here, np.cos(solar_zenith_angle)))

    def left(self, lines: Lines) -> tuple[Array, Array]:
        """What lines leave of the light along lines of sight, each (line, wavelength).

        Of light scattered once, by its path from the sun; and of light that starts outside the air, by the line of
        sight alone. Where nothing is scattered once the first equals the second.
        """
        station = self.station
        inward, outward = self._from_observer(np.unique(lines.view_cosine))
        once = np.ones((len(lines.view_cosine), len(self.table.wavelength_nm)))
        sight = np.ones_like(once)
        for fan, ray, chosen in station.blocks(lines, self.boundaries):
            level, cos_there, _, _ = along(fan, ray, lines, chosen)
            place = self.boundaries[level]
            branch = np.nonzero(fan.reached[ray])[0]
            near = np.where(branch[:, None] == OUTWARD, outward[ray, place], inward[ray, place])
            left = self._left(near + self.toward_sun.at(level, cos_there))
            weight = fan.weight.sum(axis=0)[ray][fan.reached[ray]].astype(np.float32)
            light = station.table.at(place, cos_there) * weight
            total = light.sum(axis=1)
            sight[chosen] = self._left(near[-1])
            share = (light * left).sum(axis=1) / np.where(total > 0, total, 1)
            once[chosen] = np.where(total > _UNLIT, share, sight[chosen])
        return once, sight

    def _left(self, amounts: Array) -> NDArray[np.float32]:
        return self.table.at(amounts[..., 0], amounts[..., 1])

    def _from_observer(self, view_cosine: Array) -> tuple[Array, Array]:
        """Amounts from the station to each boundary, inward and outward, (ray, boundary, 2)."""
        shells, start = self.station.shells, self.station.start
        tangent = tangent_altitude(shells.altitude_km[start], view_cosine, shells.planet_radius_km)
        slant = shells.slant_factors(tangent)[..., None] * self.layers
        below = np.concatenate([np.zeros_like(slant[:, :1]), np.cumsum(slant, axis=1)], axis=1)
        here = below[:, start, None]
        down = (view_cosine < 0)[:, None, None]
        return np.maximum(here - below, 0), np.maximum(below + np.where(down, here, -here), 0)


@dataclass(frozen=True, eq=False)
class SunAmounts:
    """Amounts from some boundaries to the sun, on its zenith angle every quarter degree: (boundary, angle, 2)."""

    values: Array

    @classmethod
    def of(cls, station: Station, layers: Array, boundaries: NDArray[np.intp]) -> "SunAmounts":
        """Of the station's shells with the given vertical amounts, (layer, 2), from ``boundaries`` of them."""
        rays = BentRays.of(replace(station.shells, extinction_depth=layers))
        angles = np.radians(np.arange(0, 180 + _STEP_DEG, _STEP_DEG))
        values = np.empty((len(boundaries), len(angles), 2))
        for row, start in enumerate(map(int, boundaries)):
            seen = np.minimum(angles, rays.lowest(start))
            seen = seen[: np.searchsorted(seen, rays.lowest(start)) + 1]
            geometric = seen + rays.refraction(start, np.cos(seen))
            depth = rays.depth(start, np.cos(seen))
            for amount in range(2):
                values[row, :, amount] = np.interp(angles, geometric, depth[:, amount])
        return cls(values)

    def at(self, boundary: NDArray[np.intp], cos_zenith: Array) -> Array:
        """Amounts (..., 2) from ``boundary``, its number among those, toward the sun; the two broadcast to (...)."""
        place = np.degrees(np.arccos(np.clip(cos_zenith, -1, 1))) / _STEP_DEG
        low = np.minimum(place.astype(np.intp), self.values.shape[1] - 2)
        part = (place - low)[..., None]
        return (1 - part) * self.values[boundary, low] + part * self.values[boundary, low + 1]
