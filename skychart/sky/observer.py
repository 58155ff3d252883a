"""What an observer sees: the Stokes parameters along lines of sight, and the light on the ground.

Light scattered once is gathered straight from the beam at every sub-step; the rest from the solved field.
"""

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, replace
from typing import Protocol

import numpy as np
from numpy.typing import NDArray

from skychart.sky import dipole, sight
from skychart.sky.atmosphere import Atmosphere
from skychart.sky.beam import SunTable
from skychart.sky.field import Field
from skychart.sky.rays import Crossings, crossings
from skychart.sky.shape import Shape
from skychart.sky.shells import Shells, tangent_altitude
from skychart.sky.sight import Lines

Array = NDArray[np.float64]

Phase = Callable[[Array], Array]


class HazeSource(Protocol):
    """What haze sends at the lowest ``levels`` of the field."""

    @property
    def levels(self) -> int:
        """How many levels hold haze."""

    def with_level(self, upper: int, part: float) -> "HazeSource":
        """The same with a level inserted before ``upper``, that ``part`` of the way to it."""

    def along(self, cosine: Array, level: NDArray[np.intp]) -> "RaySource":
        """What it sends back along a ray that crosses each ``level`` at a zenith cosine, both (crossing,)."""


class RaySource(Protocol):
    """What haze sends back along one ray."""

    def at(self, cos_chi: Array, cos_azimuth: Array) -> Array:
        """Source [1/sr], (line, crossing, wavelength); of the sun's zenith angle and azimuth, (line, crossing)."""


_AT_ONCE = 3000  # lines of sight times wavelengths
_LEAST_LINES = 64  # at once, however many wavelengths


@dataclass(frozen=True, eq=False)
class Station:
    """An observer's place: the layers with its altitude among the boundaries, and the sun's table on them.

    ``scaled``: in hazy air, the same table when the peak of the haze's phase function counts as unscattered.
    """

    shells: Shells
    table: SunTable
    start: int
    scaled: SunTable | None = None

    @classmethod
    def of(cls, air: Atmosphere, altitude_km: Array, observer_km: float = 0.0) -> "Station":
        """An observer at ``observer_km``, one of the layer boundaries ``altitude_km`` [km], shape (boundary,)."""
        shells = Shells.of(air, altitude_km)
        start = int(np.searchsorted(altitude_km, observer_km))
        if air.haze is None:
            return cls(shells, SunTable.of(shells), start)
        depths = shells.extinction_depth, Shells.of(air, altitude_km, air.haze.peak).extinction_depth
        table, scaled = SunTable.of(replace(shells, extinction_depth=np.concatenate(depths, axis=1))).split()
        return cls(shells, table, start, scaled)

    def of_air(self, air: Atmosphere) -> "Station":
        """The same place in the same air at other wavelengths."""
        shells = Shells.of(air, self.shells.altitude_km)
        return replace(self, shells=shells, table=self.table.of_depth(shells.extinction_depth), scaled=None)

    def beyond(self) -> "Station":
        """The same place under the light that, beside the beam, counts as unscattered. Hazy air only."""
        if self.scaled is None:
            raise TypeError("a station in air without haze")
        return replace(self, table=replace(self.scaled, less=self.table.spectra))

    def single(self, lines: Lines, scatterers: dipole.Scatterers, phase: Phase | None) -> NDArray[np.float64]:
        """I, Q, U of light scattered once, shape (line, 3, wavelength) [1/sr].

        ``phase``: of the haze, if there is any, by the cosine of the scattering angle.
        """
        a, b = scatterers.a, scatterers.b
        result = np.zeros((len(lines.view_cosine), 3, len(a)))
        for chosen, (molecules, *haze) in self._met(lines):
            _, h, v = sight.axes(lines, chosen)
            hh, vv, hv = (0.5 * (x.rho * y.rho + x.alpha * y.alpha)[:, None] for x, y in ((h, h), (v, v), (h, v)))
            result[chosen, 0] = molecules * (a * (hh + vv) + 2 * b)
            result[chosen, 1] = molecules * a * (hh - vv)
            result[chosen, 2] = molecules * a * -2 * hv
            if phase is not None:
                seen = self.table.apparent(self.start, lines.solar_zenith[chosen])
                result[chosen, 0] += haze[0] * phase(sight.cosine_to_sun(lines, chosen, seen)) / (4 * np.pi)
        return result

    def met_by_haze(self, lines: Lines) -> Array:
        """What the phase function multiplies in light that haze scatters once, (line, wavelength) [1/sr]."""
        result = np.zeros((len(lines.view_cosine), self.shells.extinction_depth.shape[1]))
        for chosen, (_, haze) in self._met(lines):
            result[chosen] = haze / (4 * np.pi)
        return result

    def _met(self, lines: Lines) -> Iterator[tuple[NDArray[np.intp], list[Array]]]:
        """Yield indices of some lines, and what each scatterer sends along them from the beam, (line, wavelength)."""
        everything = np.arange(len(self.shells.altitude_km))
        for fan, ray, chosen in self.blocks(lines, everything):
            level, cos_there, _, _ = sight.along(fan, ray, lines, chosen)
            beam = self.table.at(level, cos_there)
            weights = (weight[ray][fan.reached[ray]].astype(np.float32) for weight in fan.weight)
            yield chosen, [np.einsum("bql,ql->bl", beam, weight, optimize=False) for weight in weights]

    def multiple(
        self,
        field: Field,
        lines: Lines,
        scatterers: dipole.Scatterers,
        albedo: Array,
        haze_source: HazeSource | None = None,
    ) -> NDArray[np.float64]:
        """I, Q, U of light scattered more than once, by the ground too; shape (line, 3, wavelength) [1/sr].

        Haze sends what ``scatterers`` say, or what ``haze_source`` does.
        """
        a, b, forward = scatterers
        place = field.between_levels(float(self.shells.altitude_km[self.start]))
        if place is not None:
            field = field.with_level(*place)
            haze_source = haze_source and haze_source.with_level(*place)
        levels = np.searchsorted(self.shells.altitude_km, field.level_altitude_km)
        result = np.zeros((len(lines.view_cosine), 3, len(a)))
        sent_by_haze = _SentByHaze(haze_source) if haze_source is not None else None
        for fan, ray, chosen in self.blocks(lines, levels):
            level, cos_there, cosine, sine = sight.along(fan, ray, lines, chosen)
            entries = _interpolated(field.tensor_shape, field.tensor, level, cos_there)
            weights = [weight[ray][fan.reached[ray]].astype(np.float32)[:, None] for weight in fan.weight]
            omega, h, v = sight.axes(lines, chosen)
            hh, vv, hv = sight.source_coefficients(h, v, cosine, sine)
            plain = np.broadcast_to(dipole.TRACE, hh.shape)
            tensor = entries[..., : dipole.ENTRIES, :]
            sums = _summed([hh + vv, hh - vv, -2 * hv, plain], tensor * weights[0])
            result[chosen] = a * sums[:, :3]
            result[chosen, 0] += 2 * b * sums[:, 3]
            if forward is not None:
                toward = np.stack(
                    [np.broadcast_to(omega.s[:, None], cosine.shape), sight.along_rho(omega, cosine, sine)], -1
                )
                trace = _summed([plain], tensor * weights[1])[:, 0]
                flux = _summed([toward], entries[..., dipole.ENTRIES :, :] * weights[1])[:, 0]
                result[chosen, 0] += 2 * dipole.ISOTROPIC * (trace + forward * flux)
            if sent_by_haze is not None:
                light = sent_by_haze.at(fan, ray, omega, float(lines.view_cosine[chosen[0]]), cos_there, level)
                result[chosen, 0] += np.einsum("bqw,qw->bw", light, weights[1][: light.shape[1], 0])
            if fan.ground[ray].any():
                lit = self._ground_light(field, fan, ray, lines, chosen)
                result[chosen, 0] += fan.ground[ray] * albedo / np.pi * lit
        return result

    def _ground_light(self, field: Field, fan: Crossings, ray: int, lines: Lines, chosen: NDArray[np.intp]) -> Array:
        cos_there, _, _ = dipole.moved(
            fan.ground_cos_turn[ray], fan.ground_sin_turn[ray],
            np.cos(lines.relative_azimuth[chosen]), np.sin(lines.relative_azimuth[chosen]),
            np.cos(lines.solar_zenith[chosen]), np.sin(lines.solar_zenith[chosen]),
        )  # fmt: skip
        node, low, high = field.ground_shape.weights(np.zeros((), np.intp), cos_there)
        return low[:, None] * field.ground[node] + high[:, None] * field.ground[node + 1]

    def blocks(self, lines: Lines, boundaries: NDArray[np.intp]) -> Iterator[tuple[Crossings, int, NDArray[np.intp]]]:
        """Yield (fan of the distinct view cosines in ascending order, ray, indices of some lines along it).

        ``boundaries``: of the shells, those that count as levels.
        """
        view, which = np.unique(lines.view_cosine, return_inverse=True)
        fan = self._fan(view, boundaries)
        order = np.argsort(which, kind="stable")
        at_once = max(_AT_ONCE // self.shells.extinction_depth.shape[1], _LEAST_LINES)
        for part in np.split(order, np.searchsorted(which[order], np.arange(1, len(view)))):
            for first in range(0, len(part), at_once):
                yield fan, int(which[part[0]]), part[first : first + at_once]

    def _fan(self, view: Array, boundaries: NDArray[np.intp]) -> Crossings:
        shells = self.shells
        tangent = tangent_altitude(shells.altitude_km[self.start], view, shells.planet_radius_km)
        factors = shells.slant_factors(tangent)[..., None]
        extinction, *scattering = (
            np.add.reduceat(factors * depth, boundaries[:-1], axis=1)
            for depth in (shells.extinction_depth, *shells.scattering_depth)
        )
        start = int(np.searchsorted(boundaries, self.start))
        return crossings(shells.altitude_km[boundaries], scattering, extinction, start, view, shells.planet_radius_km)


class _SentByHaze:
    """Haze's source along ray after ray; what all blocks of lines along one ray need is made once."""

    def __init__(self, source: HazeSource) -> None:
        self._source = source
        self._ray: tuple[int, Array, RaySource] | None = None

    def at(
        self, fan: Crossings, ray: int, omega: dipole.Vector, view_cosine: float, cos_chi: Array,
        level: NDArray[np.intp],
    ) -> Array:  # fmt: skip
        """Source at the crossings of the lower levels, (line, crossing, wavelength); they come first along a ray."""
        low = level < self._source.levels
        if self._ray is None or self._ray[0] != ray:
            reached = fan.reached[ray]
            cos_turn, sin_turn = fan.cos_turn[ray][reached][low], fan.sin_turn[ray][reached][low]
            cosine = np.clip(view_cosine * cos_turn + np.sqrt(1 - view_cosine**2) * sin_turn, -1, 1)
            self._ray = ray, cosine, self._source.along(cosine, level[low])
        _, cosine, sent = self._ray
        across = np.sqrt(np.maximum((1 - cosine**2) * (1 - cos_chi[:, low] ** 2), 1e-12))
        azimuth = (omega.s[:, None] - cosine * cos_chi[:, low]) / across
        return sent.at(cos_chi[:, low], np.clip(azimuth, -1, 1))


def _summed(coefficients: Sequence[Array], entries: NDArray[np.float32]) -> NDArray[np.float32]:
    """Sum over crossings and entries: (line, coefficient, wavelength)."""
    wanted = np.stack(coefficients, axis=1).reshape(len(entries), len(coefficients), -1).astype(np.float32)
    return wanted @ entries.reshape(len(entries), wanted.shape[2], -1)


def _interpolated(
    shape: Shape, values: NDArray[np.float32], level: NDArray[np.intp], cos_chi: Array
) -> NDArray[np.float32]:
    """Field entries at (line, crossing): (line, crossing, entry, wavelength)."""
    node, lower, upper = shape.weights(level, cos_chi)
    rows = values.reshape(-1, *values.shape[2:])
    row = level * values.shape[1] + node
    low, high = (part[..., None, None].astype(np.float32) for part in (lower, upper))
    return low * rows[row] + high * rows[row + 1]
